import type { Gap } from '#server/stats/engine.ts';
import type { ContentAnalysis } from './analyse-content.ts';

/** Changes when a published trial analysed, or a question weighed, again could give other figures. */
export const engineVersion = '2';

/** What a version keeps of the analysis of one trait: the rows of version_fits and entry_means, without their ids. */
export type TraitFit = {
  grandMean: number;
  residualMs: number | null;
  residualDf: number | null;
  cvPercent: number | null;
  entryP: number | null;
  /** Mean least significant difference at the trial's alpha. */
  lsd: number | null;
  plotsUsed: number;
  plotsExcluded: number;
  plotsMissing: number;
  means: EntryMean[];
};

/** For an ordinal trait `mean` holds the median of the scores, without variance: steps of a scale are not averaged. */
export type EntryMean = {
  entryLabel: string;
  mean: number;
  /** Half the mean variance of the entry's differences: without the block variance that an adjusted mean carries. */
  variance: number | null;
  df: number | null;
  plotsUsed: number;
};

/** The part of an analysis that is stored with a version; null where the trait has none. */
export function summariseFit(analysis: ContentAnalysis): TraitFit | null {
  const { counts } = analysis;
  const plots = {
    plotsUsed: counts.used,
    plotsExcluded: counts.excluded,
    plotsMissing: counts.missing,
  };
  switch (analysis.kind) {
    case 'none':
      return null;
    case 'ordinal':
      return {
        ...plots,
        grandMean: medianOf(analysis.result.entries.map((row) => row.median)),
        residualMs: null,
        residualDf: null,
        cvPercent: null,
        entryP: analysis.result.test?.p ?? null,
        lsd: null,
        means: analysis.result.entries.map((row) => ({
          entryLabel: String(row.entry),
          mean: row.median,
          variance: null,
          df: null,
          plotsUsed: row.n,
        })),
      };
    case 'summary':
      return { ...plots, ...summariseTable(analysis.result) };
    case 'numeric': {
      const { fit, anova, lsd, means, gaps } = analysis.result;
      return {
        ...plots,
        grandMean: fit.grandMean,
        residualMs: fit.residualMs,
        residualDf: fit.residualMs === null ? null : fit.residualDf,
        cvPercent: fit.cvPercent,
        entryP: findEntryTest(anova)?.p ?? null,
        lsd: lsd[String(analysis.alpha)]?.mean ?? null,
        means: means.flatMap((row) =>
          row.mean === null
            ? []
            : [
                {
                  entryLabel: row.entry,
                  mean: row.mean,
                  plotsUsed: row.n,
                  ...halfMeanVariance(row.entry, gaps),
                },
              ],
        ),
      };
    }
  }
}

/** The row of the analysis of variance that asks whether the entries differ. */
export function findEntryTest<Row extends { term: string }>(anova: readonly Row[]): Row | undefined {
  return anova.find((row) => row.term === 'entry') ?? anova.find((row) => row.term === 'sub');
}

function halfMeanVariance(
  entry: string,
  gaps: readonly Gap[],
): { variance: number | null; df: number | null } {
  const own = gaps.filter((gap) => (gap.a === entry || gap.b === entry) && gap.se !== null);
  if (own.length === 0) return { variance: null, df: null };
  const average = (values: readonly number[]): number =>
    values.reduce((sum, value) => sum + value, 0) / values.length;
  return {
    variance: average(own.map((gap) => (gap.se ?? 0) ** 2)) / 2,
    df: average(own.map((gap) => gap.df ?? 0)),
  };
}

function summariseTable(result: Extract<ContentAnalysis, { kind: 'summary' }>['result']) {
  return {
    grandMean: result.grandMean,
    residualMs: result.residualMs,
    residualDf: result.errorDf,
    cvPercent: result.cvPercent,
    entryP: null,
    lsd: result.lsd,
    means: result.means.map((row) => ({
      entryLabel: row.entry,
      mean: row.mean,
      variance: result.residualMs === null ? null : result.residualMs / row.replicates,
      df: result.errorDf,
      plotsUsed: row.replicates,
    })),
  };
}

function medianOf(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  const middle = sorted.length / 2;
  const [low, high] = [sorted[Math.ceil(middle) - 1] ?? 0, sorted[Math.floor(middle)] ?? 0];
  return (low + high) / 2;
}
