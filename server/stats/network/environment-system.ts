import { choleskyUpper } from '#server/stats/linear/dense.ts';
import { solveTransposed, solveUpper } from '#server/stats/linear/skipping-factor.ts';
import { invertFromTriangle } from '#server/stats/linear/triangle-inverse.ts';
import type { EntryAbsorption } from './entry-absorption.ts';
import { applyQ } from './entry-projection.ts';
import type { NetworkFrame } from './network-frame.ts';
import { addCombination, multiplyRows } from './row-products.ts';

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

/** Working space of gatherSystem for one entry with q inner levels. */
interface GatherScratch {
  /** f times Z_i'D1_b: a row of q for each block, and S times it */
  readonly shares: Float64Array;
  readonly solved: Float64Array;
  /** what a cell has in common with each block and each level */
  readonly byBlock: Float64Array;
  readonly byLevel: Float64Array;
}

function shareLevels(
  frame: NetworkFrame,
  { d, s, blockFactor, squareStart }: EntryAbsorption,
  i: number,
  { shares, solved }: GatherScratch,
): void {
  const q = frame.levelCount[i]!;
  const firstBlock = frame.firstBlock[i]!;
  const blocks = frame.firstBlock[i + 1]! - firstBlock;
  shares.fill(0, 0, blocks * q);
  for (let j = frame.start[i]!; j < frame.start[i + 1]!; j++) {
    const b = frame.block[j]!;
    shares[(b - firstBlock) * q + frame.level[j]!]! += blockFactor[b]! * d[j]!;
  }
  multiplyRows(solved, shares, 0, s, squareStart[i]!, blocks, q, q);
}

/**
 * C = E'QE, upper triangle. With X_j = d_j(1_y − n_b), y and b level and block of cell j and n_b = f Z_i'D1_b,
 * Q_jl = d_j δ_jl − d_j d_l (f within a block + (1_y − n_b)'S(1_y − n_b) of the two): looked up, at a cost without q.
 */
function gatherSystem(frame: NetworkFrame, absorption: EntryAbsorption): Float64Array {
  const size = frame.columnCount;
  const system = new Float64Array(size * size);
  const { d, s, blockFactor, squareStart } = absorption;
  const { column, block, level } = frame;
  const rows = frame.maxLevels * frame.maxCells;
  const scratch: GatherScratch = {
    shares: new Float64Array(rows),
    solved: new Float64Array(rows),
    byBlock: new Float64Array(frame.maxCells),
    byLevel: new Float64Array(frame.maxLevels),
  };
  const { shares, solved, byBlock, byLevel } = scratch;
  for (let i = 0; i < frame.entries.length; i++) {
    const q = frame.levelCount[i]!;
    const firstBlock = frame.firstBlock[i]!;
    const blocks = frame.firstBlock[i + 1]! - firstBlock;
    const end = frame.start[i + 1]!;
    shareLevels(frame, absorption, i, scratch);
    for (let j = frame.start[i]!; j < end; j++) {
      const ej = column[j]!;
      if (ej < 0) continue;
      const dj = d[j]!;
      const own = block[j]! - firstBlock;
      const at = squareStart[i]! + level[j]! * q;
      for (let y = 0; y < q; y++) byLevel[y] = dj * (s[at + y]! - solved[own * q + y]!);
      // cells of an entry ascend in blocks and columns, and only its first may be without a column
      for (let b = own; b < blocks; b++) {
        let sum = 0;
        for (let y = 0; y < q; y++) sum += shares[b * q + y]! * byLevel[y]!;
        byBlock[b] = -sum;
      }
      byBlock[own]! += dj * blockFactor[block[j]!]!;
      const target = ej * size;
      system[target + ej]! += dj;
      for (let l = j; l < end; l++)
        system[target + column[l]!]! -= d[l]! * (byBlock[block[l]! - firstBlock]! + byLevel[level[l]!]!);
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
  const system = gatherSystem(frame, absorption);
  const triangle = choleskyUpper(system, size, system);
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
