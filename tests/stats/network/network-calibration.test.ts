import { describe, expect, it } from 'vitest';
import type { Share } from '#server/commands/bench/chance-bins.ts';
import { measureCoverage, measureReliability } from '#server/commands/bench/network-calibration.ts';
import { drawWorld, type WorldPlan } from '#server/commands/bench/network-world.ts';

// The quick form of `npm run bench:calibration`: the weigh-up's own engine on seeded regions. Limits are the targets
// of the product with three simulation errors of grace.

const plan: WorldPlan = {
  sites: 3,
  seasons: 3,
  entries: 5,
  presence: 1,
  factor: 1,
  entrySd: 0,
  plots: 'normal',
  hailed: 0,
};

const expectBetween = ({ value, error }: Share, low: number, high: number): void => {
  expect(value).toBeGreaterThan(low - 3 * error);
  expect(value).toBeLessThan(high + 3 * error);
};

describe('coverage among equal varieties', () => {
  it.each([
    ['three sites and seasons', plan, 0.94, 0.98, 0.05],
    ['two sites in one season', { ...plan, sites: 2, seasons: 1 }, 0.94, 0.98, 0.05],
    ['half of the entries away', { ...plan, presence: 0.5 }, 0.94, 0.985, 0.05],
    ['two entries', { ...plan, entries: 2 }, 0.94, 0.98, 0.05],
    ['true variances four times the usual ones', { ...plan, factor: 4 }, 0.9, 1, 0.13],
    [
      'two entries, true variances four times the usual ones',
      { ...plan, entries: 2, factor: 4 },
      0.9,
      1,
      0.13,
    ],
    ['skewed plots', { ...plan, plots: 'skewed' }, 0.94, 0.98, 0.05],
    ['two hailed trials', { ...plan, hailed: 2 }, 0.94, 0.98, 0.05],
  ] as const)('%s', { timeout: 120_000 }, (_, tried, low, high, falseLimit) => {
    const result = measureCoverage(tried, 150, 11);
    expectBetween(result.region, low, high);
    expectBetween(result.ownSeason, low, high);
    expectBetween(result.falsePair, 0, falseLimit);
    expectBetween(result.falseFamily, 0, falseLimit);
  });

  it('is seen to fail where the usual variances are far too small', { timeout: 120_000 }, () => {
    const { region, falseFamily } = measureCoverage({ ...plan, sites: 2, seasons: 1, factor: 16 }, 100, 3);
    expect(region.value).toBeLessThan(0.85);
    expect(falseFamily.value).toBeGreaterThan(0.2);
  });
});

describe('the chance that a candidate clears its break-even gap next season', () => {
  const { single, picked, lead } = measureReliability({ ...plan, entries: 8, entrySd: 0.3 }, 250, 5);

  it('comes true as often as it is stated, planned or picked', () => {
    for (const { stated, happened } of [...single, ...picked].filter((bin) => bin.happened.runs >= 20))
      expect(Math.abs(stated - happened.value)).toBeLessThan(0.03 + 3 * happened.error);
  });

  it('rests on a lead that the estimate overstates more than the shrunken gap', () => {
    const over = (claimed: Share): number => Math.abs(claimed.value - lead.truth.value);
    expect(lead.estimate.value).toBeGreaterThan(lead.truth.value);
    expect(over(lead.shrunken)).toBeLessThan(over(lead.estimate));
  });
});

describe('the worlds tried', () => {
  it('are the same for the same seed, and others for another', () => {
    expect(drawWorld(plan, 4)).toEqual(drawWorld(plan, 4));
    expect(drawWorld(plan, 4)).not.toEqual(drawWorld(plan, 5));
  });
});
