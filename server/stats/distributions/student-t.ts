import { findUpperQuantile } from './find-root.ts';
import { normalQuantile, normalUpper } from './normal.ts';
import { incompleteBeta, logBeta } from './special-functions.ts';

/** Above this the transformation to a normal deviate is exact to rounding. */
const MANY_DF = 1e6;

function requireDf(df: number): void {
  if (!(df > 0)) throw new RangeError(`degrees of freedom must be positive, got ${df}`);
}

/** The normal deviate with nearly the same tail; Hill (1970), Comm. ACM 13:617–619, error of order df⁻³. */
function normalDeviate(t: number, df: number): number {
  const a = df - 0.5;
  const w = Math.sqrt(a * Math.log1p((t * t) / df));
  return w + (w * w * w + 3 * w) / (48 * a * a);
}

/**
 * P(T > t) for Student's t, accurate in relative terms in the upper tail.
 * @param t any real number, ±∞ included
 * @param df degrees of freedom, fractional allowed, Infinity gives the normal distribution
 * @throws RangeError when df is not positive or t is not a number
 * Source: Abramowitz & Stegun (1964), 26.7.1 with 26.5.1.
 */
export function tUpper(t: number, df: number): number {
  if (t < 0) return 1 - tUpper(-t, df);
  return 0.5 * tTwoSided(t, df);
}

/** P(|T| > |t|) for Student's t; arguments, errors and source as tUpper. */
export function tTwoSided(t: number, df: number): number {
  requireDf(df);
  if (Number.isNaN(t)) throw new RangeError('t is not a number');
  const size = Math.abs(t);
  if (size === Infinity) return 0;
  if (df === Infinity) return 2 * normalUpper(size);
  if (df > MANY_DF) return 2 * normalUpper(normalDeviate(size, df));
  const ratio = size > 1 ? df / size / size : 1 / ((size * size) / df);
  if (ratio === Infinity) return 1;
  return incompleteBeta(ratio / (1 + ratio), 1 / (1 + ratio), df / 2, 0.5);
}

/** Density of Student's t. */
export function tPdf(t: number, df: number): number {
  if (df === Infinity) return Math.exp(-0.5 * t * t) * 0.3989422804014327;
  return Math.exp(-0.5 * (df + 1) * Math.log1p((t * t) / df) - logBeta(df / 2, 0.5)) / Math.sqrt(df);
}

/** A start for the quantile: the power law of the tail for few df, else Hill's transformation backwards. */
function quantileStart(alpha: number, df: number): number {
  const powerLaw = Math.sqrt(df) * Math.exp(-(Math.log(alpha * df) + logBeta(df / 2, 0.5)) / df);
  if (df < 2.5) return Math.max(powerLaw, 1e-3);
  const z = -normalQuantile(alpha);
  const a = df - 0.5;
  const w = z - (z * z * z + 3 * z) / (48 * a * a);
  return Math.sqrt(df * Math.expm1((w * w) / a));
}

/**
 * The t with P(T > t) = alpha.
 * @param alpha in (0, 1)
 * @param df degrees of freedom, fractional allowed, Infinity gives the normal distribution
 * @throws RangeError when alpha is outside (0, 1) or df is not positive
 */
export function tQuantileUpper(alpha: number, df: number): number {
  requireDf(df);
  if (!(alpha > 0 && alpha < 1)) throw new RangeError(`a tail must lie between 0 and 1, got ${alpha}`);
  if (alpha > 0.5) return -tQuantileUpper(1 - alpha, df);
  if (df === Infinity) return -normalQuantile(alpha);
  if (alpha === 0.5) return 0;
  let t = quantileStart(alpha, df);
  if (!(t > 0 && t < 1e150)) return findUpperQuantile((x) => tUpper(x, df), alpha, 1);
  // Newton on the logarithm of the tail against the logarithm of t, where both tails are nearly straight.
  for (let i = 0; i < 12; i += 1) {
    const upper = tUpper(t, df);
    const change = (Math.log(upper / alpha) * upper) / (t * tPdf(t, df));
    t *= Math.exp(Math.max(-1, Math.min(1, change)));
    if (Math.abs(change) < 1e-9) return t;
  }
  return findUpperQuantile((x) => tUpper(x, df), alpha, 1);
}

/** The t with P(T ≤ t) = p; arguments and errors as tQuantileUpper. For p near 1 give the upper tail instead. */
export function tQuantile(p: number, df: number): number {
  return -tQuantileUpper(p, df);
}
