import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { MoneyAssumptions, SeedCost } from '#shared/money.ts';
import { judgeMoney } from '#shared/money-verdict.ts';
import { findCostBreakEven, weighMoney } from '#shared/partial-budget.ts';
import {
  atOnePrice,
  candidate,
  current,
  dearer,
  gapOf,
  seed,
  weigh,
  withLevels,
  type About,
} from '#tests/shared/money-questions.ts';

describe('what costs and revenues do', () => {
  const costs = { candidate: seed(60), current: seed(50) };

  test('treatment and royalty count as seed does, and per-tonne costs lower the price', () => {
    const money = atOnePrice(
      250,
      {
        candidate: seed(60, { treatmentPerHectare: 12, royaltyPerHectare: 6.5 }),
        current: seed(50, { treatmentPerHectare: 10 }),
      },
      30,
    );
    const result = weigh({ ...money, harvestPerTonne: 8 }, gapOf(0.2));
    expect(result.extraCostPerHectare).toBeCloseTo(18.5, 12);
    expect(result.returnPerHectare).toBeCloseTo(0.2 * 212 - 18.5, 12);
    expect(result.netPrice).toEqual({ current: 212, candidate: 212 });
  });

  test('a wetter candidate pays for the drying of its wet tonnes: ΔY* = (ΔC + Y₀(n₀ − n₁)) / n₁, domain.md', () => {
    const wet = {
      ...atOnePrice(200, {
        candidate: seed(70, { harvestMoisturePercent: 20 }),
        current: seed(50, { harvestMoisturePercent: 16 }),
      }),
      dryingPerPoint: 2,
      standardMoisturePercent: 15,
    };
    // A tonne at 15 % came off as 85/80 t and 85/84 t, each tonne of which is dried by 5 points and by 1. Y₀ = 5 t/ha, ΔC = 20.
    const [n0, n1] = [200 - (85 / 84) * 2, 200 - (85 / 80) * 10];
    const result = weigh(wet, gapOf(0.5), { usualYield: 5 });
    expect(result.netPrice?.current).toBeCloseTo(n0, 12);
    expect(result.netPrice?.candidate).toBeCloseTo(n1, 12);
    expect(result.breakEvenGap).toBeCloseTo((20 + 5 * (n0 - n1)) / n1, 12);
    expect(result.returnPerHectare).toBeCloseTo(5.5 * n1 - 5 * n0 - 20, 9);
    expect(result.baseYield).toEqual({ value: 5, from: 'grower' });
    // Drier than the standard costs nothing to dry.
    const dry = { ...wet, standardMoisturePercent: 25 };
    expect(weigh(dry, gapOf(0.5), { usualYield: 5 }).netPrice).toEqual({ current: 200, candidate: 200 });
  });

  // 10,000 lb of maize at 20 % are 9,467 lb at 15.5 %: UF/IFAS AG442 (domain.md [6]); so 9,467 sold were 10,000 hauled.
  test('haulage, harvest and drying whatever the moisture are paid for what comes off the field, water and all', () => {
    const money = {
      ...atOnePrice(200, {
        candidate: seed(50, { harvestMoisturePercent: 20 }),
        current: seed(50, { harvestMoisturePercent: 15.5 }),
      }),
      ...{ haulagePerTonne: 10, harvestPerTonne: 6, dryingPerTonne: 4, standardMoisturePercent: 15.5 },
    };
    const { netPrice } = weigh(money, gapOf(0), { usualYield: 9.467 });
    expect(netPrice?.current).toBeCloseTo(200 - 20, 12);
    expect(9.467 * (200 - (netPrice?.candidate ?? NaN))).toBeCloseTo(10 * 20, 1);
  });

  test('the yield that unequal prices count on is the grower’s usual one, else that of the trials, else nothing is said', () => {
    const money = {
      ...atOnePrice(200, {
        candidate: seed(50, { harvestMoisturePercent: 19 }),
        current: seed(50, { harvestMoisturePercent: 16 }),
      }),
      dryingPerPoint: 2,
      standardMoisturePercent: 15,
    };
    const levels = [{ traitSlug: 'yield', mean: 4, spread: 0.5, trials: 6 }];
    const from = (about: About) => weigh(money, gapOf(0.1), about).baseYield;
    expect(from({ usualYield: 6, levels })).toEqual({ value: 6, from: 'grower' });
    expect(from({ levels })).toEqual({ value: 4, from: 'trials' });
    expect(weighMoney(...withLevels(money, gapOf(0.1), {}))).toBeNull();
  });

  test('moisture, straw and harvest known of one variety alone make no difference', () => {
    const alone = {
      ...atOnePrice(200, {
        candidate: seed(60, { harvestMoisturePercent: 19, strawPerHectare: 40 }),
        current: seed(50, { harvestPerHectare: 90 }),
      }),
      dryingPerPoint: 2,
      standardMoisturePercent: 15,
    };
    const plain = weigh(atOnePrice(200, costs), gapOf(0.3));
    expect(weigh(alone, gapOf(0.3))).toEqual(plain);
  });

  test('farm-saved seed costs what its grain would have brought, its cleaning, treatment and royalty', () => {
    // 200 plants, 50 g, 95 % germination, 10 % losses: 116.96 kg/ha (domain.md [8]); at 200 a tonne and 90 to clean it.
    const lot = {
      targetPlantsM2: 200,
      thousandKernelWeightG: 50,
      germinationPercent: 95,
      mortalityPercent: 10,
    };
    const saved: SeedCost = seed(null, {
      ...lot,
      basis: 'saved',
      cleaningPerTonne: 90,
      treatmentPerHectare: 11,
      royaltyPerHectare: 2,
    });
    const money = atOnePrice(230, { candidate: seed(60), current: saved }, 30);
    const kept = (200 * 50) / (100 * 0.95 * 0.9) / 1000;
    const own = kept * (200 + 90) + 13;
    const result = weigh(money, gapOf(0.3));
    expect(result.extraCostPerHectare).toBeCloseTo(60 - own, 9);
    expect(result.returnPerHectare).toBeCloseTo(0.3 * 200 - (60 - own), 9);
    // Dearer grain makes the seed kept back dearer: 10 more a tonne on the gap and on what is no longer kept back.
    const up = weigh(dearer(money, 10), gapOf(0.3));
    expect(up.returnPerHectare - result.returnPerHectare).toBeCloseTo((0.3 + kept) * 10, 9);
  });

  test('an unknown seed cost is not a cost of zero', () => {
    const money = atOnePrice(250, costs);
    const { [candidate]: _, ...onlyCurrent } = money.seedCosts;
    const unknown = [
      { ...money, seedCosts: onlyCurrent },
      atOnePrice(250, { ...costs, candidate: seed(null) }),
      atOnePrice(250, { ...costs, candidate: seed(60, { basis: 'rate', seedPricePerKg: 0.5 }) }),
      atOnePrice(250, { ...costs, candidate: seed(60, { basis: 'saved', cleaningPerTonne: 90 }) }),
    ];
    for (const one of unknown) {
      expect(weighMoney(...withLevels(one, gapOf(0.5), {}))).toBeNull();
      expect(findCostBreakEven(candidate, current, one)).toBeNull();
    }
  });

  test('what is too thin for a gap is too thin to price', () => {
    const [about, basis, money] = withLevels(atOnePrice(250, costs), gapOf(0.5), {});
    expect(weighMoney({ ...about, moneyGap: null }, basis, money)).toBeNull();
  });
});

