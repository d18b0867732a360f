import { describe, expect, it } from 'vitest';
import { combineTrials } from '#server/stats/network/combine-trials.ts';
import { defaultUsualVariances } from '#server/stats/network/interaction-variances.ts';
import { estimateUsualVariances } from '#server/stats/network/estimate-usual-variances.ts';
import { growCells } from '#tests/support/random-network.ts';
import { readNetworkCase, toCells } from '#tests/support/network-case.ts';

describe('usual variances from own trials', () => {
  const cells = growCells({ entries: 30, sites: 12, years: 5, presence: 0.8, seed: 12 });
  const estimate = estimateUsualVariances(cells);

  it('are those of plain REML over all of them', () => {
    if (estimate.outcome !== 'estimated') throw new Error(estimate.outcome);
    const combined = combineTrials(cells, { penalty: 0 });
    if (combined.outcome === 'not-fitted') throw new Error(combined.reason);
    const { site, year, rest } = combined.fit.components;
    expect(estimate.variances).toMatchObject({ site, year, rest });
    expect([estimate.environments, estimate.seasons, estimate.entries]).toEqual([60, 5, 30]);
  });

  it('lie in their intervals, as the true ones do', () => {
    if (estimate.outcome !== 'estimated') throw new Error(estimate.outcome);
    // the generator's standard deviations: 0.2, 0.2, 0.25
    const truth = { site: 0.04, year: 0.04, rest: 0.0625 };
    for (const term of ['site', 'year', 'rest'] as const) {
      const [low, high] = estimate.intervals[term]!;
      expect(low).toBeLessThan(truth[term]);
      expect(high).toBeGreaterThan(truth[term]);
      expect(low).toBeLessThan(estimate.variances[term]);
      expect(high).toBeGreaterThan(estimate.variances[term]);
    }
    expect(estimate.variances.entry).toBeGreaterThan(0.05);
  });

  it('are not taken from fewer than ten environments, three seasons or twelve entries', () => {
    const season = (cell: (typeof cells)[number]) => Number(cell.year) < 2017;
    expect(estimateUsualVariances(cells.filter(season)).outcome).toBe('not-enough');
    const few = new Set(['E1', 'E2', 'E3', 'E4', 'E5', 'E6', 'E7', 'E8', 'E9', 'E10', 'E11']);
    expect(estimateUsualVariances(cells.filter(({ entry }) => few.has(entry)))).toMatchObject({
      outcome: 'not-enough',
      entries: 11,
    });
    expect(estimateUsualVariances([]).outcome).toBe('not-enough');
  });

  it('leave no term at 0, which a penalty could not lean on', () => {
    const flat = toCells(readNetworkCase('D-network-unbalanced-open')['stage1']!).map((cell) => ({
      ...cell,
      variance: 4,
    }));
    const found = estimateUsualVariances(flat);
    if (found.outcome !== 'estimated') throw new Error(found.outcome);
    expect(Math.min(found.variances.site, found.variances.year, found.variances.rest)).toBeGreaterThan(0);
  });
});

describe('the defaults of a new installation', () => {
  it('are 3, 2.5 and 5 % of the mean yield', () => {
    // domain.md, usual interaction variances
    const { site, year, rest } = defaultUsualVariances(8);
    expect(Math.sqrt(site)).toBeCloseTo(0.24, 12);
    expect(Math.sqrt(year)).toBeCloseTo(0.2, 12);
    expect(Math.sqrt(rest)).toBeCloseTo(0.4, 12);
  });
});
