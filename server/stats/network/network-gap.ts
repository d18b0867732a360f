import { tQuantileUpper, tTwoSided } from '#server/stats/distributions/student-t.ts';
import type { EntryEstimates } from './entry-estimates.ts';

/** An estimate with the t distribution that carries its uncertainty. */
export interface Estimated {
  readonly estimate: number;
  readonly se: number;
  readonly df: number;
}

/** A gap between two entries, a − b, for both targets. */
export interface NetworkGap extends Estimated {
  /** square root of the model's variance before Kenward and Roger's correction */
  readonly modelSe: number;
  readonly p: number;
  /** gap in the grower's own next season: same estimate, own standard error and df */
  readonly ownSeason: { readonly se: number; readonly df: number };
}

/** Quadratic form of the contrast r − s in an m × m matrix. */
function contrastForm(matrix: Float64Array, m: number, r: number, s: number): number {
  return matrix[r * m + r]! + matrix[s * m + s]! - 2 * matrix[r * m + s]!;
}

/** df = 2v²/(g'Wg), g = ∂v/∂θ. Infinite where θ is known, never below 1. */
function matchDf(variance: number, slope: readonly number[], w: Float64Array): number {
  let spread = 0;
  for (let k = 0; k < 3; k++) for (let l = 0; l < 3; l++) spread += slope[k]! * w[k * 3 + l]! * slope[l]!;
  return spread > 0 ? (2 * variance * variance) / spread : Infinity;
}

/**
 * The gap chosen[r] − chosen[s] with Kenward–Roger standard error and degrees of freedom.
 * Own next season: v + 2(θ_site + θ_year + θ_rest), its df by the same moments.
 * @returns null where no chain of trials connects the two
 */
export function measureGap(estimates: EntryEstimates, r: number, s: number): NetworkGap | null {
  const { fit, chosen, effects, covariance, covarianceSlopes, correction, thetaCovariance } = estimates;
  const m = chosen.length;
  if (fit.frame.entryPart[chosen[r]!] !== fit.frame.entryPart[chosen[s]!]) return null;
  const model = contrastForm(covariance, m, r, s);
  const slope = covarianceSlopes.map((matrix) => contrastForm(matrix, m, r, s));
  const corrected = model + contrastForm(correction, m, r, s);
  const interaction = 2 * fit.point.theta.reduce((sum, value) => sum + value, 0);
  const estimate = effects[r]! - effects[s]!;
  const se = Math.sqrt(corrected);
  const df = matchDf(model, slope, thetaCovariance);
  return {
    estimate,
    se,
    df,
    modelSe: Math.sqrt(model),
    p: se > 0 ? tTwoSided(estimate / se, df) : estimate === 0 ? 1 : 0,
    ownSeason: {
      se: Math.sqrt(corrected + interaction),
      df: matchDf(
        model + interaction,
        slope.map((value) => value + 2),
        thetaCovariance,
      ),
    },
  };
}

/** Covariance of the gaps r − base and s − base, Kenward and Roger's correction included. */
export function gapCovariance(estimates: EntryEstimates, r: number, s: number, base: number): number {
  const m = estimates.chosen.length;
  const at = (a: number, b: number): number =>
    estimates.covariance[a * m + b]! + estimates.correction[a * m + b]!;
  return at(r, s) - at(r, base) - at(s, base) + at(base, base);
}

/** [low, high] of estimate ± t(1 − (1 − level)/2, df) · se. */
export function intervalAround(estimate: number, se: number, df: number, level = 0.95): [number, number] {
  const half = tQuantileUpper((1 - level) / 2, df) * se;
  return [estimate - half, estimate + half];
}