test('the words of the chance change where the product says', () => {
  const words = [0.95, 0.9499, 0.8, 0.7999, 0.2001, 0.2, 0.0501, 0.05, null].map(judgeMoney);
  expect(words.join(' ')).toBe('pays likely likely toss toss unlikely unlikely costs unknown');
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

const anyAmount = fc.double({ min: 0, max: 200, noNaN: true });

/** Own seed, moisture and a premium on top: every part that makes net prices differ. */
const anyFullMoney = fc
  .record({
    money: anyMoney,
    moistures: fc.tuple(
      fc.double({ min: 10, max: 22, noNaN: true }),
      fc.double({ min: 10, max: 22, noNaN: true }),
    ),
    premium: fc.double({ min: -20, max: 20, noNaN: true }),
    limit: fc.double({ min: 10, max: 14, noNaN: true }),
    isSaved: fc.boolean(),
  })
  .map(({ money, moistures, premium, limit, isSaved }): MoneyAssumptions => {
    const lot = {
      targetPlantsM2: 250,
      thousandKernelWeightG: 45,
      germinationPercent: 95,
      mortalityPercent: 12,
    };
    const own = isSaved ? ({ basis: 'saved', cleaningPerTonne: 80, ...lot } as const) : {};
    const cost = (id: string, harvestMoisturePercent: number, more = {}): SeedCost => ({
      ...(money.seedCosts[id] ?? seed(0)),
      harvestMoisturePercent,
      ...more,
    });
    return {
      ...dearer(money, 100),
      dryingPerPoint: 2.5,
      standardMoisturePercent: 14.5,
      qualityRules: [{ traitSlug: 'protein', side: 'at-least', limit, perTonne: premium }],
      seedCosts: {
        [candidate]: cost(candidate, moistures[0]),
        [current]: cost(current, moistures[1], own),
      },
    };
  });

const full = {
  usualYield: 5,
  levels: [{ traitSlug: 'protein', mean: 12, spread: 0.7, trials: 8 }],
  protein: { estimate: -0.2, se: 0.3, df: 15 },
};

describe('properties', () => {
  test('the return at the break-even gap is nothing', () => {
    fc.assert(
      fc.property(anyFullMoney, anyGap, (money, gap) => {
        const breakEven = weigh(money, gap, full).breakEvenGap;
        expect(weigh(money, { ...gap, estimate: breakEven }, full).returnPerHectare).toBeCloseTo(0, 7);
      }),
    );
  });

  test('at the break-even price the estimated gap returns nothing', () => {
    fc.assert(
      fc.property(anyFullMoney, anyGap, (money, gap) => {
        const price = weigh(money, gap, full).breakEvenPrice;
        fc.pre(price !== null && price < 1e5);
        const there = { ...money, priceLow: price, priceMiddle: price, priceHigh: price };
        expect(weigh(there, gap, full).returnPerHectare).toBeCloseTo(0, 5);
      }),
    );
  });

  test('at the break-even seed cost the estimated gap returns nothing', () => {
    fc.assert(
      fc.property(anyFullMoney, anyGap, (money, gap) => {
        const cost = weigh(money, gap, full).breakEvenSeedCost;
        fc.pre(cost !== null);
        const own = { ...money.seedCosts[candidate], ...seed(cost) };
        const there = { ...money, seedCosts: { ...money.seedCosts, [candidate]: own } };
        expect(weigh(there, gap, full).returnPerHectare).toBeCloseTo(0, 7);
      }),
    );
  });

  test('a higher price never lowers the chance of dearer seed, nor the return of a positive gap', () => {
    fc.assert(
      fc.property(anyMoney, anyGap, anyAmount, (money, gap, by) => {
        const before = weigh(money, gap);
        const after = weigh(dearer(money, by), gap);
        if (before.extraCostPerHectare >= 0)
          expect(after.chancePays).toBeGreaterThanOrEqual(before.chancePays - 1e-12);
        if (gap.estimate > 0)
          expect(after.returnPerHectare).toBeGreaterThanOrEqual(before.returnPerHectare - 1e-9);
      }),
    );
  });

  test('a larger gap never lowers the chance, and dearer seed never raises it', () => {
    fc.assert(
      fc.property(anyFullMoney, anyGap, anyAmount, (money, gap, more) => {
        const { chancePays } = weigh(money, gap, full);
        const larger = { ...gap, estimate: gap.estimate + more / 100 };
        expect(weigh(money, larger, full).chancePays).toBeGreaterThanOrEqual(chancePays - 1e-12);
        const own = money.seedCosts[candidate] ?? seed(0);
        const dear = { ...own, seedPerHectare: (own.seedPerHectare ?? 0) + more };
        const costly = { ...money, seedCosts: { ...money.seedCosts, [candidate]: dear } };
        expect(weigh(costly, gap, full).chancePays).toBeLessThanOrEqual(chancePays + 1e-12);
      }),
    );
  });

  test('changing places turns the answer round', () => {
    fc.assert(
      fc.property(anyMoney, anyGap, (money, gap) => {
        const there = weigh(money, gap);
        const seedCosts = {
          [candidate]: money.seedCosts[current] ?? seed(0),
          [current]: money.seedCosts[candidate] ?? seed(0),
        };
        const back = weigh({ ...money, seedCosts }, { ...gap, estimate: -gap.estimate });
        expect(back.returnPerHectare).toBeCloseTo(-there.returnPerHectare, 8);
        expect(back.chancePays).toBeCloseTo(1 - there.chancePays, 8);
        expect(back.goodReturn).toBeCloseTo(-there.badReturn, 3);
      }),
    );
  });

  test('units cancel: cents for dollars, and hundredweight for tonnes, change no chance', () => {
    fc.assert(
      fc.property(anyMoney, anyGap, fc.double({ min: 0.01, max: 100, noNaN: true }), (money, gap, by) => {
        const scaled = (factor: number, costFactor: number): MoneyAssumptions => ({
          ...money,
          priceLow: money.priceLow * factor,
          priceMiddle: money.priceMiddle * factor,
          priceHigh: money.priceHigh * factor,
          haulagePerTonne: money.haulagePerTonne * factor,
          seedCosts: Object.fromEntries(
            Object.entries(money.seedCosts).map(([id, cost]) => [
              id,
              seed((cost.seedPerHectare ?? 0) * costFactor),
            ]),
          ),
        });
        const { chancePays, returnPerHectare } = weigh(money, gap);
        const otherMoney = weigh(scaled(by, by), gap);
        expect(otherMoney.chancePays).toBeCloseTo(chancePays, 8);
        expect(otherMoney.returnPerHectare / by).toBeCloseTo(returnPerHectare, 6);
        const otherYield = { ...gap, estimate: gap.estimate * by, se: gap.se * by };
        const perOther = weigh(scaled(1 / by, 1), otherYield);
        expect(perOther.chancePays).toBeCloseTo(chancePays, 8);
        expect(perOther.returnPerHectare).toBeCloseTo(returnPerHectare, 6);
      }),
    );
  });

  test('what is paid for a hectare of the candidate is lost to it, of the current variety won, and straw is the reverse', () => {
    const parts = [
      ['seedPerHectare', -1],
      ['treatmentPerHectare', -1],
      ['royaltyPerHectare', -1],
      ['harvestPerHectare', -1],
      ['strawPerHectare', 1],
    ] as const;
    fc.assert(
      fc.property(anyMoney, anyGap, anyAmount, (money, gap, more) => {
        const known = { harvestPerHectare: 40, strawPerHectare: 30 };
        const costs = Object.fromEntries(
          Object.entries(money.seedCosts).map(([id, cost]) => [id, { ...cost, ...known }]),
        );
        const before = weigh({ ...money, seedCosts: costs }, gap);
        for (const [part, sign] of parts)
          for (const [id, side] of [
            [candidate, 1],
            [current, -1],
          ] as const) {
            const changed = { ...(costs[id] ?? seed(0)) };
            changed[part] = (changed[part] ?? 0) + more;
            const after = weigh({ ...money, seedCosts: { ...costs, [id]: changed } }, gap);
            expect(after.returnPerHectare - before.returnPerHectare).toBeCloseTo(side * sign * more, 7);
            expect(side * sign * (after.chancePays - before.chancePays)).toBeGreaterThanOrEqual(-1e-12);
          }
      }),
    );
  });

  test('units cancel: by the acre, everything of an area is so much less and no chance is another', () => {
    fc.assert(
      fc.property(anyFullMoney, anyGap, (money, gap) => {
        const acre = 0.404686;
        const ofAcre = (cost: SeedCost): SeedCost => ({
          ...cost,
          seedPerHectare: (cost.seedPerHectare ?? 0) * acre,
          ...(cost.targetPlantsM2 !== undefined && { targetPlantsM2: cost.targetPlantsM2 * acre }),
        });
        const byAcre = {
          ...money,
          seedCosts: Object.fromEntries(
            Object.entries(money.seedCosts).map(([id, cost]) => [id, ofAcre(cost)]),
          ),
        };
        const there = weigh(money, gap, full);
        const here = weigh(
          byAcre,
          { ...gap, estimate: gap.estimate * acre, se: gap.se * acre },
          { ...full, usualYield: full.usualYield * acre },
        );
        expect(here.chancePays).toBeCloseTo(there.chancePays, 8);
        expect(here.returnPerHectare / acre).toBeCloseTo(there.returnPerHectare, 6);
        expect(here.breakEvenGap / acre).toBeCloseTo(there.breakEvenGap, 8);
        expect(here.badReturn / acre).toBeCloseTo(there.badReturn, 3);
      }),
    );
  });

  test('the bad season is no better than the good one, and one season in ten lies under it', () => {
    fc.assert(
      fc.property(anyFullMoney, anyGap, (money, gap) => {
        const { badReturn, goodReturn } = weigh(money, gap, full);
        expect(badReturn).toBeLessThanOrEqual(goodReturn);
        // Costs that fall by the bad return leave exactly that season without loss.
        const own = money.seedCosts[candidate] ?? seed(0);
        const shifted = { ...own, strawPerHectare: 1000 - badReturn };
        const other = { ...(money.seedCosts[current] ?? seed(0)), strawPerHectare: 1000 };
        fc.pre(badReturn < 1000);
        const there = { ...money, seedCosts: { [candidate]: shifted, [current]: other } };
        expect(weigh(there, gap, full).chancePays).toBeCloseTo(0.9, 4);
      }),
    );
  });

  test('the same input gives the same output', () => {
    fc.assert(
      fc.property(anyFullMoney, anyGap, (money, gap) => {
        expect(weigh(money, gap, full)).toEqual(weigh(structuredClone(money), { ...gap }, full));
      }),
    );
  });
});
