import { AnalysisError } from '#server/stats/analysis-error.ts';
import { dunnettAdjust } from '#server/stats/distributions/dunnett.ts';
import { leastTestDf, type MeanEstimates } from './gap-table.ts';
import { isEstimable } from './mean-family.ts';
import type { DunnettResult } from './trial-result.ts';

/**
 * Dunnett's test of all entries against one, on the model's own covariance and df.
 * @param missing entries without data, which a check may not be
 * @returns null where there is no variance to test with
 * @throws AnalysisError unknown-check
 */
export function compareWithCheck(
  estimates: MeanEstimates,
  check: string,
  missing: readonly string[],
): DunnettResult | null {
  const { family, values, covariance } = estimates;
  const size = family.labels.length;
  const c = family.labels.indexOf(check);
  if (c < 0)
    throw new AnalysisError(
      'unknown-check',
      missing.includes(check) ? `the check ${check} has no values` : `no entry is named ${check}`,
    );
  if (!covariance || estimates.isExact) return null;
  const dfOf = (i: number) => estimates.dfOf(Math.min(i, c), Math.max(i, c));
  const others = Array.from({ length: size }, (_, i) => i).filter(
    (i) => i !== c && isEstimable(family, i, c) && dfOf(i) >= leastTestDf,
  );
  if (others.length === 0) return null;
  const product = (i: number, j: number) =>
    covariance[i * size + j]! -
    covariance[i * size + c]! -
    covariance[c * size + j]! +
    covariance[c * size + c]!;
  const se = others.map((i) => Math.sqrt(product(i, i)));
  const ts = others.map((i, k) => (values[i]! - values[c]!) / se[k]!);
  const dfs = others.map(dfOf);
  const correlation = others.map((i, k) =>
    Float64Array.from(others, (j, l) => (k === l ? 1 : product(i, j) / (se[k]! * se[l]!))),
  );
  const adjusted = dunnettAdjust({ ts, df: estimates.hasSharedDf ? dfs[0]! : dfs, correlation });
  return {
    check,
    maxError: adjusted.maxError,
    rows: others.map((i, k) => ({
      entry: family.labels[i]!,
      estimate: values[i]! - values[c]!,
      se: se[k]!,
      df: dfs[k]!,
      t: ts[k]!,
      p: adjusted.p[k]!,
    })),
  };
}
