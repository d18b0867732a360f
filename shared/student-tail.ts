/**
 * P(T > t) for Student's t, in double precision enough for chances said in whole numbers of 100 (error below 1e-10).
 * The client needs this one tail to recompute a money panel; the engine has its own, which reaches far tails.
 * @param t any real number
 * @param df degrees of freedom, > 0, may be fractional; Infinity gives the normal
 * Source: continued fraction of the incomplete beta function, Abramowitz & Stegun (1964) 26.5.8, 26.7.1.
 */
export function studentUpperTail(t: number, df: number): number {
  if (t < 0) return 1 - studentUpperTail(-t, df);
  const finiteDf = Math.min(df, 1e8);
  const square = t * t;
  // Each side is worked out where its argument keeps all its digits.
  return square < finiteDf
    ? 0.5 - 0.5 * incompleteBeta(square / (finiteDf + square), 0.5, finiteDf / 2)
    : 0.5 * incompleteBeta(finiteDf / (finiteDf + square), finiteDf / 2, 0.5);
}

/** Regularised incomplete beta I_x(a, b) by Lentz's evaluation of its continued fraction. */
function incompleteBeta(x: number, a: number, b: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  const front = Math.exp(logGamma(a + b) - logGamma(a) - logGamma(b) + a * Math.log(x) + b * Math.log1p(-x));
  // The fraction converges fast only below the mean; above it the mirrored one is used.
  return x < (a + 1) / (a + b + 2)
    ? (front * betaFraction(x, a, b)) / a
    : 1 - (front * betaFraction(1 - x, b, a)) / b;
}

function betaFraction(x: number, a: number, b: number): number {
  const tiny = 1e-300;
  let c = 1;
  let d = 1 / nonZero(1 - ((a + b) * x) / (a + 1), tiny);
  let h = d;
  for (let m = 1; m <= 20_000; m += 1) {
    const even = (m * (b - m) * x) / ((a + 2 * m - 1) * (a + 2 * m));
    d = 1 / nonZero(1 + even * d, tiny);
    c = nonZero(1 + even / c, tiny);
    h *= d * c;
    const odd = (-(a + m) * (a + b + m) * x) / ((a + 2 * m) * (a + 2 * m + 1));
    d = 1 / nonZero(1 + odd * d, tiny);
    c = nonZero(1 + odd / c, tiny);
    const step = d * c;
    h *= step;
    if (Math.abs(step - 1) < 1e-14) break;
  }
  return h;
}

const nonZero = (value: number, tiny: number): number => (Math.abs(value) < tiny ? tiny : value);

/** Stirling's series after shifting the argument above 10. */
function logGamma(x: number): number {
  let shift = 0;
  let z = x;
  while (z < 10) {
    shift -= Math.log(z);
    z += 1;
  }
  const inverse = 1 / (z * z);
  const series =
    (1 / 12 - inverse * (1 / 360 - inverse * (1 / 1260 - inverse * (1 / 1680 - inverse / 1188)))) / z;
  return shift + (z - 0.5) * Math.log(z) - z + 0.5 * Math.log(2 * Math.PI) + series;
}
