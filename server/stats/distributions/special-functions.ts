const LN_SQRT_2PI = 0.918938533204672741780329736406;

/**
 * Remainder of Stirling's formula: ln Γ(x) − [(x − ½) ln x − x + ½ ln 2π].
 * @param x at least 10
 * Source: Stirling's series; Abramowitz & Stegun (1964), 6.1.41.
 */
function stirlingRemainder(x: number): number {
  const r = 1 / (x * x);
  const inner =
    1 / 1260 - r * (1 / 1680 - r * (1 / 1188 - r * (691 / 360360 - r * (1 / 156 - (r * 3617) / 122400))));
  return (1 / 12 - r * (1 / 360 - r * inner)) / x;
}

/**
 * Natural logarithm of the gamma function.
 * @param x positive
 * @throws RangeError when x is not positive
 * Source: recurrence Γ(x + 1) = x Γ(x) up to 10, then Stirling's series.
 */
export function logGamma(x: number): number {
  if (!(x > 0)) throw new RangeError(`logGamma needs x > 0, got ${x}`);
  if (x === Infinity) return Infinity;
  let shifted = x;
  let product = 1;
  while (shifted < 10) {
    product *= shifted;
    shifted += 1;
  }
  const stirling = (shifted - 0.5) * Math.log(shifted) - shifted + LN_SQRT_2PI + stirlingRemainder(shifted);
  return product === 1 ? stirling : stirling - Math.log(product);
}

/**
 * a ln a − a − ln Γ(a), without the cancellation of its large parts.
 * It is the logarithm of the constant of a gamma density written around its mean.
 * @param a positive
 */
export function logGammaConstant(a: number): number {
  if (a < 10) return a * Math.log(a) - a - logGamma(a);
  return 0.5 * Math.log(a) - LN_SQRT_2PI - stirlingRemainder(a);
}

/**
 * Natural logarithm of the beta function B(a, b).
 * Where an argument is large its Stirling parts are cancelled in algebra, not in rounding.
 * @param a positive
 * @param b positive
 * Source: Abramowitz & Stegun (1964), 6.2.2 with 6.1.41.
 */
export function logBeta(a: number, b: number): number {
  const small = Math.min(a, b);
  const large = Math.max(a, b);
  if (large < 10) return logGamma(small) + logGamma(large) - logGamma(small + large);
  const total = small + large;
  const share = Math.log1p(-small / total);
  const remainder = stirlingRemainder(large) - stirlingRemainder(total);
  if (small < 10) {
    return logGamma(small) + remainder + small - small * Math.log(total) + (large - 0.5) * share;
  }
  return (
    LN_SQRT_2PI -
    0.5 * Math.log(large) +
    stirlingRemainder(small) +
    remainder +
    (small - 0.5) * Math.log(small / total) +
    large * share
  );
}

const TINY = 1e-300;

/** Continued fraction of the incomplete beta function by Lentz's method; DLMF 8.17.22. */
function betaFraction(x: number, a: number, b: number): number {
  let c = 1;
  let d = 1 - ((a + b) * x) / (a + 1);
  d = 1 / (Math.abs(d) < TINY ? TINY : d);
  let value = d;
  for (let m = 1; m < 200_000; m += 1) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 + even * d;
    d = 1 / (Math.abs(d) < TINY ? TINY : d);
    c = 1 + even / c;
    if (Math.abs(c) < TINY) c = TINY;
    value *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 + odd * d;
    d = 1 / (Math.abs(d) < TINY ? TINY : d);
    c = 1 + odd / c;
    if (Math.abs(c) < TINY) c = TINY;
    const change = d * c;
    value *= change;
    if (Math.abs(change - 1) < 3e-16) break;
  }
  return value;
}

/** The tail of the beta distribution below x by its fraction: accurate where x is under the mean. */
function betaTail(x: number, y: number, a: number, b: number): number {
  const logX = x > 0.5 ? Math.log1p(-y) : Math.log(x);
  const logY = y > 0.5 ? Math.log1p(-x) : Math.log(y);
  return (Math.exp(a * logX + b * logY - logBeta(a, b)) / a) * betaFraction(x, a, b);
}

/**
 * Regularised incomplete beta function I_x(a, b), with full relative accuracy however small it is.
 * The upper tail is the same function with the sides exchanged: 1 − I_x(a, b) = I_y(b, a).
 * @param x in [0, 1]
 * @param y 1 − x, given separately because the caller can often form it without rounding
 * @param a positive
 * @param b positive
 * Source: DLMF 8.17.22 (continued fraction), 8.17.4 (symmetry).
 */
export function incompleteBeta(x: number, y: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (y <= 0) return 1;
  return x < (a + 1) / (a + b + 2) ? betaTail(x, y, a, b) : 1 - betaTail(y, x, b, a);
}

function gammaSeries(a: number, x: number): number {
  let term = 1 / a;
  let sum = term;
  for (let n = 1; n < 1_000_000 && term > sum * 1e-17; n += 1) {
    term *= x / (a + n);
    sum += term;
  }
  return sum;
}

function gammaFraction(a: number, x: number): number {
  let b = x + 1 - a;
  let c = 1 / TINY;
  let d = 1 / b;
  let value = d;
  for (let n = 1; n < 1_000_000; n += 1) {
    const an = -n * (n - a);
    b += 2;
    d = an * d + b;
    d = 1 / (Math.abs(d) < TINY ? TINY : d);
    c = b + an / c;
    if (Math.abs(c) < TINY) c = TINY;
    const change = d * c;
    value *= change;
    if (Math.abs(change - 1) < 3e-16) break;
  }
  return value;
}

/**
 * Regularised upper incomplete gamma function Q(a, x), with full relative accuracy however small it is.
 * @param a positive
 * @param x at least 0
 * Source: DLMF 8.11.4 (series), 8.9.2 (continued fraction).
 */
export function incompleteGammaUpper(a: number, x: number): number {
  if (x <= 0) return 1;
  if (x === Infinity) return 0;
  const deviation = Math.log(x / a) - (x - a) / a;
  const power = Math.exp(logGammaConstant(a) + a * deviation);
  return x < a + 1 ? 1 - power * gammaSeries(a, x) : power * gammaFraction(a, x);
}
