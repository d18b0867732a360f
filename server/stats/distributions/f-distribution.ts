import { chiSquareUpper } from './chi-square.ts';
import { findUpperQuantile } from './find-root.ts';
import { incompleteBeta } from './special-functions.ts';

/**
 * P(F > f), accurate in relative terms in the upper tail.
 * @param f at least 0, Infinity allowed
 * @param df1 numerator degrees of freedom, fractional allowed
 * @param df2 denominator degrees of freedom, fractional allowed, Infinity gives χ²/df1
 * @throws RangeError when a df is not positive or f is not a number
 * Source: Abramowitz & Stegun (1964), 26.6.2.
 */
export function fUpper(f: number, df1: number, df2: number): number {
  if (!(df1 > 0 && df2 > 0))
    throw new RangeError(`degrees of freedom must be positive, got ${df1} and ${df2}`);
  if (Number.isNaN(f)) throw new RangeError('F is not a number');
  if (f <= 0) return 1;
  if (f === Infinity) return 0;
  if (df2 === Infinity) return chiSquareUpper(df1 * f, df1);
  const ratio = df2 / (df1 * f);
  return incompleteBeta(ratio / (1 + ratio), 1 / (1 + ratio), df2 / 2, df1 / 2);
}

/**
 * The f with P(F > f) = alpha; df and errors as fUpper.
 * @param alpha in (0, 1)
 */
export function fQuantileUpper(alpha: number, df1: number, df2: number): number {
  if (!(alpha > 0 && alpha < 1)) throw new RangeError(`a tail must lie between 0 and 1, got ${alpha}`);
  return findUpperQuantile((f) => fUpper(f, df1, df2), alpha, 1);
}
