import { expect, test } from 'vitest';
import { moneyAssumptions, moneyResult, type MoneyAssumptions } from '#shared/money.ts';
import { atOnePrice, gapOf, seed, weigh } from '#tests/shared/money-questions.ts';

const money = atOnePrice(250, { candidate: seed(60), current: seed(50) });

const reasons = (value: unknown): string[] | undefined =>
  moneyAssumptions.safeParse(value).error?.issues.map((issue) => issue.message);

test('prices out of order, or below what a tonne costs to move, are refused by name', () => {
  expect(reasons(money)).toBeUndefined();
  expect(reasons({ ...money, priceLow: 260 })).toEqual(['price-order']);
  expect(reasons({ ...money, haulagePerTonne: 250 })).toEqual(['price-under-costs']);
});

test('drying of the wettest variety and the deepest discount are costs of a tonne as well', () => {
  const wettest = atOnePrice(250, {
    candidate: seed(60, { harvestMoisturePercent: 25 }),
    current: seed(50, { harvestMoisturePercent: 16 }),
  });
  const dried = (dryingPerPoint: number): MoneyAssumptions => ({
    ...wettest,
    dryingPerPoint,
    standardMoisturePercent: 15,
  });
  // A tonne sold was 85/75 tonnes to dry by ten points: 250 are reached at 22.06 a point.
  expect(reasons(dried(22))).toBeUndefined();
  expect(reasons(dried(22.1))).toEqual(['price-under-costs']);
  const discounted = (perTonne: number): MoneyAssumptions => ({
    ...money,
    qualityRules: [
      { traitSlug: 'protein', side: 'under', limit: 11, perTonne },
      { traitSlug: 'protein', side: 'under', limit: 10, perTonne },
      { traitSlug: 'protein', side: 'at-least', limit: 13, perTonne: 400 },
    ],
  });
  expect(reasons(discounted(-124))).toBeUndefined();
  expect(reasons(discounted(-125))).toEqual(['price-under-costs']);
});

test('figures that nobody means are refused', () => {
  const absurd = [
    { ...money, priceLow: 0 },
    { ...money, priceMiddle: -250 },
    { ...money, priceHigh: Number.POSITIVE_INFINITY },
    { ...money, haulagePerTonne: Number.NaN },
    { ...money, dryingPerPoint: -1 },
    atOnePrice(250, { candidate: seed(-60), current: seed(50) }),
    atOnePrice(250, { candidate: seed(60, { germinationPercent: 0 }), current: seed(50) }),
    atOnePrice(250, { candidate: seed(60, { mortalityPercent: 100 }), current: seed(50) }),
    atOnePrice(250, { candidate: seed(60, { thousandKernelWeightG: 0 }), current: seed(50) }),
    { ...money, qualityRules: [{ traitSlug: '', side: 'at-least', limit: 12, perTonne: 5 }] },
  ];
  for (const value of absurd) expect(moneyAssumptions.safeParse(value).success).toBe(false);
});

// As weigh-ups and copies stored them before seed by rate, moisture, quality and straw were asked for.
test('what was stored before parses as it stands and gives the figures that it gave', () => {
  const [current, candidate] = [
    '11111111-1111-4111-8111-111111111111',
    '22222222-2222-4222-8222-222222222222',
  ];
  const stored = {
    ...{ currency: 'CAD', priceLow: 221, priceMiddle: 258, priceHigh: 301, priceSheetDate: '2026-10-15' },
    ...{ haulagePerTonne: 19, dryingPerTonne: 9 },
    seedCosts: {
      [current]: { seedPerHectare: 64, treatmentPerHectare: 11, royaltyPerHectare: 0 },
      [candidate]: { seedPerHectare: 73, treatmentPerHectare: 11, royaltyPerHectare: 6.5 },
    },
  };
  const assumptions = moneyAssumptions.parse(stored);
  expect(assumptions).toEqual(stored);
  const result = weigh(assumptions, { estimate: 0.21, se: 0.28, df: 24.6 });
  // By hand: 0.21 × (258 − 28) − 15.5; 15.5 / 230; 15.5 / 0.21 + 28; 90.5 + 32.8.
  expect(result.returnPerHectare).toBeCloseTo(32.8, 9);
  expect(result.breakEvenGap).toBeCloseTo(15.5 / 230, 12);
  expect(result.breakEvenPrice).toBeCloseTo(15.5 / 0.21 + 28, 9);
  expect(result.breakEvenSeedCost).toBeCloseTo(123.3, 9);
  const before = { ...result };
  for (const later of ['chanceInRegion', 'expectedReturn', 'badReturn', 'goodReturn'] as const)
    delete before[later];
  for (const later of ['netPrice', 'quality', 'baseYield'] as const) delete before[later];
  expect(moneyResult.parse(before)).toEqual(before);
  expect(weigh(assumptions, gapOf(0.21)).quality).toBeNull();
});
