import { tTwoSided } from '#server/stats/distributions/student-t.ts';
import { type CheckOutcome, notComputed } from './check-outcome.ts';

/** The plot that lies farthest from what the model expects of it. */
export interface LargestStudentised {
  /** Position in the residuals. */
  readonly index: number;
  readonly value: number;
  readonly p: number;
  readonly pBonferroni: number;
  /** Plots that could be tested: those the model does not fit exactly. */
  readonly tests: number;
}

/** Leverage above which the model passes through the plot, which then tells nothing about its own residual. */
const FITTED_EXACTLY = 1 - 1e-9;

/**
 * Externally studentised residuals: each residual over its standard error from a fit without that plot.
 * @param residuals length n, in the unit of the response
 * @param leverages diagonal of the hat matrix, length n
 * @param residualDf of the fit, at least 2
 * @returns values (null where the model passes through the plot) and the largest in size with its p
 * Source: Cook & Weisberg (1982), Residuals and Influence in Regression, eq. 2.2.8.
 */
export function studentiseResiduals(
  residuals: ArrayLike<number>,
  leverages: ArrayLike<number>,
  residualDf: number,
): CheckOutcome<{ readonly values: readonly (number | null)[]; readonly largest: LargestStudentised }> {
  if (residualDf < 2) return notComputed('no-residual-df');
  const all = Array.from(residuals);
  const rss = all.reduce((sum, r) => sum + r * r, 0);
  if (rss === 0) return notComputed('no-spread');
  const values = all.map((r, i) => {
    const leverage = leverages[i] ?? 0;
    if (leverage > FITTED_EXACTLY) return null;
    const rest = Math.max(0, rss * (1 - leverage) - r * r);
    return r === 0 ? 0 : (r * Math.sqrt(residualDf - 1)) / Math.sqrt(rest);
  });
  const tests = values.filter((value) => value !== null).length;
  if (tests === 0) return notComputed('no-residual-df');
  const index = values.reduce<number>(
    (best, value, i) =>
      Math.abs(value ?? -1) > Math.abs(values[best] ?? 0) || values[best] === null ? i : best,
    0,
  );
  const value = values[index] ?? 0;
  const p = tTwoSided(value, residualDf - 1);
  return { computed: true, values, largest: { index, value, p, pBonferroni: Math.min(1, p * tests), tests } };
}
