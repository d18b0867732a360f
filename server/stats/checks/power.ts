import { findRoot } from '#server/stats/distributions/find-root.ts';
import { noncentralTUpper } from '#server/stats/distributions/noncentral-t.ts';
import { tQuantileUpper } from '#server/stats/distributions/student-t.ts';

/**
 * Power of a two-sided t test.
 * @param gap true difference, in the unit of se
 * @param se standard error of the estimated difference, positive
 * @param df its degrees of freedom, fractional or Infinity
 * @param alpha level in (0, 1)
 */
export function powerOfT(gap: number, se: number, df: number, alpha: number): number {
  if (!(se > 0)) throw new RangeError(`a standard error must be positive, got ${se}`);
  const critical = tQuantileUpper(alpha / 2, df);
  const noncentrality = Math.abs(gap) / se;
  return noncentralTUpper(critical, df, noncentrality) + noncentralTUpper(critical, df, -noncentrality);
}

/**
 * Smallest true difference that a two-sided t test shows with the given power.
 * @param test.se standard error of a difference, positive
 * @param test.df its degrees of freedom
 * @param test.alpha level, default .05
 * @param test.power in (alpha, 1), default .8
 * @returns the difference, in the unit of se
 */
export function smallestShownDifference(test: {
  readonly se: number;
  readonly df: number;
  readonly alpha?: number;
  readonly power?: number;
}): number {
  const { se, df, alpha = 0.05, power = 0.8 } = test;
  if (!(power > alpha && power < 1)) throw new RangeError(`power must lie between alpha and 1, got ${power}`);
  const excess = (gap: number): number => powerOfT(gap, 1, df, alpha) - power;
  let high = 4;
  while (excess(high) < 0) high *= 2;
  return se * findRoot(excess, 0, high, 1e-12);
}
