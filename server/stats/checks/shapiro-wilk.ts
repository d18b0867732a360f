import { normalQuantile, normalUpper } from '#server/stats/distributions/normal.ts';
import { type CheckOutcome, notComputed } from './check-outcome.ts';

/** Σ c_i x^i, lowest power first, as the coefficients are printed. */
function polynomial(coefficients: readonly number[], x: number): number {
  return coefficients.reduceRight((value, c) => value * x + c, 0);
}

const LARGEST = [0, 0.221157, -0.147981, -2.07119, 4.434685, -2.706056];
const SECOND = [0, 0.042981, -0.293762, -1.752461, 5.682633, -3.582633];
const SMALL_SHIFT = [-2.273, 0.459];
const SMALL_MEAN = [0.544, -0.39978, 0.025054, -6.714e-4];
const SMALL_LOG_SD = [1.3822, -0.77857, 0.062767, -0.0020322];
const LARGE_MEAN = [-1.5861, -0.31082, -0.083751, 0.0038915];
const LARGE_LOG_SD = [-0.4803, -0.082676, 0.0030302];

/** Weights of the order statistics: antisymmetric, length n, smallest first. */
function orderWeights(n: number): Float64Array {
  const weights = new Float64Array(n);
  const half = n >> 1;
  if (n === 3) {
    weights[0] = -Math.SQRT1_2;
    weights[2] = Math.SQRT1_2;
    return weights;
  }
  const scores = Float64Array.from({ length: half }, (_, i) => -normalQuantile((i + 0.625) / (n + 0.25)));
  const total = 2 * scores.reduce((sum, m) => sum + m * m, 0);
  const root = 1 / Math.sqrt(n);
  const own = n > 5 ? 2 : 1;
  const heads = [LARGEST, SECOND]
    .slice(0, own)
    .map((c, i) => polynomial(c, root) + (scores[i] ?? 0) / Math.sqrt(total));
  const restScores = heads.reduce((sum, _, i) => sum - 2 * (scores[i] ?? 0) ** 2, total);
  const restWeights = heads.reduce((sum, a) => sum - 2 * a * a, 1);
  const scale = Math.sqrt(restScores / restWeights);
  for (let i = 0; i < half; i += 1) {
    const weight = heads[i] ?? (scores[i] ?? 0) / scale;
    weights[i] = -weight;
    weights[n - 1 - i] = weight;
  }
  return weights;
}

/** 1 − W², formed without cancellation. */
function complement(sorted: Float64Array, weights: Float64Array): number {
  const n = sorted.length;
  const range = (sorted[n - 1] ?? 0) - (sorted[0] ?? 0);
  const mean = sorted.reduce((sum, x) => sum + x / range, 0) / n;
  let ssWeights = 0;
  let ssValues = 0;
  let cross = 0;
  sorted.forEach((x, i) => {
    const deviation = x / range - mean;
    const weight = weights[i] ?? 0;
    ssWeights += weight * weight;
    ssValues += deviation * deviation;
    cross += weight * deviation;
  });
  const product = Math.sqrt(ssWeights * ssValues);
  return ((product - cross) * (product + cross)) / (ssWeights * ssValues);
}

function tailProbability(oneMinusW: number, n: number): number {
  if (n === 3) {
    const w = Math.max(0.75, 1 - oneMinusW);
    return Math.max(0, (6 / Math.PI) * (Math.asin(Math.sqrt(w)) - Math.asin(Math.sqrt(0.75))));
  }
  const y = Math.log(oneMinusW);
  if (n <= 11) {
    const shift = polynomial(SMALL_SHIFT, n);
    if (y >= shift) return 1e-99;
    return normalUpper(
      (-Math.log(shift - y) - polynomial(SMALL_MEAN, n)) / Math.exp(polynomial(SMALL_LOG_SD, n)),
    );
  }
  const logN = Math.log(n);
  return normalUpper((y - polynomial(LARGE_MEAN, logN)) / Math.exp(polynomial(LARGE_LOG_SD, logN)));
}

/**
 * Shapiro–Wilk test that values come from one normal distribution.
 * @param values 3 to 5,000 residuals, any order
 * @returns W and its p; not computed for other numbers of values or when all are equal
 * Source: Royston (1995), algorithm AS R94, Appl. Statist. 44:547–551.
 */
export function shapiroWilk(
  values: ArrayLike<number>,
): CheckOutcome<{ readonly w: number; readonly p: number }> {
  const n = values.length;
  if (n < 3) return notComputed('too-few-values');
  if (n > 5000) return notComputed('too-many-values');
  const sorted = Float64Array.from(values).sort();
  if (sorted[0] === sorted[n - 1]) return notComputed('no-spread');
  const oneMinusW = Math.max(complement(sorted, orderWeights(n)), 1e-19);
  return { computed: true, w: 1 - oneMinusW, p: tailProbability(oneMinusW, n) };
}
