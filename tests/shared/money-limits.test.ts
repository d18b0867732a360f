import { expect, test } from 'vitest';
import { moneyAssumptions, moneyInput, type MoneyAssumptions, type SeedCost } from '#shared/money.ts';
import { atOnePrice, candidate, seed } from '#tests/shared/money-questions.ts';

const priced = (cost: SeedCost): MoneyAssumptions => atOnePrice(250, { candidate: cost, current: seed(50) });
const money = priced(seed(60));

/** Where a figure is beyond its limit when it is saved, and why; what is kept may hold it all the same. */
function refusals(value: MoneyAssumptions): string[] {
  expect(moneyAssumptions.safeParse(value).success).toBe(true);
  return (
    moneyInput.safeParse(value).error?.issues.map(({ path, message }) => `${path.join('.')} ${message}`) ?? []
  );
}

// 50 t at 250 are 12,500.
test.each([
  'seedPerHectare',
  'treatmentPerHectare',
  'royaltyPerHectare',
  'harvestPerHectare',
  'strawPerHectare',
])('%s is never more than 50 tonnes of the crop would sell for', (part) => {
  expect(refusals(priced(seed(60, { [part]: 12_500 })))).toEqual([]);
  expect(refusals(priced(seed(60, { [part]: 12_501 })))).toEqual([
    `seedCosts.${candidate}.${part} over-crop-worth`,
  ]);
});

// 85 × 235 / (100 × 0.95 × 0.9) = 233.6 kg/ha: 12,500 are reached at 53.5 a kilogram, and at 53,507 a tonne cleaned.
test('seed by weight is held to the same limit, where its price stands', () => {
  const stand = { targetPlantsM2: 85, thousandKernelWeightG: 235 };
  const rate = { ...stand, germinationPercent: 95, mortalityPercent: 10 };
  const bought = (seedPricePerKg: number) => seed(null, { basis: 'rate', ...rate, seedPricePerKg });
  expect(refusals(priced(bought(53)))).toEqual([]);
  expect(refusals(priced(bought(54)))).toEqual([`seedCosts.${candidate}.seedPricePerKg over-crop-worth`]);
  const saved = (cleaningPerTonne: number) => seed(null, { basis: 'saved', ...rate, cleaningPerTonne });
  expect(refusals(priced(saved(53_000)))).toEqual([]);
  expect(refusals(priced(saved(54_000)))).toEqual([
    `seedCosts.${candidate}.cleaningPerTonne over-crop-worth`,
  ]);
});

test('what does not count on its basis is not held to a limit', () => {
  const unused = seed(60, { basis: 'flat', seedPricePerKg: 90_000 });
  expect(refusals(priced(unused))).toEqual([]);
});

test('the high price is at most ten times the low one', () => {
  expect(refusals({ ...money, priceHigh: 2500 })).toEqual([]);
  expect(refusals({ ...money, priceHigh: 2501 })).toEqual(['priceHigh price-spread']);
});

test('a premium is at most the price again', () => {
  const paid = (perTonne: number): MoneyAssumptions => ({
    ...money,
    qualityRules: [{ traitSlug: 'protein', side: 'at-least', limit: 13, perTonne }],
  });
  expect(refusals(paid(250))).toEqual([]);
  expect(refusals(paid(251))).toEqual(['qualityRules.0.perTonne over-price']);
});

test('limits follow the price, so that they hold in any currency', () => {
  const inSmallUnits = atOnePrice(150_000, { candidate: seed(36_000), current: seed(30_000) });
  expect(refusals({ ...inSmallUnits, currency: 'XOF' })).toEqual([]);
  expect(refusals(atOnePrice(150, { candidate: seed(36_000), current: seed(60) }))).toEqual([
    `seedCosts.${candidate}.seedPerHectare over-crop-worth`,
  ]);
});

test('prices that are refused for themselves are no measure of costs', () => {
  const reasons = (change: Partial<MoneyAssumptions>) =>
    moneyInput.safeParse({ ...money, ...change }).error?.issues.map(({ message }) => message);
  expect(reasons({ priceMiddle: 1 })).toEqual(['price-order']);
  expect(reasons({ haulagePerTonne: 25, priceLow: 20, priceHigh: 290 })).toEqual(['price-under-costs']);
});
