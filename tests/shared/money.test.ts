import fc from 'fast-check';
import { expect, test } from 'vitest';
import { moneyAssumptions, weighMoney, type MoneyAssumptions, type SeedCost } from '#shared/money.ts';
import { judgeMoney } from '#shared/verdict.ts';

const current = '11111111-1111-4111-8111-111111111111';
const candidate = '22222222-2222-4222-8222-222222222222';

const seed = (seedPerHectare: number, rest: Partial<SeedCost> = {}): SeedCost => ({
  seedPerHectare,
  treatmentPerHectare: 0,
  royaltyPerHectare: 0,
  ...rest,
});

/** One price, whatever the season. */
function atOnePrice(
  price: number,
  costs: { candidate: SeedCost; current: SeedCost },
  perTonne = 0,
): MoneyAssumptions {
  return {
    currency: 'CAD',
    priceLow: price,
    priceMiddle: price,
    priceHigh: price,
    haulagePerTonne: perTonne,
    dryingPerTonne: 0,
    seedCosts: { [candidate]: costs.candidate, [current]: costs.current },
    priceSheetDate: null,
  };
}

// Partial budgets of local against improved maize: ISRN Agronomy 2012, 153412, table 10. 13.333 a kg; the printed
// figures are rounded to whole units.
test.each([
  { case: 'fertilised', local: 3.6973, improved: 3.46162, costs: [15_693, 16_243], nets: [33_604, 29_912] },
  { case: 'unfertilised', local: 2.03973, improved: 1.80505, costs: [8640, 9165], nets: [18_556, 14_902] },
] as const)('the published partial budget comes out: maize, $case', ({ local, improved, costs, nets }) => {
  const money = atOnePrice(13_333, { candidate: seed(costs[1]), current: seed(costs[0]) });
  const result = weighMoney(candidate, current, improved - local, null, money);
  expect(result?.returnPerHectare).toBeCloseTo(nets[1] - nets[0], -1);
  expect(Math.abs((result?.returnPerHectare ?? 0) - (nets[1] - nets[0]))).toBeLessThan(2);
});

// Whole-crop break-even: Nebraska crop budgets 2014, per acre and bushel; 51.5 and 64.0 bu are printed.
test.each([
  { cost: 283.47, bushels: 51.5 },
  { cost: 352.27, bushels: 64.0 },
])('the published whole-crop break-even comes out: $bushels bu', ({ cost, bushels }) => {
  const money = atOnePrice(6.612, { candidate: seed(cost), current: seed(0) }, 1.11);
  expect(weighMoney(candidate, current, 0, null, money)?.breakEvenGap).toBeCloseTo(bushels, 1);
});

// Certified seed pays 1 bu/ac at 3.50 a bushel when it costs 3.50 more an acre (domain.md, partial budget).
test('certified seed breaks even at one bushel', () => {
  const money = atOnePrice(3.5, { candidate: seed(13.5), current: seed(10) });
  expect(weighMoney(candidate, current, 1, null, money)).toMatchObject({
    extraCostPerHectare: 3.5,
    breakEvenGap: 1,
    returnPerHectare: 0,
    breakEvenPrice: 3.5,
    breakEvenSeedCost: 13.5,
  });
});

test('treatment and royalty count as seed cost does, and per-tonne costs lower the price', () => {
  const money = atOnePrice(
    250,
    {
      candidate: seed(60, { treatmentPerHectare: 12, royaltyPerHectare: 6.5 }),
      current: seed(50, { treatmentPerHectare: 10 }),
    },
    30,
  );
  const result = weighMoney(candidate, current, 0.2, null, money);
  expect(result?.extraCostPerHectare).toBeCloseTo(18.5, 12);
  expect(result?.returnPerHectare).toBeCloseTo(0.2 * 220 - 18.5, 12);
});

test('an unknown seed cost is not a cost of zero', () => {
  const money = atOnePrice(250, { candidate: seed(60), current: seed(50) });
  const { [candidate]: _, ...onlyCurrent } = money.seedCosts;
  expect(weighMoney(candidate, current, 0.5, null, { ...money, seedCosts: onlyCurrent })).toBeNull();
});

test('without a range for the own season there is a return and no chance', () => {
  const money = atOnePrice(250, { candidate: seed(60), current: seed(50) });
  expect(weighMoney(candidate, current, 0.5, null, money)).toMatchObject({
    chancePays: null,
    verdict: 'unknown',
    returnPerHectare: 115,
  });
});

// Esker & Conley (2012), Crop Sci. 52:351–359: P(gap > break-even) from estimate, SED and df. With t = 2.228 on 10 df
// the upper tail is 0.025 (Student's table).
test('the chance is the tail of t above the break-even gap', () => {
  const money = atOnePrice(200, { candidate: seed(70), current: seed(50) });
  const gap = { estimate: 0.1 + 2.228139 * 0.2, se: 0.2, df: 10 };
  const result = weighMoney(candidate, current, gap.estimate, gap, money);
  expect(result?.breakEvenGap).toBeCloseTo(0.1, 12);
  expect(result?.chancePays).toBeCloseTo(0.975, 6);
  expect(result?.verdict).toBe('pays');
});

test('the words of the chance change where the product says', () => {
  expect([0.95, 0.9499, 0.8, 0.7999, 0.2001, 0.2, 0.0501, 0.05, null].map(judgeMoney)).toEqual([
    'pays',
    'likely',
    'likely',
    'toss',
    'toss',
    'unlikely',
    'unlikely',
    'costs',
    'unknown',
  ]);
});

