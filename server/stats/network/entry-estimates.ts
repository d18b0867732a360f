import { applyQ, multiplyInverse, sumByEnvironment } from './environment-system.ts';
import { dot } from './criterion-derivatives.ts';
import { computeExpectedInformation } from './expected-information.ts';
import { MANY_CELLS, type NetworkFit } from './fit-network.ts';
import { interactionTerms } from './network-cell.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';
import { invertSmall } from './small-symmetric.ts';

/** Effects of chosen entries at one θ, and their covariance Φ (m × m, row-major). */
export interface EntryEffects {
  /** indices of the chosen entries in the frame */
  readonly chosen: readonly number[];
  readonly effects: Float64Array;
  readonly covariance: Float64Array;
}

/**
 * Effects of chosen entries with everything that a gap's standard error and degrees of freedom need.
 * Square matrices are m × m over the chosen entries, row-major. Effects are relative to the dropped
 * environment of their connected part: only gaps within a part mean anything.
 */
export interface EntryEstimates extends EntryEffects {
  readonly fit: NetworkFit;
  /** ∂Φ/∂θ_k for site, year, rest */
  readonly covarianceSlopes: readonly Float64Array[];
  /** 2 Σ W_kl A'V_kPV_lA: what Kenward and Roger add to Φ */
  readonly correction: Float64Array;
  /** W, covariance of θ̂, 3 × 3 */
  readonly thetaCovariance: Float64Array;
}

/** W = (information + ν/2θ² on the diagonal)⁻¹ over the terms in the model; rows of dropped terms are 0. */
export function thetaCovariance(fit: NetworkFit): Float64Array {
  const information =
    fit.frame.cellCount > MANY_CELLS
      ? fit.averageInformation
      : computeExpectedInformation(fit.frame, fit.point);
  const kept = [0, 1, 2].filter((k) => !fit.dropped.includes(interactionTerms[k]!));
  const block = new Float64Array(kept.length * kept.length);
  kept.forEach((k, r) =>
    kept.forEach((l, c) => {
      const theta = fit.point.theta[k]!;
      const pull = fit.penalty !== null && k === l ? fit.penalty.nu / (2 * theta * theta) : 0;
      block[r * kept.length + c] = information[k * 3 + l]! + pull;
    }),
  );
  const inverse = invertSmall(block, kept.length);
  const out = new Float64Array(9);
  if (inverse !== null)
    kept.forEach((k, r) => kept.forEach((l, c) => (out[k * 3 + l] = inverse[r * kept.length + c]!)));
  return out;
}

/** Column A_t with β̂_t = A_t'y: w/c on the entry's own cells, less Q E g_t with g_t = C⁻¹h_t, h_t = E'w/c. */
interface EstimatingColumn {
  readonly column: Float64Array;
  readonly h: Float64Array;
  readonly g: Float64Array;
}

/** w_j/c of one cell: its weight in its own entry's effect. */
export function ownWeight(frame: NetworkFrame, { absorption }: NetworkPoint, i: number, j: number): number {
  const { a, c, d, vectorStart } = absorption;
  const va = vectorStart[i]!;
  return (d[j]! * (a[va]! + a[va + frame.siteColumn[j]!]! + a[va + frame.yearColumn[j]!]!)) / c[i]!;
}

function estimatingColumn(frame: NetworkFrame, point: NetworkPoint, i: number): EstimatingColumn {
  const { absorption, system } = point;
  const size = frame.columnCount;
  const own = new Float64Array(frame.cellCount);
  for (let j = frame.start[i]!; j < frame.start[i + 1]!; j++) own[j] = ownWeight(frame, point, i, j);
  const h = sumByEnvironment(frame, own);
  const g = multiplyInverse(system.inverse, size, h);
  const spread = new Float64Array(frame.cellCount);
  for (let j = 0; j < spread.length; j++) spread[j] = frame.column[j]! < 0 ? 0 : g[frame.column[j]!]!;
  const column = new Float64Array(frame.cellCount);
  applyQ(frame, absorption, spread, column);
  for (let j = 0; j < column.length; j++) column[j] = own[j]! - column[j]!;
  return { column, h, g };
}

function symmetric(m: number, value: (r: number, c: number) => number): Float64Array {
  const out = new Float64Array(m * m);
  for (let r = 0; r < m; r++)
    for (let c = r; c < m; c++) {
      const x = value(r, c);
      out[r * m + c] = x;
      out[c * m + r] = x;
    }
  return out;
}

/** Φ_tu = δ/c_t + h_t'g_u and β̂_t = A_t'y. */
function measureEffects(
  frame: NetworkFrame,
  point: NetworkPoint,
  chosen: readonly number[],
  columns: readonly EstimatingColumn[],
): EntryEffects {
  return {
    chosen,
    effects: Float64Array.from(columns, ({ column }) => dot(column, frame.y)),
    covariance: symmetric(
      chosen.length,
      (r, u) => (r === u ? 1 / point.absorption.c[chosen[r]!]! : 0) + dot(columns[r]!.h, columns[u]!.g),
    ),
  };
}

