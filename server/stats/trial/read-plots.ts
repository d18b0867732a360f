import { AnalysisError } from '#server/stats/analysis-error.ts';
import { trialLimits, type TrialPlot } from './trial-data.ts';

const largestMagnitude = 1e100;

/** The plots that count, with their places in the list given. */
export interface UsedPlots {
  readonly plots: readonly TrialPlot[];
  /** index into the list given, one for each used plot */
  readonly index: Int32Array;
  readonly values: Float64Array;
  readonly total: number;
}

/** Whether a plot enters the analysis. */
export function isUsed(plot: TrialPlot): boolean {
  return plot.value !== null && !plot.excluded;
}

/**
 * Refuses what cannot be analysed whatever the design, and picks the plots that count.
 * @throws AnalysisError no-values, one-plot, not-finite, value-out-of-range, negative-value, duplicate-plot, missing-level, too-large
 */
export function readPlots(plots: readonly TrialPlot[], allowNegative: boolean): UsedPlots {
  if (plots.length > trialLimits.plots)
    throw new AnalysisError('too-large', `${plots.length} plots; at most ${trialLimits.plots} are analysed`, [
      trialLimits.plots + 1,
    ]);
  refuseDuplicates(plots);
  refuse(plots, (plot) => plot.entry === '', 'missing-level', 'plots without an entry');
  refuse(
    plots,
    (plot) => plot.value !== null && !Number.isFinite(plot.value),
    'not-finite',
    'values that are not finite numbers',
  );
  refuse(
    plots,
    (plot) => plot.value !== null && Math.abs(plot.value) > largestMagnitude,
    'value-out-of-range',
    'values too large to compute with',
  );
  if (!allowNegative)
    refuse(plots, (plot) => isUsed(plot) && plot.value! < 0, 'negative-value', 'values below 0');
  const index: number[] = [];
  plots.forEach((plot, i) => {
    if (isUsed(plot)) index.push(i);
  });
  if (index.length === 0) throw new AnalysisError('no-values', 'no plot has a value');
  if (index.length === 1) throw new AnalysisError('one-plot', 'only one plot has a value', [index[0]! + 1]);
  return {
    plots: index.map((i) => plots[i]!),
    index: Int32Array.from(index),
    values: Float64Array.from(index, (i) => plots[i]!.value!),
    total: plots.length,
  };
}

function refuse(
  plots: readonly TrialPlot[],
  isBad: (plot: TrialPlot) => boolean,
  code: ConstructorParameters<typeof AnalysisError>[0],
  what: string,
): void {
  const rows: number[] = [];
  plots.forEach((plot, i) => {
    if (isBad(plot)) rows.push(i + 1);
  });
  if (rows.length > 0) throw new AnalysisError(code, `${what}: ${rows.length}`, rows);
}

function refuseDuplicates(plots: readonly TrialPlot[]): void {
  const first = new Map<string, number>();
  const rows = new Set<number>();
  plots.forEach((plot, i) => {
    const earlier = first.get(plot.plot);
    if (earlier === undefined) first.set(plot.plot, i + 1);
    else rows.add(earlier).add(i + 1);
  });
  if (rows.size > 0)
    throw new AnalysisError(
      'duplicate-plot',
      'the same plot more than once',
      [...rows].sort((a, b) => a - b),
    );
}
