import type { ScaledTail } from './scaled-tail.ts';
import { logGammaConstant } from './special-functions.ts';

/** Terms below this part of the sum are not worth adding. */
const NEGLIGIBLE = 1e-17;

/**
 * P(W / S > q) where W has the given tail and S² is an independent χ²/df: the step from a known to an
 * estimated standard deviation.
 *
 * With v = ln S the integrand is analytic and falls off on both sides, so the trapezoidal rule on the whole line
 * converges geometrically; it is summed outwards from its top, in logarithms, and keeps relative accuracy.
 * @param tail distribution of the statistic when the standard deviation is known
 * @param q at least 0
 * @param df degrees of freedom, fractional allowed, Infinity allowed
 * @param step factor on the step of the rule, for checks of convergence
 */
export function averageOverScale(tail: ScaledTail, q: number, df: number, step = 1): number {
  const { decay } = tail;
  if (!(df > 0)) throw new RangeError(`degrees of freedom must be positive, got ${df}`);
  if (Number.isNaN(q)) throw new RangeError('q is not a number');
  if (q === Infinity) return 0;
  if (df === Infinity || q === 0) return tail.scaled(q) * Math.exp(-decay * q * q);
  const a = df / 2;
  const constant = Math.LN2 + logGammaConstant(a);
  const h = step * Math.min(0.06, 0.4 / Math.sqrt(a));
  const centre = 0.5 * Math.log(a / (a + decay * q * q));
  const top = scaleDensity(tail, q, a, constant, centre);
  let sum = top;
  for (let side = -1; side <= 1; side += 2) {
    let previous = top;
    for (let j = 1; ; j += 1) {
      const term = scaleDensity(tail, q, a, constant, centre + side * j * h);
      sum += term;
      if (term <= sum * NEGLIGIBLE && term <= previous) break;
      previous = term;
    }
  }
  return Math.min(1, sum * h);
}

/** The integrand at v = ln S: the density of v times the tail at q S. */
function scaleDensity(tail: ScaledTail, q: number, a: number, constant: number, v: number): number {
  const square = Math.expm1(2 * v);
  const w = q * Math.sqrt(1 + square);
  return Math.exp(constant - a * (square - 2 * v) - tail.decay * w * w) * tail.scaled(w);
}