/** Effects of all entries at a point that need not be an optimum. */
export function estimateEffects(frame: NetworkFrame, point: NetworkPoint): EntryEffects {
  const chosen = frame.entries.map((_, i) => i);
  return measureEffects(
    frame,
    point,
    chosen,
    chosen.map((i) => estimatingColumn(frame, point, i)),
  );
}

/** Z_k'x for the three terms: sums over an entry's sites, over its years, and x itself. Sums lie where the columns of Z do. */
function sumByTerm(
  frame: NetworkFrame,
  x: Float64Array,
): readonly [Float64Array, Float64Array, Float64Array] {
  const { width, siteWidth, start } = frame;
  const siteCount = siteWidth.reduce((sum, n) => sum + n, 0);
  const yearCount = width.reduce((sum, q) => sum + q - 1, 0) - siteCount;
  const site = new Float64Array(siteCount);
  const year = new Float64Array(yearCount);
  let siteAt = -1;
  let yearAt = 0;
  for (let i = 0; i < frame.entries.length; i++) {
    yearAt -= siteWidth[i]! + 1;
    for (let j = start[i]!; j < start[i + 1]!; j++) {
      site[siteAt + frame.siteColumn[j]!]! += x[j]!;
      year[yearAt + frame.yearColumn[j]!]! += x[j]!;
    }
    siteAt += siteWidth[i]!;
    yearAt += width[i]!;
  }
  return [site, year, x];
}

/** Z_k s: sums spread back over the cells. */
function spreadTerm(frame: NetworkFrame, k: number, sums: Float64Array): Float64Array {
  if (k === 2) return sums;
  const { width, siteWidth, start } = frame;
  const columns = k === 0 ? frame.siteColumn : frame.yearColumn;
  const out = new Float64Array(frame.cellCount);
  let at = k === 0 ? -1 : 0;
  for (let i = 0; i < frame.entries.length; i++) {
    if (k === 1) at -= siteWidth[i]! + 1;
    for (let j = start[i]!; j < start[i + 1]!; j++) out[j] = sums[at + columns[j]!]!;
    at += k === 0 ? siteWidth[i]! : width[i]!;
  }
  return out;
}

/**
 * 2 Σ W_kl A'V_kPV_lA over the chosen entries, from Z_k'A alone: with F_l = V_lA and U_l = E'QF_l,
 * F_k'PF_l = (Z_k'A)'Z_k'QF_l − U_k'C⁻¹U_l.
 */
function correctCovariance(
  frame: NetworkFrame,
  point: NetworkPoint,
  summed: readonly (readonly [Float64Array, Float64Array, Float64Array])[],
  w: Float64Array,
): Float64Array {
  const { absorption, system } = point;
  const size = frame.columnCount;
  const projected = new Float64Array(frame.cellCount);
  const rows = summed.map((own) => {
    // Σ_l W_kl Z_k'QF_l for each k, and U_l with Σ_l W_kl C⁻¹U_l
    const weighted = own.map((sums) => new Float64Array(sums.length));
    const u: Float64Array[] = [];
    own.forEach((sums, l) => {
      applyQ(frame, absorption, spreadTerm(frame, l, sums), projected);
      u.push(sumByEnvironment(frame, projected));
      sumByTerm(frame, projected).forEach((values, k) => addScaled(weighted[k]!, w[k * 3 + l]!, values));
    });
    const mixed = u.map((_, k) => {
      const out = new Float64Array(size);
      u.forEach((values, l) => addScaled(out, w[k * 3 + l]!, values));
      return out;
    });
    const solved = mixed.map((values) => multiplyInverse(system.inverse, size, values));
    return { own, weighted, u, solved };
  });
  return symmetric(summed.length, (r, c) => {
    let sum = 0;
    for (let k = 0; k < 3; k++)
      sum += dot(rows[r]!.own[k]!, rows[c]!.weighted[k]!) - dot(rows[r]!.u[k]!, rows[c]!.solved[k]!);
    return 2 * sum;
  });
}

function addScaled(target: Float64Array, factor: number, values: Float64Array): void {
  if (factor !== 0) for (let j = 0; j < target.length; j++) target[j]! += factor * values[j]!;
}

/** Effects of the chosen entries, all of them by default. Source of the correction: Kenward & Roger (1997), Biometrics 53:983–997. */
export function estimateEntries(fit: NetworkFit, chosen?: readonly number[]): EntryEstimates {
  const { frame, point } = fit;
  const picked = chosen ?? frame.entries.map((_, i) => i);
  const m = picked.length;
  const w = thetaCovariance(fit);
  const columns = picked.map((i) => estimatingColumn(frame, point, i));
  const summed = columns.map(({ column }) => sumByTerm(frame, column));
  const covarianceSlopes = [0, 1, 2].map((k) => symmetric(m, (r, u) => dot(summed[r]![k]!, summed[u]![k]!)));
  const correction = correctCovariance(frame, point, summed, w);
  return {
    ...measureEffects(frame, point, picked, columns),
    fit,
    covarianceSlopes,
    correction,
    thetaCovariance: w,
  };
}
