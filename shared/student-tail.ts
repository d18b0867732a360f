/**
 * P(T > t) for Student's t, in double precision enough for chances said in whole numbers of 100 (error below 1e-10).
 * The client needs this one tail to recompute a money panel; the engine has its own, which reaches far tails.
 * @param t any real number
 * @param df degrees of freedom, > 0, may be fractional; Infinity gives the normal
 * Source: continued fraction of the incomplete beta function, Abramowitz & Stegun (1964) 26.5.8, 26.7.1.
 */
export function studentUpperTail(t: number, df: number): number {
  return openStudentTail(df)(t);
}

/** The same for many t of one df: what hangs on the df alone is worked out once, which is most of the work. */
export function openStudentTail(df: number): (t: number) => number {
  const finiteDf = Math.min(df, 1e8);
  const half = finiteDf / 2;
  const logBeta = logGamma(0.5) + logGamma(half) - logGamma(0.5 + half);
  const upper = (t: number): number => {
    const square = t * t;
    // Each side is worked out where its argument keeps all its digits.
    return square < finiteDf
      ? 0.5 - 0.5 * incompleteBeta(square / (finiteDf + square), 0.5, half, logBeta)
      : 0.5 * incompleteBeta(finiteDf / (finiteDf + square), half, 0.5, logBeta);
  };
  return (t) => (t < 0 ? 1 - upper(-t) : upper(t));
}

/** Steps of the table to a unit of t, and how far it reaches: beyond, every t is worked out. */
const stepsPerUnit = 32;
const tableReach = 8;

/**
 * The same from a table, for searches that ask thousands of times: a cubic between neighbouring steps with the density as
 * its slope, within 1e-8 of the tail itself.
 */
export function tabulateStudentTail(df: number): (t: number) => number {
  const known = tables.get(df);
  if (known) return known;
  const made = makeTable(df);
  if (tables.size >= mostTables) tables.clear();
  tables.set(df, made);
  return made;
}

/** A money panel asks for the same few degrees of freedom at every edit; those of other questions are not kept for ever. */
const tables = new Map<number, (t: number) => number>();
const mostTables = 64;

function makeTable(df: number): (t: number) => number {
  const tail = openStudentTail(df);
  const density = openStudentDensity(df);
  const step = 1 / stepsPerUnit;
  const knots = Array.from({ length: tableReach * stepsPerUnit + 2 }, (_, i) => i * step);
  const tails = Float64Array.from(knots, tail);
  const slopes = Float64Array.from(knots, (t) => -density(t) * step);
  const upper = (t: number): number => {
    const i = Math.floor(t * stepsPerUnit);
    const x = t * stepsPerUnit - i;
    const from = tails[i] ?? 0;
    const rise = (tails[i + 1] ?? 0) - from;
    const slopeFrom = slopes[i] ?? 0;
    const slopeTo = slopes[i + 1] ?? 0;
    return (
      from + x * (slopeFrom + x * (3 * rise - 2 * slopeFrom - slopeTo + x * (slopeFrom + slopeTo - 2 * rise)))
    );
  };
  return (t) => (Math.abs(t) > tableReach ? tail(t) : t < 0 ? 1 - upper(-t) : upper(t));
}

/** Source: Abramowitz & Stegun (1964) 26.7.2. */
function openStudentDensity(df: number): (t: number) => number {
  const finiteDf = Math.min(df, 1e8);
  const logPeak =
    logGamma((finiteDf + 1) / 2) - logGamma(0.5) - logGamma(finiteDf / 2) - 0.5 * Math.log(finiteDf);
  return (t) => Math.exp(logPeak - ((finiteDf + 1) / 2) * Math.log1p((t * t) / finiteDf));
}

/** Regularised incomplete beta I_x(a, b) by Lentz's evaluation of its continued fraction. */
function incompleteBeta(x: number, a: number, b: number, logBeta: number): number {
  if (x <= 0) return 0;
  if (x >= 1) return 1;
  const front = Math.exp(a * Math.log(x) + b * Math.log1p(-x) - logBeta);
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
