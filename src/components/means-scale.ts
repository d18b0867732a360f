export type EntryMean = {
  entry: string;
  mean: number;
  se: number | null;
  letters?: string;
};

/** Where the chart's axis runs, in the data's unit, and whether its marks are bars from zero or points. */
export type MeansScale = { low: number; high: number; isFromZero: boolean };

/** Bars serve while the means differ by at least this share of the largest; below it the ends of bars look alike. */
const readableSpread = 0.25;

/**
 * Bars from zero where the differences stay readable on them, else points on a cut scale.
 * @param means in any order, at least one
 * @param lsd gives the cut scale room for its ruler
 */
export function scaleOfMeans(means: readonly EntryMean[], lsd: number | null): MeansScale {
  const values = means.map((entry) => entry.mean);
  const lowest = Math.min(...values);
  const highest = Math.max(...values);
  const isFromZero = lowest >= 0 && (highest - lowest) / highest >= readableSpread;
  if (isFromZero) return { low: 0, high: highest * 1.02, isFromZero };
  const span = Math.max(highest - lowest, Math.abs(highest) * 0.01);
  const low = lowest - span * 0.12;
  const high = Math.max(highest + span * 0.08, low + (lsd ?? 0) * 1.05);
  return { low, high, isFromZero };
}
