import { findUpperQuantile } from './find-root.ts';
import { normalCdf, normalPdf } from './normal.ts';
import { averageOverScale } from './scale-average.ts';
import { tabulateTail, type ScaledTail } from './scaled-tail.ts';

const RANGE_DECAY = 0.25;
const STEP = 1 / 6;
const NEGLIGIBLE = 1e-17;

/**
 * P(range of k independent standard normals > w), as a sum of positive terms only: with the largest value at z,
 * k ∫ φ(z) [Φ(z)^(k−1) − (Φ(z) − Φ(z − w))^(k−1)] dz.
 * The trapezoidal rule on the whole line converges geometrically here.
 * Source: Hartley (1942), Biometrika 32:309–310, written for the complement.
 */
function rangeUpper(w: number, k: number, step = STEP): number {
  const term = (z: number): number => {
    const below = normalCdf(z);
    const outside = normalCdf(z - w) / below;
    if (outside >= 1) return normalPdf(z) * Math.pow(below, k - 1);
    return -normalPdf(z) * Math.exp((k - 1) * Math.log(below)) * Math.expm1((k - 1) * Math.log1p(-outside));
  };
  const centre = Math.max(w / 2, 1);
  let sum = term(centre);
  for (const direction of [step, -step]) {
    let previous = 0;
    for (let j = 1; j < 400; j += 1) {
      const value = term(centre + j * direction);
      sum += value;
      if (value <= sum * NEGLIGIBLE && value <= previous) break;
      previous = value;
    }
  }
  return Math.min(1, k * sum * step);
}

const tails = new Map<number, ScaledTail>();

/** From this many pairs on a table of the tail costs less than the pairs one by one. */
const MANY_PAIRS = 200;
/** Beyond this a table would be filled for single pairs. */
const LAST_TABULATED = 20;

/** The tabulated tail for k values; kept, since every pair of a trial asks for the same one. */
function rangeTail(k: number): ScaledTail {
  let tail = tails.get(k);
  if (!tail) {
    tail = tabulateTail((w) => rangeUpper(w, k), RANGE_DECAY);
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

/**
 * Tukey–Kramer adjusted p values of gaps among k entries.
 * @param ts gap divided by its standard error, one for each pair, sign ignored
 * @param k number of entries in the family
 * @param df degrees of freedom shared by all pairs
 * @returns p values in the order of ts
 * Source: Kramer (1956), Biometrics 12:307–310; P(Q > √2 |t|).
 */
export function tukeyAdjust(ts: ArrayLike<number>, k: number, df: number): Float64Array {
  // many pairs share one curve: its logarithm is smooth, so that a table of it keeps relative accuracy
  const curve =
    ts.length < MANY_PAIRS ? null : tabulateTail((q) => Math.log(studentisedRangeUpper(q, k, df)), 0);
  const out = new Float64Array(ts.length);
  for (let i = 0; i < out.length; i += 1) {
    const q = Math.SQRT2 * Math.abs(ts[i] as number);
    const tabulated = curve && q < LAST_TABULATED ? Math.exp(curve.scaled(q)) : Number.NaN;
    out[i] = tabulated > 0 ? Math.min(1, tabulated) : studentisedRangeUpper(q, k, df);
  }
  return out;
}
