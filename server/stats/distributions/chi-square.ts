import { incompleteGammaUpper } from './special-functions.ts';

/**
 * P(χ² > x), accurate in relative terms in the upper tail.
 * @param x at least 0
 * @param df degrees of freedom, fractional allowed
 * @throws RangeError when df is not positive or x is not a number
 * Source: Abramowitz & Stegun (1964), 26.4.19.
 */
export function chiSquareUpper(x: number, df: number): number {
  if (!(df > 0)) throw new RangeError(`degrees of freedom must be positive, got ${df}`);
  if (Number.isNaN(x)) throw new RangeError('x is not a number');
  return incompleteGammaUpper(df / 2, x / 2);
}
