import { describe, expect, it } from 'vitest';
import { measurePremiums } from '#server/commands/bench/premium-calibration.ts';
import { drawPremiumWorld, type PremiumPlan } from '#server/commands/bench/premium-world.ts';

// The quick form of `npm run bench:calibration -- --part premiums`: from evidence to price by the product's own code, on
// seeded regions. Within 3 points, with three simulation errors of grace.

const plan: PremiumPlan = {
  ...{ sites: 3, seasons: 3, entries: 5, correlation: 0, isProteinUsual: true, factor: 1 },
};

describe('the chance that a candidate pays where a buyer pays by protein', () => {
  const { planned, picked, average } = measurePremiums(plan, 160, 7);

  it.each([
    ['of a planned candidate, own season', planned],
    ['of the best of the list, own season', picked],
    ['of a planned candidate, in the region', average],
  ] as const)('comes true as often as it is stated: %s', (_, bins) => {
    const held = bins.filter(({ happened }) => happened.runs >= 20);
    expect(held.length).toBeGreaterThanOrEqual(3);
    for (const { stated, happened } of held) {
      // In the region it comes true or not: where all did, only the chance itself tells how far luck reaches.
      const error = Math.sqrt((stated * (1 - stated)) / happened.runs);
      const reach = bins === average ? error : happened.error;
      expect(Math.abs(stated - happened.value)).toBeLessThan(0.03 + 3 * reach);
    }
  });
});

it('draws yield and protein of a season as closely together as told', () => {
  const correlate = (correlation: number): number => {
    const { drawSeason } = drawPremiumWorld({ ...plan, correlation }, 3);
    const seasons = Array.from({ length: 4000 }, () => drawSeason(1));
    const pairs = seasons.map(({ gap, current, candidate }) => [gap, candidate - current] as const);
    const mean = (part: 0 | 1) => pairs.reduce((sum, pair) => sum + pair[part], 0) / pairs.length;
    const [mx, my] = [mean(0), mean(1)];
    const sum = (of: (x: number, y: number) => number) =>
      pairs.reduce((total, [x, y]) => total + of(x - mx, y - my), 0);
    return sum((x, y) => x * y) / Math.sqrt(sum((x) => x * x) * sum((_, y) => y * y));
  };
  expect(Math.abs(correlate(0))).toBeLessThan(0.06);
  expect(correlate(-0.5)).toBeCloseTo(-0.5, 1);
});
