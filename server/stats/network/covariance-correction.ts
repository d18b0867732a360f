import { prepareProjection, projectRows } from './entry-projection.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';
import { addCross, mirrorUpper, multiplyRows } from './row-products.ts';

/** What θ does to the covariance Φ of m chosen entries' effects; m × m, row-major. */
export interface CovarianceCorrection {
  /** ∂Φ/∂θ_k = A'V_kA for site, year, rest */
  readonly covarianceSlopes: readonly Float64Array[];
  /** 2 Σ W_kl A'V_kPV_lA: what Kenward and Roger add to Φ */
  readonly correction: Float64Array;
}

/** Z_k'F of one entry for the terms in the order of θ: a row of m for each site, each year, each cell. */
type TermSums = readonly [Float64Array, Float64Array, Float64Array];

function prepareSums({ outerTerm, maxLevels, maxCells }: NetworkFrame, m: number): TermSums {
  const outer = new Float64Array(maxCells * m);
  const inner = new Float64Array(maxLevels * m);
  const rest = new Float64Array(maxCells * m);
  return outerTerm === 0 ? [outer, inner, rest] : [inner, outer, rest];
}

/** Row of entry i's sums that a cell belongs to, for each term. */
interface TermRows {
  readonly of: readonly [Int32Array, Int32Array, Int32Array];
  readonly counts: readonly [number, number, number];
}

function listRows(frame: NetworkFrame, i: number): TermRows {
  const first = frame.start[i]!;
  const end = frame.start[i + 1]!;
  const block = new Int32Array(end - first);
  const blocks = frame.firstBlock[i + 1]! - frame.firstBlock[i]!;
  for (let b = 0; b < blocks; b++) {
    const at = frame.firstBlock[i]! + b;
    block.fill(b, frame.blockStart[at]! - first, frame.blockStart[at + 1]! - first);
  }
  const level = frame.level.subarray(first, end);
  const cell = Int32Array.from(block, (_, j) => j);
  const levels = frame.levelCount[i]!;
  return frame.outerTerm === 0
    ? { of: [block, level, cell], counts: [blocks, levels, end - first] }
    : { of: [level, block, cell], counts: [levels, blocks, end - first] };
}

/** Adds factor_k Z_k'rows to the sums of each term k. */
function addTermSums(
  { of }: TermRows,
  rows: Float64Array,
  m: number,
  factors: readonly number[],
  sums: TermSums,
): void {
  of.forEach((rowOf, k) => {
    const out = sums[k]!;
    const factor = factors[k]!;
    if (factor === 0) return;
    for (let j = 0; j < rowOf.length; j++) {
      const target = rowOf[j]! * m;
      const source = j * m;
      for (let t = 0; t < m; t++) out[target + t]! += factor * rows[source + t]!;
    }
  });
}

/** Z_k sums: a row for each cell. */
function spreadRows({ of }: TermRows, k: number, sums: TermSums, m: number, out: Float64Array): void {
  const rowOf = of[k]!;
  for (let j = 0; j < rowOf.length; j++)
    out.set(sums[k]!.subarray(rowOf[j]! * m, (rowOf[j]! + 1) * m), j * m);
}

/** Adds E'rows of entry i, cells from `first` on, to `sums`, a row for each kept environment. */
function addByEnvironment(
  { column }: NetworkFrame,
  first: number,
  length: number,
  rows: Float64Array,
  m: number,
  sums: Float64Array,
): void {
  for (let j = 0; j < length; j++) {
    const e = column[first + j]!;
    if (e < 0) continue;
    for (let t = 0; t < m; t++) sums[e * m + t]! += rows[j * m + t]!;
  }
}

