import { choleskyUpper } from '#server/stats/linear/dense.ts';
import { invertFromTriangle } from '#server/stats/linear/skipping-factor.ts';
import type { EntryAbsorption } from './entry-absorption.ts';
import type { NetworkFrame } from './network-frame.ts';

/** The environments' equations C β = E'Qy once the entries are absorbed. */
export interface EnvironmentSystem {
  /** C⁻¹, columnCount squared, row-major */
  readonly inverse: Float64Array;
  readonly logDeterminant: number;
  /** effects of the kept environments; the dropped ones are 0 */
  readonly beta: Float64Array;
  /** P y of each cell */
  readonly py: Float64Array;
  /** y'Py */
  readonly quadratic: number;
}

/** C = E'QE, upper triangle: C[e_j, e_k] += d_j δ_jk − d_j d_k Σ_{r∈Z_j, s∈Z_k} K[r, s]. */
function gatherSystem(frame: NetworkFrame, absorption: EntryAbsorption): Float64Array {
  const size = frame.columnCount;
  const system = new Float64Array(size * size);
  const { d, k, blockStart } = absorption;
  const { column, siteColumn, yearColumn } = frame;
  const row = new Float64Array(absorption.maxWidth);
  for (let i = 0; i < frame.entries.length; i++) {
    const q = frame.width[i]!;
    const at = blockStart[i]!;
    const end = frame.start[i + 1]!;
    for (let j = frame.start[i]!; j < end; j++) {
      const ej = column[j]!;
      if (ej < 0) continue;
      const dj = d[j]!;
      const site = at + siteColumn[j]! * q;
      const year = at + yearColumn[j]! * q;
      for (let r = 0; r < q; r++) row[r] = dj * (k[at + r]! + k[site + r]! + k[year + r]!);
      const target = ej * size;
      system[target + ej]! += dj;
      // cells of an entry are in the order of their environments, so e_k ≥ e_j
      for (let l = j; l < end; l++) {
        const el = column[l]!;
        if (el >= 0) system[target + el]! -= d[l]! * (row[0]! + row[siteColumn[l]!]! + row[yearColumn[l]!]!);
      }
    }
  }
  return system;
}

/** out = Q x; entry by entry, so the entries' own effects are gone from it. */
export function applyQ(
  frame: NetworkFrame,
  absorption: EntryAbsorption,
  x: Float64Array,
  out: Float64Array,
): void {
  const { d, k, blockStart } = absorption;
  const { siteColumn, yearColumn } = frame;
  const u = new Float64Array(absorption.maxWidth);
  const t = new Float64Array(absorption.maxWidth);
  for (let i = 0; i < frame.entries.length; i++) {
    const q = frame.width[i]!;
    const at = blockStart[i]!;
    const end = frame.start[i + 1]!;
    u.fill(0, 0, q);
    for (let j = frame.start[i]!; j < end; j++) {
      const dx = d[j]! * x[j]!;
      u[0]! += dx;
      u[siteColumn[j]!]! += dx;
      u[yearColumn[j]!]! += dx;
    }
    t.fill(0, 0, q);
    for (let s = 0; s < q; s++) {
      const value = u[s]!;
      const row = at + s * q;
      for (let r = 0; r < q; r++) t[r]! += k[row + r]! * value;
    }
    for (let j = frame.start[i]!; j < end; j++)
      out[j] = d[j]! * (x[j]! - t[0]! - t[siteColumn[j]!]! - t[yearColumn[j]!]!);
  }
}

/** E'x: sums over the kept environments. */
export function sumByEnvironment(frame: NetworkFrame, x: Float64Array): Float64Array {
  const sums = new Float64Array(frame.columnCount);
  for (let j = 0; j < frame.cellCount; j++) if (frame.column[j]! >= 0) sums[frame.column[j]!]! += x[j]!;
  return sums;
}

/** C⁻¹x, by rows, since C⁻¹ is symmetric. */
export function multiplyInverse(inverse: Float64Array, size: number, x: Float64Array): Float64Array {
  const out = new Float64Array(size);
  for (let s = 0; s < size; s++) {
    const value = x[s]!;
    if (value === 0) continue;
    const row = s * size;
    for (let r = 0; r < size; r++) out[r]! += inverse[row + r]! * value;
  }
  return out;
}

/**
 * out = P x = Q(x − E C⁻¹E'Qx); x is left as it is.
 * @returns C⁻¹E'Qx, the environments' part of x
 */
export function applyP(
  frame: NetworkFrame,
  absorption: EntryAbsorption,
  inverse: Float64Array,
  x: Float64Array,
  out: Float64Array,
): Float64Array {
  applyQ(frame, absorption, x, out);
  const effects = multiplyInverse(inverse, frame.columnCount, sumByEnvironment(frame, out));
  const rest = new Float64Array(frame.cellCount);
  for (let j = 0; j < rest.length; j++)
    rest[j] = frame.column[j]! < 0 ? x[j]! : x[j]! - effects[frame.column[j]!]!;
  applyQ(frame, absorption, rest, out);
  return effects;
}

/** Solves for the environments, or null where rounding leaves C without full rank. */
export function solveEnvironments(
  frame: NetworkFrame,
  absorption: EntryAbsorption,
): EnvironmentSystem | null {
  const size = frame.columnCount;
  const triangle = choleskyUpper(gatherSystem(frame, absorption), size);
  if (triangle === null) return null;
  let logDeterminant = 0;
  for (let r = 0; r < size; r++) logDeterminant += 2 * Math.log(triangle[r * size + r]!);
  const inverse = invertFromTriangle(triangle, size);
  const py = new Float64Array(frame.cellCount);
  const beta = applyP(frame, absorption, inverse, frame.y, py);
  let quadratic = 0;
  for (let j = 0; j < py.length; j++) quadratic += frame.y[j]! * py[j]!;
  return { inverse, logDeterminant, beta, py, quadratic };
}
