/**
 * Root of a continuous function inside a bracket, by inverse quadratic interpolation guarded by bisection.
 * @param f function with opposite signs (or zero) at the two ends
 * @param low one end
 * @param high the other end
 * @param tolerance relative width at which the search stops
 * @throws RangeError when the ends do not bracket a root
 * Source: Chandrupatla (1997), Adv. Eng. Softw. 28:145–149.
 */
export function findRoot(f: (x: number) => number, low: number, high: number, tolerance = 1e-14): number {
  let a = high;
  let b = low;
  let fa = f(a);
  let fb = f(b);
  if (fa === 0) return a;
  if (fb === 0) return b;
  if (!(fa < 0 !== fb < 0)) throw new RangeError(`no sign change between ${low} and ${high}`);
  let share = 0.5;
  for (let i = 0; i < 200; i += 1) {
    const x = a + share * (b - a);
    const fx = f(x);
    let c = b;
    let fc = fb;
    if (fx < 0 === fa < 0) {
      c = a;
      fc = fa;
    } else {
      b = a;
      fb = fa;
    }
    a = x;
    fa = fx;
    const best = Math.abs(fa) < Math.abs(fb) ? a : b;
    const limit = (tolerance * Math.abs(best) + 1e-300) / Math.abs(b - a);
    if (fa === 0 || limit > 0.5) return best;
    const xi = (a - b) / (c - b);
    const phi = (fa - fb) / (fc - fb);
    const isSmooth = phi * phi < xi && (1 - phi) * (1 - phi) < 1 - xi;
    share = isSmooth
      ? (fa / (fb - fa)) * (fc / (fb - fc)) + ((c - a) / (b - a)) * (fa / (fc - fa)) * (fb / (fc - fb))
      : 0.5;
    share = Math.min(1 - limit, Math.max(limit, share));
  }
  return a;
}

/**
 * The x > 0 at which a decreasing upper tail equals alpha; searched on logarithmic scales of both.
 * @param upper decreasing upper-tail probability of x > 0
 * @param alpha in (0, upper(0))
 * @param start a positive guess
 */
export function findUpperQuantile(upper: (x: number) => number, alpha: number, start: number): number {
  const logAlpha = Math.log(alpha);
  const excess = (u: number): number => Math.log(Math.max(upper(Math.exp(u)), 1e-320)) - logAlpha;
  let low = Math.log(start);
  let high = low;
  let step = 0.1;
  if (excess(low) > 0) {
    do {
      low = high;
      high += step;
      step *= 2;
    } while (excess(high) > 0);
  } else {
    do {
      high = low;
      low -= step;
      step *= 2;
    } while (excess(low) < 0 && low > -700);
  }
  // The logarithm may be near 0, where a relative width is too strict: the shift keeps it away.
  const shift = 1 - low;
  return Math.exp(findRoot((u) => excess(u - shift), low + shift, high + shift, 2e-16) - shift);
}
