import { compareWithBest } from '#server/stats/distributions/hsu-best.ts';
import { leastTestDf, type MeanEstimates } from './gap-table.ts';
import { isEstimable } from './mean-family.ts';
import type { BestRow } from './trial-result.ts';

/**
 * Hsu's comparison of every entry with the best of the others; where df differ between gaps, the fewest count.
 * Null where not every gap is estimable or there is nothing to test with.
 */
export function compareAllWithBest(
  estimates: MeanEstimates,
  alpha: number,
  better: 'higher' | 'lower',
): BestRow[] | null {
  const { family, values, covariance } = estimates;
  const size = family.labels.length;
  if (!covariance || estimates.isExact || alpha >= 0.5) return null;
  let df = Infinity;
  for (let a = 0; a < size; a++)
    for (let b = a + 1; b < size; b++) {
      if (!isEstimable(family, a, b)) return null;
      df = Math.min(df, estimates.dfOf(a, b));
    }
  if (!(df >= leastTestDf)) return null;
  const rows = Array.from({ length: size }, (_, i) => covariance.subarray(i * size, (i + 1) * size));
  return compareWithBest({ means: values, covariance: rows, df, alpha, better }).map((row, i) => ({
    entry: family.labels[i]!,
    ...row,
  }));
}
