import { normalUpper } from './normal.ts';
import { averageOverScale } from './scale-average.ts';

/**
 * P(T > t) for the noncentral t distribution.
 * The two-sided power of a t test is noncentralTUpper(c, df, δ) + noncentralTUpper(c, df, −δ).
 * @param t any real number
 * @param df degrees of freedom, fractional allowed, Infinity allowed
 * @param noncentrality δ: true difference divided by its standard error
 * @throws RangeError when df is not positive or an argument is not a number
 * Source: T = (Z + δ) / S with S² ~ χ²/df independent of Z, integrated over S.
 */
export function noncentralTUpper(t: number, df: number, noncentrality: number): number {
  if (!(df > 0)) throw new RangeError(`degrees of freedom must be positive, got ${df}`);
  if (Number.isNaN(t) || Number.isNaN(noncentrality))
    throw new RangeError('t or its noncentrality is not a number');
  if (t < 0) return 1 - noncentralTUpper(-t, df, -noncentrality);
  return averageOverScale({ decay: 0, scaled: (w) => normalUpper(w - noncentrality) }, t, df);
}
