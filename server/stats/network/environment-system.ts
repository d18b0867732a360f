import { choleskyUpper } from '#server/stats/linear/dense.ts';
import { invertFromTriangle, solveTransposed, solveUpper } from '#server/stats/linear/skipping-factor.ts';
import type { EntryAbsorption } from './entry-absorption.ts';
import { applyQ } from './entry-projection.ts';
import type { NetworkFrame } from './network-frame.ts';
import { addCombination } from './row-products.ts';

/** The environments' equations C β = E'Qy once the entries are absorbed. */
export interface EnvironmentSolution {
  /** R with R'R = C, columnCount squared, row-major */
  readonly triangle: Float64Array;
  readonly logDeterminant: number;
  /** effects of the kept environments; the dropped ones are 0 */
  readonly beta: Float64Array;
  /** P y of each cell */
  readonly py: Float64Array;
  /** y'Py */
  readonly quadratic: number;
}

export interface EnvironmentSystem extends EnvironmentSolution {
  /** C⁻¹, columnCount squared, row-major */
  readonly inverse: Float64Array;
}

/** C = E'QE = Σ E'BE − E'XSX'E, upper triangle. */
function gatherSystem(frame: NetworkFrame, absorption: EntryAbsorption): Float64Array {
  const size = frame.columnCount;
  const system = new Float64Array(size * size);
  const { d, x, s, blockFactor } = absorption;
  const { column, blockStart } = frame;
  const xs = new Float64Array(frame.maxLevels * frame.maxCells);
  const row = new Float64Array(frame.maxCells);
  const weights = new Float64Array(frame.maxLevels);
  for (let i = 0; i < frame.entries.length; i++) {
    const q = frame.levelCount[i]!;
    const first = frame.start[i]!;
    const length = frame.start[i + 1]! - first;
    const xAt = absorption.projectedStart[i]!;
    xs.fill(0, 0, q * length);
    for (let r = 0; r < q; r++)
      addCombination(xs, r * length, length, x, xAt, length, s, absorption.squareStart[i]! + r * q, q);
    for (let b = frame.firstBlock[i]!; b < frame.firstBlock[i + 1]!; b++) {
      const end = blockStart[b + 1]!;
      for (let j = blockStart[b]!; j < end; j++) {
        const ej = column[j]!;
        if (ej < 0) continue;
        const from = j - first;
        for (let r = 0; r < q; r++) weights[r] = -xs[r * length + from]!;
        row.fill(0, from, length);
        addCombination(row, from, length - from, x, xAt + from, length, weights, 0, q);
        const dj = d[j]!;
        row[from]! += dj;
        for (let l = j; l < end; l++) row[l - first]! -= blockFactor[b]! * dj * d[l]!;
        // columns ascend within an entry, and only its first cell may be without one: all of these lie right of the diagonal
        const target = ej * size;
        for (let l = from; l < length; l++) system[target + column[first + l]!]! += row[l]!;
      }
    }
  }
  return system;
}

/** E'x: sums over the kept environments. */
export function sumByEnvironment(frame: NetworkFrame, x: Float64Array): Float64Array {
  const sums = new Float64Array(frame.columnCount);
  for (let j = 0; j < frame.cellCount; j++) if (frame.column[j]! >= 0) sums[frame.column[j]!]! += x[j]!;
  return sums;
}

/** x − E effects, where effects is the environments' share. */
export function subtractEnvironments(
  frame: NetworkFrame,
  x: Float64Array,
  effects: Float64Array,
): Float64Array {
  const rest = x.slice();
  for (let j = 0; j < rest.length; j++) if (frame.column[j]! >= 0) rest[j]! -= effects[frame.column[j]!]!;
  return rest;
}

/** C⁻¹x, by rows, since C⁻¹ is symmetric. */
export function multiplyInverse(inverse: Float64Array, size: number, x: Float64Array): Float64Array {
  const out = new Float64Array(size);
  addCombination(out, 0, size, inverse, 0, size, x, 0, size);
  return out;
}

/** out = P x = Q(x − E C⁻¹E'Qx); x is left as it is. */
export function applyP(
  frame: NetworkFrame,
  absorption: EntryAbsorption,
  inverse: Float64Array,
  x: Float64Array,
  out: Float64Array,
): void {
  applyQ(frame, absorption, x, out);
  const effects = multiplyInverse(inverse, frame.columnCount, sumByEnvironment(frame, out));
  applyQ(frame, absorption, subtractEnvironments(frame, x, effects), out);
}

/** Solves for the environments, or null where rounding leaves C without full rank. */
export function solveEnvironments(
  frame: NetworkFrame,
  absorption: EntryAbsorption,
): EnvironmentSolution | null {
  const size = frame.columnCount;
  const triangle = choleskyUpper(gatherSystem(frame, absorption), size);
  if (triangle === null) return null;
  let logDeterminant = 0;
  for (let r = 0; r < size; r++) logDeterminant += 2 * Math.log(triangle[r * size + r]!);
  const py = new Float64Array(frame.cellCount);
  applyQ(frame, absorption, frame.y, py);
  const beta = sumByEnvironment(frame, py);
  solveTransposed(triangle, size, beta);
  solveUpper(triangle, size, beta);
  applyQ(frame, absorption, subtractEnvironments(frame, frame.y, beta), py);
  let quadratic = 0;
  for (let j = 0; j < py.length; j++) quadratic += frame.y[j]! * py[j]!;
  return { triangle, logDeterminant, beta, py, quadratic };
}

/** The solution with C⁻¹, which all derivatives need. */
export function invertEnvironments(frame: NetworkFrame, solution: EnvironmentSolution): EnvironmentSystem {
  return { ...solution, inverse: invertFromTriangle(solution.triangle, frame.columnCount) };
}
