import { applyP, applyQ, sumByEnvironment } from './environment-system.ts';
import { dot, spreadByTerm } from './criterion-derivatives.ts';
import { computeExpectedInformation } from './expected-information.ts';
import type { NetworkFit } from './fit-network.ts';
import { interactionTerms } from './network-cell.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';
import { invertSmall } from './small-symmetric.ts';

/** Above this many cells the average information stands in for the expected one. */
const MANY_CELLS = 1000;

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
  const g = new Float64Array(size);
  for (let s = 0; s < size; s++) {
    const value = h[s]!;
    if (value === 0) continue;
    for (let r = 0; r < size; r++) g[r]! += system.inverse[s * size + r]! * value;
  }
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

/** Effects of the chosen entries, all of them by default. Source of the correction: Kenward & Roger (1997), Biometrics 53:983–997. */
export function estimateEntries(fit: NetworkFit, chosen?: readonly number[]): EntryEstimates {
  const { frame, point } = fit;
  const picked = chosen ?? frame.entries.map((_, i) => i);
  const m = picked.length;
  const w = thetaCovariance(fit);
  const columns = picked.map((i) => estimatingColumn(frame, point, i));
  const spread = columns.map(({ column }) => spreadByTerm(frame, column));
  const covarianceSlopes = [0, 1, 2].map((k) =>
    symmetric(m, (r, u) => dot(columns[r]!.column, spread[u]![k]!)),
  );
  const projected = spread.map((terms) =>
    terms.map((term) => {
      const out = new Float64Array(frame.cellCount);
      applyP(frame, point.absorption, point.system.inverse, term, out);
      return out;
    }),
  );
  const weighted = spread.map((terms) =>
    [0, 1, 2].map((l) => {
      const out = new Float64Array(frame.cellCount);
      for (let k = 0; k < 3; k++) {
        const weight = w[k * 3 + l]!;
        if (weight === 0) continue;
        const term = terms[k]!;
        for (let j = 0; j < out.length; j++) out[j]! += weight * term[j]!;
      }
      return out;
    }),
  );
  const correction = symmetric(m, (r, u) => {
    let sum = 0;
    for (let l = 0; l < 3; l++) sum += dot(weighted[u]![l]!, projected[r]![l]!);
    return 2 * sum;
  });
  return {
    ...measureEffects(frame, point, picked, columns),
    fit,
    covarianceSlopes,
    correction,
    thetaCovariance: w,
  };
}
