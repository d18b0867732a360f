import { fQuantileUpper } from './f-distribution.ts';
import { incompleteBeta, logGamma } from './special-functions.ts';

/**
 * P(F > f) for the noncentral F distribution: a Poisson mixture of central upper tails, all terms positive.
 * @param f at least 0
 * @param df1 numerator degrees of freedom
 * @param df2 denominator degrees of freedom, finite
 * @param noncentrality λ of at least 0: sum of squared true effects over the error variance
 * @throws RangeError when an argument is out of range
 * Source: Johnson, Kotz & Balakrishnan (1995), vol. 2, eq. 30.10.
 */
export function noncentralFUpper(f: number, df1: number, df2: number, noncentrality: number): number {
  if (!(df1 > 0 && df2 > 0 && df2 < Infinity))
    throw new RangeError(`degrees of freedom must be positive and finite`);
  if (!(f >= 0 && noncentrality >= 0))
    throw new RangeError(`F and λ must be at least 0, got ${f} and ${noncentrality}`);
  if (f === 0) return 1;
  const ratio = df2 / (df1 * f);
  const half = noncentrality / 2;
  const term = (j: number): number =>
    (half === 0 ? (j === 0 ? 1 : 0) : Math.exp(j * Math.log(half) - half - logGamma(j + 1))) *
    incompleteBeta(ratio / (1 + ratio), 1 / (1 + ratio), df2 / 2, df1 / 2 + j);
  const centre = Math.floor(half);
  let sum = term(centre);
  for (let j = centre - 1; j >= 0; j -= 1) {
    const value = term(j);
    sum += value;
    if (value < sum * 1e-17) break;
  }
  for (let j = centre + 1; ; j += 1) {
    const value = term(j);
    sum += value;
    if (value <= sum * 1e-17) break;
  }
  return Math.min(1, sum);
}

/**
 * Power of an F test at level alpha.
 * @param alpha in (0, 1)
 */
export function powerOfF(alpha: number, df1: number, df2: number, noncentrality: number): number {
  return noncentralFUpper(fQuantileUpper(alpha, df1, df2), df1, df2, noncentrality);
}
