import { decimalsFor } from '#shared/format-number.ts';
import type { TrialAnalysisView } from '#shared/trial.ts';

/** Decimals that the standard errors of an analysis support, in the trait's unit. */
export function decimalsOfAnalysis(analysis: TrialAnalysisView, unit: string): number {
  const errors = [...analysis.gaps, ...analysis.means].map((row) => row.se).filter((se) => se !== null);
  return decimalsFor(errors[0] ?? null, unit);
}

/** Decimals that show four significant digits of a sum or mean of squares, whose unit has no usual ones. */
export function decimalsOfSquares(value: number): number {
  if (value === 0) return 0;
  return Math.min(Math.max(3 - Math.floor(Math.log10(Math.abs(value))), 0), 8);
}
