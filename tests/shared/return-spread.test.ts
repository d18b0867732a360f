import { expect, test } from 'vitest';
import { spreadPrice } from '#shared/price-range.ts';
import { spreadReturn } from '#shared/return-spread.ts';
import { atOnePrice, seed, weigh } from '#tests/shared/money-questions.ts';

test('one way alone is a scaled t: its tenth and nine tenths are those of Student’s table', () => {
  // t(0.9) = 1.372 on 10 df, 3.078 on 1 df.
  for (const [df, t] of [
    [10, 1.372184],
    [1, 3.077684],
  ] as const) {
    const spread = spreadReturn([{ slope: 200, offset: -30, weight: 1 }], { estimate: 0.3, se: 0.2, df });
    expect(spread.quantile(0.1)).toBeCloseTo(30 - t * 40, 3);
    expect(spread.quantile(0.9)).toBeCloseTo(30 + t * 40, 3);
    expect(spread.quantile(0.5)).toBeCloseTo(30, 3);
    expect(spread.chanceOver(30 + t * 40)).toBeCloseTo(0.1, 6);
  }
});

test('a gap without any doubt leaves the steps of the ways it may come', () => {
  const sure = { estimate: 1, se: 0, df: 10 };
  const spread = spreadReturn(
    [
      { slope: 100, offset: 0, weight: 0.25 },
      { slope: 200, offset: 0, weight: 0.75 },
    ],
    sure,
  );
  expect(spread.chanceOver(150)).toBe(0.75);
  expect(spread.quantile(0.1)).toBeCloseTo(100, 3);
  expect(spread.quantile(0.9)).toBeCloseTo(200, 3);
});

test('a tonne that costs more than it brings turns the gap round', () => {
  const { chanceOver } = spreadReturn([{ slope: -50, offset: 0, weight: 1 }], {
    estimate: 0.4,
    se: 0.2,
    df: 30,
  });
  expect(chanceOver(0)).toBeLessThan(0.05);
});

test('what is expected is reckoned at the mean of low, middle and high price, which need not be the middle one', () => {
  const money = {
    ...atOnePrice(250, { candidate: seed(60), current: seed(50) }),
    ...{ priceLow: 200, priceHigh: 390 },
  };
  const { expectedReturn, returnPerHectare } = weigh(money, { estimate: 0.5, se: 0.2, df: 20 });
  expect(returnPerHectare).toBeCloseTo(0.5 * 250 - 10, 9);
  expect(expectedReturn).toBeCloseTo(0.5 * 280 - 10, 9);
});

test('the prices are equally likely, lie within the range and around the triangle’s mean', () => {
  const prices = spreadPrice({ priceLow: 220, priceMiddle: 250, priceHigh: 340 });
  expect(prices).toHaveLength(32);
  expect(Math.min(...prices)).toBeGreaterThan(220);
  expect(Math.max(...prices)).toBeLessThan(340);
  expect(prices.reduce((sum, price) => sum + price, 0) / 32).toBeCloseTo((220 + 250 + 340) / 3, 0);
  expect(new Set(spreadPrice({ priceLow: 250, priceMiddle: 250, priceHigh: 250 })).size).toBe(1);
});

/** A small generator of its own, so that the check draws the same seasons every time. */
function openSeasons(start: number): () => number {
  let state = start;
  return () => {
    state = (Math.imul(state, 1_664_525) + 1_013_904_223) >>> 0;
    return (state + 0.5) / 2 ** 32;
  };
}

// The whole of it drawn by chance, from its description alone: price, field, yield gap and protein gap of 200,000 seasons.
test('chance, mean and both tails are those of seasons drawn one by one', () => {
  const money = {
    ...atOnePrice(250, {
      candidate: seed(78, { harvestMoisturePercent: 18 }),
      current: seed(60, { harvestMoisturePercent: 16 }),
    }),
    ...{
      priceLow: 215,
      priceHigh: 310,
      haulagePerTonne: 20,
      dryingPerPoint: 2.5,
      standardMoisturePercent: 14.5,
    },
    qualityRules: [
      { traitSlug: 'protein', side: 'at-least', limit: 12.5, perTonne: 14 } as const,
      { traitSlug: 'protein', side: 'under', limit: 11.5, perTonne: -10 } as const,
    ],
  };
  const gap = { estimate: 0.25, se: 0.3, df: 1e6 };
  const result = weigh(money, gap, {
    usualYield: 5,
    levels: [{ traitSlug: 'protein', mean: 12.2, spread: 0.7, trials: 9 }],
    protein: { estimate: 0.3, se: 0.4, df: 1e6 },
  });
  const draw = openSeasons(20_261_201);
  const normal = (): number => Math.sqrt(-2 * Math.log(draw())) * Math.cos(2 * Math.PI * draw());
  const triangle = (): number => {
    const u = draw();
    return u < 35 / 95 ? 215 + Math.sqrt(u * 95 * 35) : 310 - Math.sqrt((1 - u) * 95 * 60);
  };
  const pay = (protein: number): number => (protein >= 12.5 ? 14 : protein < 11.5 ? -10 : 0);
  // A field of nine known ones; half of the protein gap's variance belongs to each of the two.
  const own = 0.4 / Math.SQRT2;
  const field = Math.sqrt(0.7 ** 2 * (1 + 1 / 9) - own ** 2);
  const returns = Array.from({ length: 200_000 }, () => {
    const price = triangle();
    const protein = 12.2 + field * normal();
    const current = price + pay(protein + own * normal()) - (85.5 / 84) * (20 + 2.5 * 1.5);
    const candidate = price + pay(protein + 0.3 + own * normal()) - (85.5 / 82) * (20 + 2.5 * 3.5);
    return (5 + gap.estimate + gap.se * normal()) * candidate - 5 * current - 18;
  }).sort((a, b) => a - b);
  const share = returns.filter((value) => value > 0).length / returns.length;
  // Three simulation errors: of a share 0.0034, of the mean and of a tail about 0.7 and 1.2 a hectare.
  expect(Math.abs(result.chancePays - share)).toBeLessThan(0.0035);
  const mean = returns.reduce((sum, value) => sum + value, 0) / returns.length;
  expect(Math.abs((result.expectedReturn ?? NaN) - mean)).toBeLessThan(0.8);
  expect(Math.abs(result.badReturn - (returns[20_000] ?? NaN))).toBeLessThan(1.3);
  expect(Math.abs(result.goodReturn - (returns[180_000] ?? NaN))).toBeLessThan(1.3);
});