/** A of entry i, a row for each cell: w/c in the entry's own column, −1 where it is not chosen, less Q E g. */
function fillEstimators(
  frame: NetworkFrame,
  { absorption }: NetworkPoint,
  i: number,
  own: number,
  g: Float64Array,
  m: number,
  rows: Float64Array,
  project: (i: number, rows: Float64Array) => void,
): void {
  const first = frame.start[i]!;
  const length = frame.start[i + 1]! - first;
  rows.fill(0, 0, length * m);
  for (let j = 0; j < length; j++) {
    const e = frame.column[first + j]!;
    if (e < 0) continue;
    for (let t = 0; t < m; t++) rows[j * m + t] = -g[e * m + t]!;
  }
  project(i, rows);
  if (own < 0) return;
  for (let j = 0; j < length; j++) rows[j * m + own]! += absorption.w[first + j]! / absorption.c[i]!;
}

/**
 * Slopes and correction of the chosen entries' covariance from A, entry by entry and for all columns together: with
 * F_l = V_lA and U_l = E'QF_l, F_k'PF_l = (Z_k'A)'Z_k'QF_l − U_k'C⁻¹U_l.
 * @param g C⁻¹h of the chosen entries, a row for each kept environment
 * @param w covariance of θ̂, 3 × 3
 */
export function correctCovariance(
  frame: NetworkFrame,
  point: NetworkPoint,
  chosen: readonly number[],
  g: Float64Array,
  w: Float64Array,
): CovarianceCorrection {
  const m = chosen.length;
  const size = frame.columnCount;
  const square = (): Float64Array => new Float64Array(m * m);
  const covarianceSlopes = [square(), square(), square()];
  const correction = square();
  const u = [0, 1, 2].map(() => new Float64Array(size * m));
  const weights = [0, 1, 2].map((l) => Array.from(w.subarray(3 * l, 3 * l + 3)));
  const [own, weighted] = [prepareSums(frame, m), prepareSums(frame, m)];
  const rows = new Float64Array(frame.maxCells * m);
  const scratch = prepareProjection(frame, m);
  const project = (i: number, of: Float64Array): void =>
    projectRows(frame, point.absorption, i, of, m, scratch);
  for (let i = 0; i < frame.entries.length; i++) {
    const termRows = listRows(frame, i);
    const [first, length] = [frame.start[i]!, termRows.counts[2]];
    fillEstimators(frame, point, i, chosen.indexOf(i), g, m, rows, project);
    termRows.counts.forEach((count, k) => {
      own[k]!.fill(0, 0, count * m);
      weighted[k]!.fill(0, 0, count * m);
    });
    addTermSums(termRows, rows, m, [1, 1, 1], own);
    for (let l = 0; l < 3; l++) {
      spreadRows(termRows, l, own, m, rows);
      project(i, rows);
      addByEnvironment(frame, first, length, rows, m, u[l]!);
      addTermSums(termRows, rows, m, weights[l]!, weighted);
    }
    termRows.counts.forEach((count, k) => {
      addCross(covarianceSlopes[k]!, m, own[k]!, own[k]!, count);
      addCross(correction, m, own[k]!, weighted[k]!, count);
    });
  }
  subtractEnvironmentPart(point.system.inverse, size, m, u, weights, correction);
  for (const slope of covarianceSlopes) mirrorUpper(slope, m);
  mirrorUpper(correction, m);
  return { covarianceSlopes, correction: correction.map((value) => 2 * value) };
}

/** Takes Σ W_kl U_k'C⁻¹U_l off the upper triangle of the correction. */
function subtractEnvironmentPart(
  inverse: Float64Array,
  size: number,
  m: number,
  u: readonly Float64Array[],
  weights: readonly (readonly number[])[],
  correction: Float64Array,
): void {
  const solved = new Float64Array(size * m);
  u.forEach((left, k) => {
    const mixed = new Float64Array(size * m);
    u.forEach((right, l) => {
      const factor = weights[l]![k]!;
      for (let r = 0; r < mixed.length; r++) mixed[r]! -= factor * right[r]!;
    });
    multiplyRows(solved, inverse, 0, mixed, 0, size, size, m);
    addCross(correction, m, left, solved, size);
  });
}
