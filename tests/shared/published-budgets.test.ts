import { describe, expect, test } from 'vitest';
import { findCostBreakEven } from '#shared/partial-budget.ts';
import { atOnePrice, candidate, current, gapOf, seed, weigh } from '#tests/shared/money-questions.ts';

describe('published partial budgets', () => {
  // Local against improved maize: ISRN Agronomy 2012, 153412, table 10 (domain.md [11]). 13.333 a kg; the printed
  // figures are rounded to whole units.
  test.each([
    { case: 'fertilised', local: 3.6973, improved: 3.46162, costs: [15_693, 16_243], nets: [33_604, 29_912] },
    { case: 'unfertilised', local: 2.03973, improved: 1.80505, costs: [8640, 9165], nets: [18_556, 14_902] },
  ] as const)('maize, $case', ({ local, improved, costs, nets }) => {
    const money = atOnePrice(13_333, { candidate: seed(costs[1]), current: seed(costs[0]) });
    const { returnPerHectare } = weigh(money, gapOf(improved - local));
    expect(Math.abs(returnPerHectare - (nets[1] - nets[0]))).toBeLessThan(2);
  });

  // 100 acres of maize for dry beans: Southeast Farm Press (domain.md [10]); added revenue 97,500, reduced costs 55,000,
  // added costs 88,000, reduced revenue 69,000. Here by the acre, the revenues as what a hectare brings besides its yield.
  test('maize for dry beans', () => {
    const money = atOnePrice(1, {
      candidate: seed(880, { strawPerHectare: 975 }),
      current: seed(550, { strawPerHectare: 690 }),
    });
    expect(weigh(money, gapOf(0)).returnPerHectare * 100).toBeCloseTo(-4500, 9);
  });

  // Whole-crop break-even: Nebraska crop budgets 2014 (domain.md [12]), per acre and bushel; 51.5 and 64.0 bu are printed.
  test.each([
    { cost: 283.47, bushels: 51.5 },
    { cost: 352.27, bushels: 64.0 },
  ])('the whole crop breaks even at $bushels bu', ({ cost, bushels }) => {
    const money = atOnePrice(6.612, { candidate: seed(cost), current: seed(0) }, 1.11);
    expect(weigh(money, gapOf(0)).breakEvenGap).toBeCloseTo(bushels, 1);
    expect(findCostBreakEven(candidate, current, money)).toBeCloseTo(bushels, 1);
  });

  // Certified seed pays 1 bu/ac at 3.50 a bushel when it costs 3.50 more an acre (domain.md, partial budget).
  test('certified seed breaks even at one bushel', () => {
    const money = atOnePrice(3.5, { candidate: seed(13.5), current: seed(10) });
    expect(weigh(money, gapOf(1))).toMatchObject({
      extraCostPerHectare: 3.5,
      breakEvenGap: 1,
      returnPerHectare: 0,
      breakEvenPrice: 3.5,
      breakEvenSeedCost: 13.5,
    });
  });

  // Esker & Conley (2012), Crop Sci. 52:351–359: P(gap > break-even) from estimate, SED and df. With t = 2.228 on 10 df
  // the upper tail is 0.025, with 1.372 it is 0.1 (Student's table).
  test('the chance is the tail of t above the break-even gap, and the bad season the tail of the return', () => {
    const money = atOnePrice(200, { candidate: seed(70), current: seed(50) });
    const gap = { estimate: 0.1 + 2.228139 * 0.2, se: 0.2, df: 10 };
    const result = weigh(money, gap, { inRegion: { ...gap, se: 0.4 } });
    expect(result.breakEvenGap).toBeCloseTo(0.1, 12);
    expect(result.chancePays).toBeCloseTo(0.975, 6);
    expect(result.verdict).toBe('pays');
    // Half as sure: t = 1.114 on 10 df leaves 0.1456 (R: pt(1.1140695, 10, lower.tail = FALSE)).
    expect(result.chanceInRegion).toBeCloseTo(1 - 0.1456, 3);
    const half = 1.372184 * 0.2 * 200;
    expect(result.badReturn).toBeCloseTo(result.returnPerHectare - half, 3);
    expect(result.goodReturn).toBeCloseTo(result.returnPerHectare + half, 3);
  });
});
