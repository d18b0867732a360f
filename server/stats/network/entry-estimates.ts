import { subtractEnvironments } from './environment-system.ts';
import { computeExpectedInformation, MANY_CELLS } from './expected-information.ts';
import type { NetworkFit } from './fit-network.ts';
import { correctCovariance } from './covariance-correction.ts';
import { interactionTerms } from './network-cell.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';
import { addCross, mirrorUpper, multiplyRows } from './row-products.ts';
import { invertSmall } from './small-symmetric.ts';
import { penaltyInformation } from './variance-penalty.ts';

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

/** W = (information of the data + that of the penalty)⁻¹ over the terms in the model; rows of dropped terms are 0. */
export function thetaCovariance(fit: NetworkFit): Float64Array {
  const information =
    fit.frame.cellCount > MANY_CELLS
      ? fit.averageInformation
      : computeExpectedInformation(fit.frame, fit.point);
  const { theta } = fit.point;
  const pull = fit.penalty && penaltyInformation(fit.penalty, theta);
  const kept = [0, 1, 2].filter((k) => !fit.dropped.includes(interactionTerms[k]!));
  const block = new Float64Array(kept.length * kept.length);
  kept.forEach((k, r) =>
    kept.forEach((l, c) => {
      const told = pull === null ? 0 : pull[k * 3 + l]! / (theta[k]! * theta[l]!);
      block[r * kept.length + c] = information[k * 3 + l]! + told;
    }),
  );
  const inverse = invertSmall(block, kept.length);
  const out = new Float64Array(9);
  if (inverse !== null)
    kept.forEach((k, r) => kept.forEach((l, c) => (out[k * 3 + l] = inverse[r * kept.length + c]!)));
  return out;
}

/**
 * h_t = E'w_t/c_t for the chosen entries, a row for each environment and a column for each entry, and g_t = C⁻¹h_t likewise:
 * β̂_t = A_t'y with A_t = w_t/c_t on the entry's own cells, less Q E g_t.
 */
interface EnvironmentShares {
  readonly h: Float64Array;
  readonly g: Float64Array;
}

function shareEnvironments(
  frame: NetworkFrame,
  { absorption, system }: NetworkPoint,
  chosen: readonly number[],
): EnvironmentShares {
  const size = frame.columnCount;
  const m = chosen.length;
  const h = new Float64Array(size * m);
  chosen.forEach((i, t) => {
    for (let j = frame.start[i]!; j < frame.start[i + 1]!; j++) {
      const column = frame.column[j]!;
      if (column >= 0) h[column * m + t]! += absorption.w[j]! / absorption.c[i]!;
    }
  });
  const g = new Float64Array(size * m);
  multiplyRows(g, system.inverse, 0, h, 0, size, size, m);
  return { h, g };
}

/** Φ_tu = δ/c_t + h_t'g_u and β̂_t = w_t'(y − Eβ)/c_t. */
function measureEffects(
  frame: NetworkFrame,
  { absorption, system }: NetworkPoint,
  chosen: readonly number[],
  { h, g }: EnvironmentShares,
): EntryEffects {
  const m = chosen.length;
  const rest = subtractEnvironments(frame, frame.y, system.beta);
  const effects = Float64Array.from(chosen, (i) => {
    let sum = 0;
    for (let j = frame.start[i]!; j < frame.start[i + 1]!; j++) sum += absorption.w[j]! * rest[j]!;
    return sum / absorption.c[i]!;
  });
  const covariance = new Float64Array(m * m);
  addCross(covariance, m, h, g, frame.columnCount);
  mirrorUpper(covariance, m);
  chosen.forEach((i, t) => (covariance[t * m + t]! += 1 / absorption.c[i]!));
  return { chosen, effects, covariance };
}

/** Effects of all entries at a point that need not be an optimum. */
export function estimateEffects(frame: NetworkFrame, point: NetworkPoint): EntryEffects {
  const chosen = frame.entries.map((_, i) => i);
  return measureEffects(frame, point, chosen, shareEnvironments(frame, point, chosen));
}

/** Effects of the chosen entries, all of them by default. Source of the correction: Kenward & Roger (1997), Biometrics 53:983–997. */
export function estimateEntries(fit: NetworkFit, chosen?: readonly number[]): EntryEstimates {
  const { frame, point } = fit;
  const picked = chosen ?? frame.entries.map((_, i) => i);
  const w = thetaCovariance(fit);
  const shares = shareEnvironments(frame, point, picked);
  return {
    ...measureEffects(frame, point, picked, shares),
    fit,
    ...correctCovariance(frame, point, picked, shares.g, w),
    thetaCovariance: w,
  };
}