const anyMoney = fc
  .record({
    perTonne: fc.double({ min: 0, max: 60, noNaN: true }),
    low: fc.double({ min: 80, max: 300, noNaN: true }),
    up: fc.double({ min: 0, max: 100, noNaN: true }),
    further: fc.double({ min: 0, max: 100, noNaN: true }),
    candidate: fc.double({ min: 0, max: 200, noNaN: true }),
    current: fc.double({ min: 0, max: 200, noNaN: true }),
  })
  .map(({ perTonne, low, up, further, ...costs }) => ({
    ...atOnePrice(low, { candidate: seed(costs.candidate), current: seed(costs.current) }, perTonne),
    priceMiddle: low + up,
    priceHigh: low + up + further,
  }));

const anyGap = fc.record({
  estimate: fc.double({ min: -2, max: 2, noNaN: true }),
  se: fc.double({ min: 0.01, max: 1, noNaN: true }),
  df: fc.double({ min: 1, max: 200, noNaN: true }),
});

const weigh = (money: MoneyAssumptions, gap: { estimate: number; se: number; df: number }) => {
  const result = weighMoney(candidate, current, gap.estimate, gap, money);
  if (result?.chancePays == null) throw new Error('these assumptions have every cost');
  return { ...result, chancePays: result.chancePays };
};

test('property: the return at the break-even gap is nothing', () => {
  fc.assert(
    fc.property(anyMoney, anyGap, (money, gap) => {
      const at = weigh(money, { ...gap, estimate: weigh(money, gap).breakEvenGap });
      expect(at.returnPerHectare).toBeCloseTo(0, 8);
    }),
  );
});

test('property: at the break-even price the estimated gap returns nothing', () => {
  fc.assert(
    fc.property(anyMoney, anyGap, (money, gap) => {
      const price = weigh(money, gap).breakEvenPrice;
      fc.pre(price !== null);
      const there = { ...money, priceLow: price, priceMiddle: price, priceHigh: price };
      expect(weigh(there, gap).returnPerHectare).toBeCloseTo(0, 6);
    }),
  );
});

test('property: at the break-even seed cost the estimated gap returns nothing', () => {
  fc.assert(
    fc.property(anyMoney, anyGap, (money, gap) => {
      const cost = weigh(money, gap).breakEvenSeedCost;
      fc.pre(cost !== null);
      const there = { ...money, seedCosts: { ...money.seedCosts, [candidate]: seed(cost) } };
      expect(weigh(there, gap).returnPerHectare).toBeCloseTo(0, 8);
    }),
  );
});

const dearer = (money: MoneyAssumptions, by: number): MoneyAssumptions => ({
  ...money,
  priceLow: money.priceLow + by,
  priceMiddle: money.priceMiddle + by,
  priceHigh: money.priceHigh + by,
});

test('property: a higher price never lowers the chance of dearer seed, nor the return of a positive gap', () => {
  fc.assert(
    fc.property(anyMoney, anyGap, fc.double({ min: 0, max: 200, noNaN: true }), (money, gap, by) => {
      const before = weigh(money, gap);
      const after = weigh(dearer(money, by), gap);
      if (before.extraCostPerHectare >= 0)
        expect(after.chancePays).toBeGreaterThanOrEqual(before.chancePays - 1e-12);
      if (gap.estimate > 0)
        expect(after.returnPerHectare).toBeGreaterThanOrEqual(before.returnPerHectare - 1e-9);
    }),
  );
});

test('property: a larger gap never lowers the chance, and dearer seed never raises it', () => {
  fc.assert(
    fc.property(anyMoney, anyGap, fc.double({ min: 0, max: 100, noNaN: true }), (money, gap, more) => {
      const { chancePays } = weigh(money, gap);
      expect(weigh(money, { ...gap, estimate: gap.estimate + more }).chancePays).toBeGreaterThanOrEqual(
        chancePays - 1e-12,
      );
      const cost = (money.seedCosts[candidate]?.seedPerHectare ?? 0) + more;
      const costly = { ...money, seedCosts: { ...money.seedCosts, [candidate]: seed(cost) } };
      expect(weigh(costly, gap).chancePays).toBeLessThanOrEqual(chancePays + 1e-12);
    }),
  );
});

test('property: changing places turns the answer round', () => {
  fc.assert(
    fc.property(anyMoney, anyGap, (money, gap) => {
      const there = weigh(money, gap);
      const back = weighMoney(current, candidate, -gap.estimate, { ...gap, estimate: -gap.estimate }, money);
      expect(back?.returnPerHectare).toBeCloseTo(-there.returnPerHectare, 8);
      expect(back?.chancePays).toBeCloseTo(1 - there.chancePays, 8);
    }),
  );
});

test('prices out of order, or below what a tonne costs to move, are refused by name', () => {
  const money = atOnePrice(250, { candidate: seed(60), current: seed(50) });
  const reasons = (value: MoneyAssumptions) =>
    moneyAssumptions.safeParse(value).error?.issues.map((issue) => issue.message);
  expect(reasons(money)).toBeUndefined();
  expect(reasons({ ...money, priceLow: 260 })).toEqual(['price-order']);
  expect(reasons({ ...money, haulagePerTonne: 250 })).toEqual(['price-under-costs']);
});
