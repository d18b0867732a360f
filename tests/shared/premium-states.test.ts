import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { QualityRule } from '#shared/money.ts';
import {
  joinStates,
  listAverageStates,
  listSeasonStates,
  type PremiumState,
  type TraitOutlook,
} from '#shared/premium-states.ts';
import { layOutSteps } from '#shared/premium-steps.ts';
import { studentUpperTail } from '#shared/student-tail.ts';

const rule = (side: QualityRule['side'], limit: number, perTonne: number): QualityRule => ({
  traitSlug: 'protein',
  side,
  limit,
  perTonne,
});

const premium = [rule('at-least', 12, 10)];

const outlook = (change: Partial<TraitOutlook> & { rules?: QualityRule[] } = {}): TraitOutlook => {
  const { rules = premium, ...rest } = change;
  return {
    steps: layOutSteps(rules),
    level: 12.3,
    spread: 0.8,
    ownSeason: { estimate: -0.2, se: 0.5, df: Infinity },
    region: { estimate: -0.2, se: 0.3, df: Infinity },
    ...rest,
  };
};

const mean = (states: readonly PremiumState[], part: 'current' | 'candidate'): number =>
  states.reduce((sum, state) => sum + state.weight * state[part], 0);
const total = (states: readonly PremiumState[]): number =>
  states.reduce((sum, { weight }) => sum + weight, 0);
const normalTail = (z: number): number => studentUpperTail(z, Infinity);

describe('what a buyer pays by level', () => {
  test('rules that hold at once add up, premiums from above and discounts from below', () => {
    const steps = layOutSteps([
      rule('at-least', 13.5, 6),
      rule('at-least', 12.5, 4),
      rule('under', 11, -12),
      rule('under', 10, -5),
    ]);
    expect(steps).toEqual({ limits: [10, 11, 12.5, 13.5], premiums: [-17, -12, 0, 4, 10] });
  });

  test('no rule, no step', () => {
    expect(layOutSteps([])).toEqual({ limits: [], premiums: [0] });
  });
});

describe('a season on the grower’s own land', () => {
  // Both levels are normal with the same spread: P(current ≥ 12) = Φ((12.3 − 12) / 0.8), the candidate's 0.2 lower.
  test('pays the premium as often as the levels pass the limit', () => {
    const states = listSeasonStates(outlook());
    expect(total(states)).toBeCloseTo(1, 12);
    expect(mean(states, 'current')).toBeCloseTo(10 * normalTail((12 - 12.3) / 0.8), 9);
    expect(mean(states, 'candidate')).toBeCloseTo(10 * normalTail((12 - 12.1) / 0.8), 4);
  });

  // Both earn it: what they share has the variance 0.8² − 0.5²/2, each by itself has 0.5²/2; on a fine grid of what they
  // share, the chance that each passes 12.
  test('pays both together as often as what they share has it', () => {
    const both = listSeasonStates(outlook()).find(
      ({ current, candidate }) => current === 10 && candidate === 10,
    );
    const shared = Math.sqrt(0.8 ** 2 - 0.5 ** 2 / 2);
    const own = Math.sqrt(0.5 ** 2 / 2);
    let expected = 0;
    const step = 0.0005;
    for (let z = -8 + step / 2; z < 8; z += step) {
      const density = Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI);
      const passes = (level: number): number => normalTail((12 - level - shared * z) / own);
      expected += step * density * passes(12.3) * passes(12.1);
    }
    expect(both?.weight).toBeCloseTo(expected, 5);
  });

  test('property: equal varieties expect equal premiums, whatever their level and however well the gap is known', () => {
    const level = fc.double({ min: 8, max: 16, noNaN: true });
    const se = fc.double({ min: 0, max: 2, noNaN: true });
    fc.assert(
      fc.property(level, se, (level, se) => {
        const same = { estimate: 0, se, df: Infinity };
        const equal = outlook({ level, ownSeason: same, region: { ...same, se: se / 2 } });
        for (const states of [listSeasonStates(equal), listAverageStates(equal)])
          expect(mean(states, 'candidate')).toBeCloseTo(mean(states, 'current'), 3);
        const sure = { ...equal, ownSeason: { ...same, se: 0 }, region: { ...same, se: 0 } };
        const unlike = listSeasonStates(sure).filter(({ current, candidate }) => current !== candidate);
        expect(total(unlike)).toBeLessThan(1e-9);
      }),
    );
  });

  // Then nothing is left for them to share: each spreads by 0.5/√2, independently of the other.
  test('a level that moved less than half of the gap’s variance is taken to move as much', () => {
    for (const spread of [0, 0.2]) {
      const states = listSeasonStates(outlook({ spread }));
      const passes = (level: number): number => normalTail((12 - level) / (0.5 / Math.SQRT2));
      expect(mean(states, 'current')).toBeCloseTo(10 * passes(12.3), 9);
      expect(mean(states, 'candidate')).toBeCloseTo(10 * passes(12.1), 6);
      const both = states.find(({ current, candidate }) => current === 10 && candidate === 10);
      expect(both?.weight).toBeCloseTo(passes(12.3) * passes(12.1), 6);
    }
  });

  test('property: more protein never lowers a premium, and the weights are a whole', () => {
    const figure = fc.double({ min: -2, max: 2, noNaN: true });
    fc.assert(
      fc.property(figure, figure, fc.double({ min: 0.01, max: 2, noNaN: true }), (gap, level, se) => {
        const rules = [rule('at-least', 12.5, 6), rule('at-least', 11.5, 4), rule('under', 10.5, -15)];
        const at = (estimate: number) =>
          listSeasonStates(outlook({ rules, level: 12 + level, ownSeason: { estimate, se, df: 9 } }));
        expect(total(at(gap))).toBeCloseTo(1, 9);
        expect(mean(at(gap + 0.3), 'candidate')).toBeGreaterThanOrEqual(mean(at(gap), 'candidate') - 1e-6);
        expect(mean(at(gap + 0.3), 'current')).toBeCloseTo(mean(at(gap), 'current'), 9);
      }),
    );
  });
});

