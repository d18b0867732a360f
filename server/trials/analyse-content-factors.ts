import type { AdjustedMean, FamilyTable, TrialAnalysis } from '#server/stats/engine.ts';
import type { ComparisonMethod, FactorFamily, AdjustedMean as MeanView } from '#shared/trial.ts';
import { compareLevels } from './analyse-content-compare.ts';

/** Combinations beyond this many have means and an LSD, but no list of pairs: it grows with the square. */
const mostPairedLevels = 6;

/**
 * Families of means beside the trial's own: each factor of a split plot or factorial, and their combinations, in the
 * order of the model.
 */
export function viewFactors(
  result: TrialAnalysis,
  comparison: ComparisonMethod,
  alpha: number,
): FactorFamily[] {
  return Object.entries(result.factors)
    .filter(([, table]) => !isSameFamily(table, result))
    .map(([name, table]) => {
      const overall = result.anova.find((row) => row.term === name)?.p ?? null;
      const pairs = compareLevels(table, comparison, alpha, overall);
      return {
        name,
        means: viewMeans(table.means, pairs.letters),
        gaps: table.means.length <= mostPairedLevels ? pairs.gaps : [],
        lsd: table.lsd[String(alpha)] ?? null,
      };
    });
}

/** Highest first, with the letters of what is not told apart. */
export function viewMeans(means: readonly AdjustedMean[], letters: ReadonlyMap<string, string>): MeanView[] {
  return means
    .map(({ entry, n, mean, se, df }) => ({ entry, n, mean, se, df, letters: letters.get(entry) ?? '' }))
    .toSorted((a, b) => (b.mean ?? Number.NEGATIVE_INFINITY) - (a.mean ?? Number.NEGATIVE_INFINITY));
}

/** A split plot's own family, its sub factor, is listed among the factors as well. */
function isSameFamily(table: FamilyTable, own: FamilyTable): boolean {
  return (
    table.means.length === own.means.length &&
    table.means.every(({ entry, mean }, i) => own.means[i]?.entry === entry && own.means[i]?.mean === mean)
  );
}
