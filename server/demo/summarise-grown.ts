import type { TrialContent } from '#shared/trial-content.ts';
import { tQuantileUpper } from '#server/stats/engine.ts';
import type { DemoCrop } from './demo-crops.ts';

type GrownPlot = { entry: string; block: string | null; values: Record<string, number> };

/**
 * Turns the plots of a balanced block trial into the table a station would print: means, LSD at 5 % and CV, rounded as printed.
 * The arithmetic is the textbook's for complete blocks without missing plots; ratings are not printed.
 */
export function summariseGrown(crop: DemoCrop, plots: readonly GrownPlot[]): TrialContent['summary'] {
  return crop.traits
    .filter(
      (trait) => trait.kind === 'numeric' && plots.some((plot) => plot.values[trait.slug] !== undefined),
    )
    .map((trait) => {
      const decimals = trait.slug === 'yield' ? 2 : 1;
      const values = plots.map((plot) => ({ ...plot, value: plot.values[trait.slug] ?? 0 }));
      const entryMeans = averageBy(values, (plot) => plot.entry);
      const blockMeans = averageBy(values, (plot) => plot.block ?? '');
      const grand = average(values.map((plot) => plot.value));
      const errorDf = (entryMeans.size - 1) * (blockMeans.size - 1);
      const residualSs = values.reduce((sum, plot) => {
        const fitted = (entryMeans.get(plot.entry) ?? 0) + (blockMeans.get(plot.block ?? '') ?? 0) - grand;
        return sum + (plot.value - fitted) ** 2;
      }, 0);
      const residualMs = residualSs / errorDf;
      const lsd = tQuantileUpper(0.025, errorDf) * Math.sqrt((2 * residualMs) / blockMeans.size);
      return {
        trait: trait.slug,
        means: [...entryMeans].map(([entry, mean]) => ({
          entry,
          mean: round(mean, decimals),
          replicates: blockMeans.size,
        })),
        lsd: round(lsd, decimals),
        lsdAlpha: 0.05,
        cvPercent: round((100 * Math.sqrt(residualMs)) / grand, 1),
        standardError: null,
        residualMs: null,
        errorDf,
      };
    });
}

function averageBy<T extends { value: number }>(
  items: readonly T[],
  key: (item: T) => string,
): Map<string, number> {
  const groups = new Map<string, number[]>();
  for (const item of items) groups.set(key(item), [...(groups.get(key(item)) ?? []), item.value]);
  return new Map([...groups].sort().map(([name, values]) => [name, average(values)]));
}

function average(values: readonly number[]): number {
  return values.reduce((sum, value) => sum + value, 0) / values.length;
}

function round(value: number, decimals: number): number {
  return Number(value.toFixed(decimals));
}
