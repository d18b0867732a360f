import { tabulate } from './chebyshev-panels.ts';
import { findUpperQuantile } from './find-root.ts';
import { normalCdf, normalPdf } from './normal.ts';
import { averageOverScale } from './scale-average.ts';
import { tabulateTail, type ScaledTail } from './scaled-tail.ts';

const RANGE_DECAY = 0.25;
/** Normal deviates beyond which nothing is left to add, and the largest one a tail in doubles asks for. */
const REACH = 8.8;
const FARTHEST = 36;

/** Step of the trapezoidal rule: the largest of many values has a narrower distribution than one of few. */
function stepFor(k: number): number {
  if (k <= 10) return 0.3;
  if (k <= 30) return 0.25;
  return k <= 100 ? 0.16 : 0.1;
}

/**
 * P(range of k independent standard normals > w), as a sum of positive terms only: with the largest value at z,
 * k ∫ φ(z) [Φ(z)^(k−1) − (Φ(z) − Φ(z − w))^(k−1)] dz.
 * The trapezoidal rule on the whole line converges geometrically here (1e-11 against a step of 0.05).
 * Source: Hartley (1942), Biometrika 32:309–310, written for the complement.
 */
function rangeUpper(k: number): (w: number) => number {
  const step = stepFor(k);
  const deviates = Float64Array.from(
    { length: Math.ceil((REACH + FARTHEST) / step) },
    (_, j) => j * step - REACH,
  );
  const cdf = deviates.map(normalCdf);
  const weight = deviates.map((z, j) => k * step * normalPdf(z) * Math.pow(cdf[j] ?? 0, k - 1));
  return (w) => {
    const first = Math.max(0, Math.floor(w / 2 / step));
    const last = Math.min(deviates.length, Math.ceil((w / 2 + 2 * REACH) / step));
    let sum = 0;
    for (let j = first; j < last; j += 1) {
      const outside = normalCdf((deviates[j] as number) - w) / (cdf[j] as number);
      sum -= (weight[j] as number) * Math.expm1((k - 1) * Math.log1p(-Math.min(1, outside)));
    }
    return Math.min(1, sum);
  };
}

const tails = new Map<number, ScaledTail>();

/** The tabulated tail for k values; kept, since every pair of a trial asks for the same one. */
function rangeTail(k: number): ScaledTail {
  let tail = tails.get(k);
  if (!tail) {
    tail = tabulateTail(rangeUpper(k), RANGE_DECAY);
    tails.set(k, tail);
  }
  return tail;
}

function requireFamily(k: number, df: number): void {
  if (!(Number.isInteger(k) && k >= 2)) throw new RangeError(`a range needs two or more values, got ${k}`);
  if (!(df > 0)) throw new RangeError(`degrees of freedom must be positive, got ${df}`);
}

/**
 * P(Q > q) for the studentised range, accurate in relative terms in the upper tail.
 * @param q at least 0
 * @param k number of values the range is taken over, integer of at least 2
 * @param df degrees of freedom of the standard deviation, fractional allowed, Infinity allowed
 * @throws RangeError when k, df or q is out of range
 */
export function studentisedRangeUpper(q: number, k: number, df: number): number {
  requireFamily(k, df);
  if (Number.isNaN(q)) throw new RangeError('q is not a number');
  if (q <= 0) return 1;
  if (q === Infinity) return 0;
  return averageOverScale(rangeTail(k), q, df);
}

/**
 * The q with P(Q > q) = alpha; k, df and errors as studentisedRangeUpper.
 * @param alpha in (0, 1)
 */
export function studentisedRangeQuantileUpper(alpha: number, k: number, df: number): number {
  requireFamily(k, df);
  if (!(alpha > 0 && alpha < 1)) throw new RangeError(`a tail must lie between 0 and 1, got ${alpha}`);
  return findUpperQuantile((q) => studentisedRangeUpper(q, k, df), alpha, 3);
}

/** The q with P(Q ≤ q) = p; see studentisedRangeQuantileUpper. */
export function studentisedRangeQuantile(p: number, k: number, df: number): number {
  return studentisedRangeQuantileUpper(1 - p, k, df);
}

/** Gaps this wide are too few to tabulate for; NaN goes the same way and is refused there. */
const LAST_TABULATED = 16;
const PANEL_WIDTH = 1.6;
/** Pairs from which tabulating the tail over q is cheaper than one integral a pair. */
const MANY_PAIRS = 120;
/** Curves kept at a time. */
const MOST_CURVES = 64;

/**
 * Tukey–Kramer adjusted p values of gaps among k entries.
 * @param ts gap divided by its standard error, one for each pair, sign ignored
 * @param k number of entries in the family
 * @param df degrees of freedom shared by all pairs
 * @returns p values in the order of ts
 * @throws RangeError when k, df or a t is out of range
 * Source: Kramer (1956), Biometrics 12:307–310; P(Q > √2 |t|).
 */
export function tukeyAdjust(ts: ArrayLike<number>, k: number, df: number): Float64Array {
  const qs = Float64Array.from(ts, (t) => Math.SQRT2 * Math.abs(t));
  if (qs.length < MANY_PAIRS || df === Infinity) return qs.map((q) => studentisedRangeUpper(q, k, df));
  const ratio = rangeCurve(k, df);
  return qs.map((q) =>
    q < LAST_TABULATED ? Math.min(1, ratio(q) * Math.exp(logFall(q, df))) : studentisedRangeUpper(q, k, df),
  );
}

/** ln of exp(−s² q²/4) averaged over the scale s: what the tail falls like, so that their ratio is smooth. */
function logFall(q: number, df: number): number {
  return -0.5 * df * Math.log1p((q * q) / (2 * df));
}

const curves = new Map<string, (q: number) => number>();

/** P(Q > q) over exp(logFall), tabulated; kept, since the traits of a trial and every visit to it ask for the same. */
function rangeCurve(k: number, df: number): (q: number) => number {
  const key = `${k} ${df}`;
  let curve = curves.get(key);
  if (!curve) {
    curve = tabulate((q) => studentisedRangeUpper(q, k, df) * Math.exp(-logFall(q, df)), PANEL_WIDTH);
    if (curves.size >= MOST_CURVES) curves.clear();
    curves.set(key, curve);
  }
  return curve;
}
