import { oneSidedDunnettQuantile } from './one-sided-dunnett.ts';
import { tQuantileUpper } from './student-t.ts';

/** One entry against the best of the others. */
export interface BestComparison {
  /** Simultaneous limits of its mean minus the best of the others', at most 0 and at least 0. */
  readonly lower: number;
  readonly upper: number;
  /** Estimate of the same difference. */
  readonly estimate: number;
  /** False when it is shown not to be the best: `upper` is 0. */
  readonly mayBeBest: boolean;
  /** True when it alone is shown to be the best: `lower` is 0. */
  readonly isBest: boolean;
}

/** Data of a comparison with the best. */
export interface BestQuestion {
  /** Means of the k entries, any unit. */
  readonly means: ArrayLike<number>;
  /** k × k; only variances of differences, v_ii + v_jj − 2 v_ij, are used. */
  readonly covariance: readonly ArrayLike<number>[];
  /** Degrees of freedom, fractional or Infinity. */
  readonly df: number;
  /** Joint error rate, in (0, 0.5). */
  readonly alpha: number;
  readonly better: 'higher' | 'lower';
}

/** Correlations of the differences of the others from one entry, and the standard errors of these differences. */
function differencesFrom(
  control: number,
  covariance: readonly ArrayLike<number>[],
): { ses: number[]; correlation: number[][] } {
  const at = (i: number, j: number): number => covariance[i]?.[j] ?? 0;
  const others = covariance.map((_, j) => j).filter((j) => j !== control);
  const shared = (i: number, j: number): number =>
    at(i, j) - at(i, control) - at(control, j) + at(control, control);
  const ses = others.map((j) => Math.sqrt(shared(j, j)));
  const correlation = others.map((i, a) =>
    others.map((j, b) => (a === b ? 1 : shared(i, j) / ((ses[a] ?? 0) * (ses[b] ?? 0)))),
  );
  return { ses, correlation };
}

function isSameCorrelation(a: readonly number[][], b: readonly number[][]): boolean {
  return a.every((row, i) => row.every((value, j) => Math.abs(value - (b[i]?.[j] ?? 2)) < 1e-10));
}

/** Widths of an entry's differences from the others, by the other entry. */
type Margins = (j: number) => number;

/**
 * For each entry as control its margins, critical value times standard error; null where even those of Bonferroni's
 * larger value show that some other entry is better: of such an entry nothing else is asked.
 */
function marginRows(question: BestQuestion, means: readonly number[]): (Margins | null)[] {
  const { alpha, df, covariance } = question;
  const largest = tQuantileUpper(alpha / (means.length - 1), df);
  let known: { correlation: number[][]; d: number } | undefined;
  return means.map((mean, i) => {
    const { ses, correlation } = differencesFrom(i, covariance);
    const se = (j: number): number => ses[j < i ? j : j - 1] ?? 0;
    if (means.some((other, j) => j !== i && mean - other + largest * se(j) <= 0)) return null;
    // Balanced trials ask the same question for every entry.
    if (!known || !isSameCorrelation(correlation, known.correlation)) {
      known = { correlation, d: oneSidedDunnettQuantile(alpha, df, correlation) };
    }
    const { d } = known;
    return (j) => d * se(j);
  });
}

/**
 * Hsu's multiple comparisons with the best: constrained simultaneous intervals for each mean minus the best of
 * the others.
 * @returns one row an entry, in the order of the means
 * @throws RangeError for fewer than two entries or alpha outside (0, 0.5)
 * Source: Hsu (1996), Multiple Comparisons, chapter 4; unequal variances: Edwards & Hsu (1983), J. Amer. Statist.
 * Assoc. 78:965–971.
 */
export function compareWithBest(question: BestQuestion): readonly BestComparison[] {
  const { alpha, better } = question;
  const k = question.means.length;
  if (k < 2) throw new RangeError(`the best of ${k} entries`);
  if (!(alpha > 0 && alpha < 0.5)) throw new RangeError(`alpha must lie between 0 and 0.5, got ${alpha}`);
  const sign = better === 'higher' ? 1 : -1;
  const means = Array.from(question.means, (mean) => sign * mean);
  const margins = marginRows(question, means);
  const gap = (i: number, j: number): number => (means[i] ?? 0) - (means[j] ?? 0);
  const others = (i: number): number[] => means.map((_, j) => j).filter((j) => j !== i);
  const uppers = margins.map((margin, i) =>
    margin === null ? 0 : Math.max(0, Math.min(...others(i).map((j) => gap(i, j) + margin(j)))),
  );
  const candidates = margins.flatMap((margin, i) =>
    margin !== null && (uppers[i] ?? 0) > 0 ? [{ i, margin }] : [],
  );
  return means.map((_, i) => {
    const upper = uppers[i] ?? 0;
    const rivals = candidates.filter((rival) => rival.i !== i);
    const lower = Math.min(0, ...rivals.map((rival) => gap(i, rival.i) - rival.margin(i)));
    const isBest = upper > 0 && lower === 0;
    const estimate = sign * Math.min(...others(i).map((j) => gap(i, j)));
    return better === 'higher'
      ? { lower, upper, estimate, mayBeBest: upper > 0, isBest }
      : { lower: 0 - upper, upper: 0 - lower, estimate, mayBeBest: upper > 0, isBest };
  });
}
