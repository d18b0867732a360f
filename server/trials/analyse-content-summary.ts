import { recoverError, tQuantileUpper, type RecoveredError } from '#server/stats/engine.ts';
import type { TrialContent } from '#shared/trial-content.ts';
import type { TrialDesign } from '#shared/trial.ts';

type SummaryColumn = TrialContent['summary'][number];

/** A published table with its error recovered; what depends on the error is null where the table gives none. */
export type SummaryAnalysis = {
  /** Plain mean of the printed means. */
  grandMean: number;
  means: { entry: string; mean: number; replicates: number }[];
  /** Error variance of one plot. */
  residualMs: number | null;
  errorDf: number | null;
  cvPercent: number | null;
  /** At the trial's alpha, for two entries with the usual number of plots. */
  lsd: number | null;
  recoveredFrom: 'lsd' | 'cv' | 'se' | 'residual-ms' | null;
  /** The printed LSD and the one that the other printed figures lead to, where they do not agree. */
  contradiction: { given: number; expected: number } | null;
};

/** Analyses one column of a published table: its error comes from the most finely printed of its measures. */
export function analyseSummaryColumn(
  column: SummaryColumn,
  design: TrialDesign,
  alpha: number,
): SummaryAnalysis {
  const grandMean = column.means.reduce((sum, row) => sum + row.mean, 0) / column.means.length;
  const error = recoverError({
    design: design === 'row-column' || design === 'factorial' ? 'unknown' : design,
    entries: column.means.length,
    replicates: column.means.map((row) => row.replicates),
    trialMean: { value: grandMean },
    given: {
      lsd: print(column.lsd),
      cvPercent: print(column.cvPercent),
      seMean: print(column.standardError),
      residualMs: print(column.residualMs),
    },
    ...(column.errorDf !== null && { errorDf: column.errorDf }),
    ...(column.lsdAlpha !== null && { alpha: column.lsdAlpha }),
  });
  const table = { grandMean, means: column.means };
  if (!error.recovered)
    return {
      ...table,
      residualMs: null,
      errorDf: null,
      cvPercent: column.cvPercent,
      lsd: null,
      recoveredFrom: null,
      contradiction: null,
    };
  const { residualMs, df, sed } = error;
  return {
    ...table,
    residualMs,
    errorDf: df,
    cvPercent: residualMs === null ? column.cvPercent : (100 * Math.sqrt(residualMs)) / grandMean,
    lsd: tQuantileUpper(alpha / 2, df) * sed,
    recoveredFrom: sourceNames[error.from] ?? null,
    contradiction: findContradiction(error, column),
  };
}

const print = (value: number | null) => (value === null ? undefined : { value });

const sourceNames: Partial<Record<string, NonNullable<SummaryAnalysis['recoveredFrom']>>> = {
  lsd: 'lsd',
  cvPercent: 'cv',
  seMean: 'se',
  residualMs: 'residual-ms',
};

/** A contradiction in terms of the LSD, since that is the figure readers of a table go by. */
function findContradiction(
  error: Extract<RecoveredError, { recovered: true }>,
  column: SummaryColumn,
): SummaryAnalysis['contradiction'] {
  const isContradicted = error.findings.some((finding) => finding.code === 'quantities-contradict');
  const other = error.estimates.find((estimate) => estimate.from !== 'lsd');
  if (!isContradicted || other === undefined || column.lsd === null || column.lsdAlpha === null) return null;
  return { given: column.lsd, expected: tQuantileUpper(column.lsdAlpha / 2, error.df) * other.sed };
}