describe('the average over seasons', () => {
  test('expects of a premium what single seasons do, and knows it more surely', () => {
    const seasons = listSeasonStates(outlook());
    const average = listAverageStates(outlook());
    expect(total(average)).toBeCloseTo(1, 12);
    expect(mean(average, 'current')).toBeCloseTo(mean(seasons, 'current'), 2);
    expect(mean(average, 'candidate')).toBeCloseTo(mean(seasons, 'candidate'), 2);
    const variance = (states: PremiumState[]) =>
      states.reduce((sum, one) => sum + one.weight * (one.candidate - mean(states, 'candidate')) ** 2, 0);
    expect(variance(average)).toBeLessThan(variance(seasons) / 2);
  });

  // At the limit a premium rises by 10 φ(0)/spread with each unit of level, and the average gap is the difference of both.
  test('leaves of the difference in premiums what the average gap is uncertain by', () => {
    const states = listAverageStates(outlook({ level: 12, region: { estimate: 0, se: 0.1, df: Infinity } }));
    const difference = Math.sqrt(
      states.reduce((sum, one) => sum + one.weight * (one.candidate - one.current) ** 2, 0),
    );
    const rise = 10 / Math.sqrt(2 * Math.PI) / Math.sqrt(0.8 ** 2 - 0.1 ** 2 / 4);
    expect(difference / (0.1 * rise)).toBeCloseTo(1, 1);
  });
});

describe('several traits', () => {
  test('join as independent, and many states keep their means', () => {
    const rules = [9, 10, 11, 12, 13, 14].map((limit) => rule('at-least', limit, limit - 8));
    const one = listSeasonStates(outlook({ rules }));
    const joined = joinStates([one, one, listSeasonStates(outlook())]);
    expect(joined.length).toBeLessThanOrEqual(24);
    expect(total(joined)).toBeCloseTo(1, 9);
    for (const part of ['current', 'candidate'] as const) {
      const expected = 2 * mean(one, part) + mean(listSeasonStates(outlook()), part);
      expect(mean(joined, part)).toBeCloseTo(expected, 9);
    }
    expect(joinStates([])).toEqual([{ current: 0, candidate: 0, weight: 1 }]);
  });
});
