import { tabulateBetween } from './chebyshev-panels.ts';
import { criticalRule, expandedTail, oneFactorTail } from './equicoordinate.ts';
import { findRoot, findUpperQuantile } from './find-root.ts';
import { type Correlation, fitOneFactor, type OneFactor } from './one-factor.ts';
import { averageOverScale } from './scale-average.ts';
import { tabulateTail } from './scaled-tail.ts';

const DECAY = 0.5;
/** Correlations this near to λ_i λ_j are taken as equal. */
const EXACT_REST = 1e-9;
/** How far the critical value may lie from that of equal correlations before its table is made anew. */
const SLACK = 1.04;
/** What the integrand over the scale falls by before it is left out: e^−20. */
const LAST_FALL = 20;

/** P(max T > d) = alpha for correlations λ_i λ_j. */
function oneFactorQuantile(alpha: number, df: number, loadings: Float64Array): number {
  const tail = tabulateTail(oneFactorTail(loadings, false), DECAY, false);
  return findUpperQuantile((d) => averageOverScale(tail, d, df), alpha, 2);
}

/**
 * Factors on the likeliest scale between which all of its integrand lies: about its top the integrand falls by
 * a (e^2u − 1 − 2u) in u = ln of the factor, a = df / 2.
 */
function scaleSpan(df: number): readonly [number, number] {
  if (df === Infinity) return [1, 1];
  const beyond = (u: number): number => (df / 2) * (Math.expm1(2 * u) - 2 * u) - LAST_FALL;
  const far = 1 + LAST_FALL / df;
  return [Math.exp(findRoot(beyond, -far, 0, 1e-6)), Math.exp(findRoot(beyond, 0, far, 1e-6))];
}

/** The same with what the correlations leave over, near a first value: the tail is tabulated only where it counts. */
function expandedQuantile(alpha: number, df: number, factor: OneFactor, first: number): number {
  // A critical value asks for four digits, and every entry of a list for its own: the second order is enough.
  const expand = expandedTail(factor, false, { hasThird: false, rule: criticalRule });
  const [least, most] = scaleSpan(df);
  const likeliest = df === Infinity ? 1 : Math.sqrt(df / (df + first * first));
  const low = (first / SLACK) * likeliest * least;
  const high = first * SLACK * likeliest * most;
  const scaled = tabulateBetween((w) => expand(w).upper * Math.exp(DECAY * w * w), low, high);
  const tail = { decay: DECAY, scaled: (w: number) => scaled(Math.min(high, Math.max(low, w))) };
  const found = findUpperQuantile((d) => averageOverScale(tail, d, df), alpha, first);
  return found < first * SLACK && found > first / SLACK ? found : expandedQuantile(alpha, df, factor, found);
}

/**
 * Critical value of one-sided comparisons of all others with one entry: the d with P(max T > d) = alpha.
 * @param alpha in (0, 0.5)
 * @param df degrees of freedom, fractional or Infinity
 * @param correlation of the comparisons, m × m
 * Source: as dunnettAdjust.
 */
export function oneSidedDunnettQuantile(alpha: number, df: number, correlation: Correlation): number {
  const factor = fitOneFactor(correlation);
  if (factor.largestRest <= EXACT_REST) return oneFactorQuantile(alpha, df, factor.loadings);
  const mean = factor.loadings.reduce((sum, loading) => sum + loading, 0) / correlation.length;
  const first = oneFactorQuantile(
    alpha,
    df,
    factor.loadings.map(() => mean),
  );
  return expandedQuantile(alpha, df, factor, first);
}
