import { solveTransposedRows } from '#server/stats/linear/dense.ts';
import { prepareProjection, projectRows } from './entry-projection.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';
import { addCross, mirrorUpper } from './row-products.ts';

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
  const firstBlock = frame.firstBlock[i]!;
  const block = frame.block.subarray(first, end).map((b) => b - firstBlock);
  const blocks = frame.firstBlock[i + 1]! - firstBlock;
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
  factors: ArrayLike<number>,
  sums: TermSums,
): void {
  const [first, second, third] = sums;
  const f0 = factors[0]!;
  const f1 = factors[1]!;
  const f2 = factors[2]!;
  for (let j = 0; j < of[2].length; j++) {
    const r0 = of[0][j]! * m;
    const r1 = of[1][j]! * m;
    const source = j * m;
    for (let t = 0; t < m; t++) {
      const value = rows[source + t]!;
      first[r0 + t]! += f0 * value;
      second[r1 + t]! += f1 * value;
      third[source + t]! += f2 * value;
    }
  }
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

/** Adds Σ_j (w_j/c) rows_j of entry i, what its own column of A takes of rows, to row `own` of an m × m matrix. */
function addOwnRow(
  frame: NetworkFrame,
  { absorption }: NetworkPoint,
  i: number,
  own: number,
  rows: Float64Array,
  m: number,
  out: Float64Array,
): void {
  if (own < 0) return;
  const first = frame.start[i]!;
  for (let j = first; j < frame.start[i + 1]!; j++) {
    const weight = absorption.w[j]! / absorption.c[i]!;
    const source = (j - first) * m;
    for (let t = 0; t < m; t++) out[own * m + t]! += weight * rows[source + t]!;
  }
}

/** T = Σ_k Z_k sums_k, a row for each cell. */
function spreadAll({ of, counts }: TermRows, sums: TermSums, m: number, out: Float64Array): void {
  const [first, second, third] = sums;
  for (let j = 0; j < counts[2]; j++) {
    const r0 = of[0][j]! * m;
    const r1 = of[1][j]! * m;
    const target = j * m;
    for (let t = 0; t < m; t++) out[target + t] = first[r0 + t]! + second[r1 + t]! + third[target + t]!;
  }
}

/** What is left to be added over the environments once all entries have been gone through; rows of m for each of them. */
interface EnvironmentRows {
  /** U_l = E'QV_lA for the three terms */
  readonly u: readonly [Float64Array, Float64Array, Float64Array];
  /** E'QT with T = Σ W_kl V_kQV_lA */
  readonly t: Float64Array;
}

/**
 * Slopes and correction of the chosen entries' covariance, entry by entry and for all columns of A together. A is w/c in
 * an entry's own column less Q E g, so A'R = (w/c)'R − g'E'QR for whatever R, and
 *   A'V_kA = (w/c)'V_kA − g'U_k,   Σ W_kl A'V_kPV_lA = (w/c)'T − g'E'QT − Σ W_kl U_k'C⁻¹U_l.
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
  const shared = (): Float64Array => new Float64Array(size * m);
  const covarianceSlopes = [square(), square(), square()] as const;
  const correction = square();
  const environments: EnvironmentRows = { u: [shared(), shared(), shared()], t: shared() };
  const [own, weighted] = [prepareSums(frame, m), prepareSums(frame, m)];
  const rows = new Float64Array(frame.maxCells * m);
  const scratch = prepareProjection(frame, m);
  const project = (i: number, of: Float64Array): void =>
    projectRows(frame, point.absorption, i, of, m, scratch);
  for (let i = 0; i < frame.entries.length; i++) {
    const termRows = listRows(frame, i);
    const first = frame.start[i]!;
    const length = termRows.counts[2];
    const position = chosen.indexOf(i);
    fillEstimators(frame, point, i, position, g, m, rows, project);
    for (const sums of [own, weighted]) termRows.counts.forEach((count, k) => sums[k]!.fill(0, 0, count * m));
    addTermSums(termRows, rows, m, [1, 1, 1], own);
    environments.u.forEach((u, l) => {
      spreadRows(termRows, l, own, m, rows);
      addOwnRow(frame, point, i, position, rows, m, covarianceSlopes[l]!);
      project(i, rows);
      addByEnvironment(frame, first, length, rows, m, u);
      addTermSums(termRows, rows, m, w.subarray(3 * l, 3 * l + 3), weighted);
    });
    spreadAll(termRows, weighted, m, rows);
    addOwnRow(frame, point, i, position, rows, m, correction);
    project(i, rows);
    addByEnvironment(frame, first, length, rows, m, environments.t);
  }
  const minusG = g.map((value) => -value);
  covarianceSlopes.forEach((slope, k) => {
    addCross(slope, m, minusG, environments.u[k]!, size);
    mirrorUpper(slope, m);
  });
  addCross(correction, m, minusG, environments.t, size);
  subtractSolved(point.system.triangle, size, m, environments.u, w, correction);
  mirrorUpper(correction, m);
  return { covarianceSlopes, correction: correction.map((value) => 2 * value) };
}

/** Takes Σ W_kl U_k'C⁻¹U_l off the upper triangle of the correction; C = R'R. u is used up. */
function subtractSolved(
  triangle: Float64Array,
  size: number,
  m: number,
  u: EnvironmentRows['u'],
  w: Float64Array,
  correction: Float64Array,
): void {
  for (const rows of u) solveTransposedRows(triangle, size, rows, m);
  u.forEach((left, k) => {
    const mixed = new Float64Array(size * m);
    u.forEach((right, l) => {
      const factor = w[k * 3 + l]!;
      for (let r = 0; r < mixed.length; r++) mixed[r]! -= factor * right[r]!;
    });
    addCross(correction, m, left, mixed, size);
  });
}
