import { tQuantileUpper } from '#server/stats/engine.ts';
import type { TrialContent } from '#shared/trial-content.ts';
import type { TrialDesign } from '#shared/trial.ts';

type SummaryColumn = TrialContent['summary'][number];

/** Printed figures carry two digits or so: what differs by more than this share is not rounding. */
const contradictionShare = 0.15;

/** A published table with its error recovered. */
export type SummaryAnalysis = {
  grandMean: number;
  means: { entry: string; mean: number; replicates: number }[];
  residualMs: number | null;
  errorDf: number;
  cvPercent: number | null;
  lsd: number | null;
  recoveredFrom: 'lsd' | 'cv' | 'se' | 'residual-ms' | null;
  /** The printed LSD and the one that the table's CV leads to, where they do not agree. */
  contradiction: { given: number; expected: number } | null;
};

/**
 * Recovers the residual mean square of a printed table, by the first of these that it gives: residual mean square,
 * standard error of a mean, LSD, CV.
 * Formulas: domain.md "Summary → standard error" (theory, from memory).
 */
export function analyseSummaryColumn(
  column: SummaryColumn,
  design: TrialDesign,
  alpha: number,
): SummaryAnalysis {
  const replicates = harmonicMean(column.means.map((row) => row.replicates));
  const grandMean = column.means.reduce((sum, row) => sum + row.mean, 0) / column.means.length;
  const errorDf = column.errorDf ?? assumeErrorDf(column.means.length, replicates, design);
  const found = recover(column, replicates, grandMean, errorDf);
  const residualMs = found?.residualMs ?? null;
  return {
    grandMean,
    means: column.means,
    residualMs,
    errorDf,
    cvPercent: column.cvPercent ?? (residualMs === null ? null : (100 * Math.sqrt(residualMs)) / grandMean),
    lsd:
      residualMs === null
        ? null
        : tQuantileUpper(alpha / 2, errorDf) * Math.sqrt((2 * residualMs) / replicates),
    recoveredFrom: found?.from ?? null,
    contradiction: findContradiction(column, replicates, grandMean, errorDf),
  };
}

function recover(
  column: SummaryColumn,
  replicates: number,
  grandMean: number,
  errorDf: number,
): { residualMs: number; from: NonNullable<SummaryAnalysis['recoveredFrom']> } | null {
  if (column.residualMs !== null) return { residualMs: column.residualMs, from: 'residual-ms' };
  if (column.standardError !== null)
    return { residualMs: column.standardError ** 2 * replicates, from: 'se' };
  if (column.lsd !== null && column.lsdAlpha !== null) {
    const sed = column.lsd / tQuantileUpper(column.lsdAlpha / 2, errorDf);
    return { residualMs: (sed ** 2 * replicates) / 2, from: 'lsd' };
  }
  if (column.cvPercent !== null)
    return { residualMs: ((column.cvPercent / 100) * grandMean) ** 2, from: 'cv' };
  return null;
}

/** A printed LSD and the CV printed beside it must lead to each other, as far as rounding and unequal columns allow. */
function findContradiction(
  { lsd, lsdAlpha, cvPercent }: SummaryColumn,
  replicates: number,
  grandMean: number,
  errorDf: number,
): SummaryAnalysis['contradiction'] {
  if (lsd === null || lsdAlpha === null || cvPercent === null) return null;
  const sed = (cvPercent / 100) * grandMean * Math.sqrt(2 / replicates);
  const expected = tQuantileUpper(lsdAlpha / 2, errorDf) * sed;
  return Math.abs(lsd - expected) > contradictionShare * expected ? { given: lsd, expected } : null;
}

function assumeErrorDf(entries: number, replicates: number, design: TrialDesign): number {
  return Math.max(1, design === 'crd' ? entries * (replicates - 1) : (entries - 1) * (replicates - 1));
}

function harmonicMean(values: readonly number[]): number {
  return values.length / values.reduce((sum, value) => sum + 1 / value, 0);
}
