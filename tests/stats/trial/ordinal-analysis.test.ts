import { describe, expect, it } from 'vitest';
import { analyseOrdinal } from '#server/stats/trial/ordinal-analysis.ts';
import type { TrialPlot } from '#server/stats/trial/trial-data.ts';

/** Lodging scores of four entries in five blocks; tests by R 4.2.2, friedman.test and kruskal.test. */
const scores = [2, 3, 5, 4, 1, 3, 6, 4, 2, 2, 5, 3, 3, 4, 7, 4, 1, 2, 6, 5];
const plots: TrialPlot[] = scores.map((value, i) => ({
  plot: String(i + 1),
  entry: 'ABCD'[i % 4]!,
  block: String(Math.floor(i / 4) + 1),
  value,
}));

describe('scores of an ordered scale', () => {
  it('have medians and counts by entry', () => {
    const { entries, used } = analyseOrdinal(plots, { kind: 'rcbd' });
    expect(used).toBe(20);
    expect(entries.map((row) => [row.entry, row.median, row.min, row.max])).toEqual([
      ['A', 2, 1, 3],
      ['B', 3, 2, 4],
      ['C', 6, 5, 7],
      ['D', 4, 3, 5],
    ]);
    expect(entries[0]!.counts).toEqual([
      { score: 1, count: 2 },
      { score: 2, count: 2 },
      { score: 3, count: 1 },
    ]);
  });

  it('are compared by Friedman’s test in complete blocks', () => {
    const { test } = analyseOrdinal(plots, { kind: 'rcbd' });
    expect(test).toMatchObject({ method: 'friedman', df: 3 });
    expect(test!.statistic).toBeCloseTo(14.4375, 10);
    expect(test!.p).toBeCloseTo(0.0023662678336702, 12);
  });

  it('are compared by Kruskal and Wallis’ test where a plot is missing', () => {
    const missing = plots.map((plot, i) => (i === 2 ? { ...plot, value: null } : plot));
    const { test } = analyseOrdinal(missing, { kind: 'rcbd' });
    expect(test).toMatchObject({ method: 'kruskal-wallis', df: 3 });
    expect(test!.statistic).toBeCloseTo(14.4556910569106, 10);
    expect(test!.p).toBeCloseTo(0.00234614849608998, 12);
  });

  it('have no test where nothing varies', () => {
    expect(
      analyseOrdinal(
        plots.map((plot) => ({ ...plot, value: 1 })),
        { kind: 'crd' },
      ).test,
    ).toBeNull();
  });
});
