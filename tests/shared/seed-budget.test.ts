import fc from 'fast-check';
import { expect, test } from 'vitest';
import { budgetSeed, findSeedingRate, reckonSeedingRate } from '#shared/seed-budget.ts';
import { seed } from '#tests/shared/money-questions.ts';

// Cereal seed sowing rates, PGG Wrightson Grain (domain.md [8]): 95 % germination, 90 % establishment; kg/ha as printed.
test.each([
  { plantsM2: 200, kernelWeightG: 45, printed: 105 },
  { plantsM2: 200, kernelWeightG: 50, printed: 117 },
  { plantsM2: 200, kernelWeightG: 55, printed: 129 },
  { plantsM2: 300, kernelWeightG: 45, printed: 158 },
  { plantsM2: 300, kernelWeightG: 50, printed: 175 },
  { plantsM2: 300, kernelWeightG: 55, printed: 193 },
])('the published rate comes out: $plantsM2 plants of $kernelWeightG g', ({ printed, ...rate }) => {
  const kg = reckonSeedingRate({ ...rate, germinationPercent: 95, mortalityPercent: 10 });
  expect(Math.round(kg)).toBe(printed);
});

test('property: the seed sown, times what lives, is the stand that was wanted', () => {
  const share = fc.double({ min: 5, max: 99, noNaN: true });
  const figure = fc.double({ min: 1, max: 800, noNaN: true });
  fc.assert(
    fc.property(figure, figure, share, share, (plantsM2, kernelWeightG, germination, mortality) => {
      const kg = reckonSeedingRate({
        plantsM2,
        kernelWeightG,
        germinationPercent: germination,
        mortalityPercent: mortality,
      });
      const seedsM2 = (kg * 1000) / 10_000 / (kernelWeightG / 1000);
      expect((seedsM2 * germination * (100 - mortality)) / 10_000).toBeCloseTo(plantsM2, 6);
    }),
  );
});

const lot = { targetPlantsM2: 200, thousandKernelWeightG: 50, germinationPercent: 95, mortalityPercent: 10 };

test('each basis counts what it is made of, and no other part', () => {
  const further = { treatment: 0, royalty: 0 };
  expect(budgetSeed(seed(70, { ...lot, seedPricePerKg: 0.5 }))).toEqual({
    seed: 70,
    ...further,
    keptTonnes: 0,
  });
  const kg = 11_695.906_432_7 / 100;
  expect(budgetSeed(seed(70, { ...lot, basis: 'rate', seedPricePerKg: 0.5 }))).toEqual({
    seed: expect.closeTo(kg * 0.5, 6),
    ...further,
    keptTonnes: 0,
  });
  expect(budgetSeed(seed(70, { ...lot, basis: 'saved', cleaningPerTonne: 80 }))).toEqual({
    seed: expect.closeTo((kg / 1000) * 80, 6),
    ...further,
    keptTonnes: expect.closeTo(kg / 1000, 9),
  });
});

test('a part that is not known leaves the whole open', () => {
  expect(budgetSeed(undefined)).toBeNull();
  expect(budgetSeed(seed(null))).toBeNull();
  expect(budgetSeed(seed(70, { ...lot, basis: 'rate' }))).toBeNull();
  expect(budgetSeed(seed(70, { ...lot, basis: 'saved' }))).toBeNull();
  for (const part of Object.keys(lot)) {
    expect(findSeedingRate({ ...lot, [part]: undefined })).toBeNull();
  }
});
