import type { TrialPlot } from './trial-data.ts';

/** Where each plot stands in the field. */
export interface FieldPlaces {
  readonly rows: Float64Array;
  readonly cols: Float64Array;
}

/** Rows and columns as numbers; null where a plot has none or two stand in one place (rows counted within replicates). */
export function placePlots(plots: readonly TrialPlot[]): FieldPlaces | null {
  const rows = Float64Array.from(plots, (plot) => readPlace(plot.row));
  const cols = Float64Array.from(plots, (plot) => readPlace(plot.col));
  const seen = new Set<string>();
  for (let i = 0; i < plots.length; i++) {
    if (Number.isNaN(rows[i]!) || Number.isNaN(cols[i]!)) return null;
    seen.add(`${rows[i]}:${cols[i]}`);
  }
  return seen.size === plots.length ? { rows, cols } : null;
}

function readPlace(place: string | number | null | undefined): number {
  if (place === null || place === undefined || place === '') return Number.NaN;
  const value = Number(place);
  return Number.isInteger(value) ? value : Number.NaN;
}
