import { describe, expect, it } from 'vitest';
import { reckonCandidates, rejudgeYield } from '#shared/reckon-candidates.ts';
import { findTurningPoints } from '#shared/turning-points.ts';
import { weighMoney } from '#shared/partial-budget.ts';
import {
  assumptions,
  basis,
  buildCandidate,
  currentId,
  idOf,
} from '#tests/client/support/weigh-up-factory.ts';

const reckon = (candidate = buildCandidate(), money = assumptions, margin: number | null = 0.1) =>
  reckonCandidates([candidate], basis, money, margin)[0];

describe('the page’s own reckoning', () => {
  it('gives back what the server gave under the same assumptions', () => {
    const candidate = buildCandidate();
    expect(reckon(candidate)).toEqual(candidate);
  });

  it('follows the price: 0.4 t/ha at 290 less 20, less 30 of seed', () => {
    // By hand: 0.4 × (290 − 20) − (148 − 118) = 78; at 390: 0.4 × 370 − 30 = 118.
    expect(reckon()?.money?.returnPerHectare).toBeCloseTo(78, 9);
    const dearer = { ...assumptions, priceMiddle: 390, priceHigh: 390 };
    expect(reckon(buildCandidate(), dearer)?.money?.returnPerHectare).toBeCloseTo(118, 9);
  });

  it('leaves money open where a seed cost is unknown, instead of taking it as zero', () => {
    const { [currentId]: current } = assumptions.seedCosts;
    const open = { ...assumptions, seedCosts: current ? { [currentId]: current } : {} };
    expect(reckon(buildCandidate(), open)?.money).toBeNull();
  });

  it('moves only between level and open when the break-even gap moves', () => {
    const region = { low: -0.15, high: 0.2, level: 0.95 };
    expect(rejudgeYield('open', region, 0.1, 0.05)).toBe('open');
    expect(rejudgeYield('open', region, 0.1, 0.25)).toBe('level');
    expect(rejudgeYield('open', region, 0.1, -0.25)).toBe('level');
    expect(rejudgeYield('level', region, 0.1, null)).toBe('open');
    expect(rejudgeYield('ahead', region, 9, 9)).toBe('ahead');
    expect(rejudgeYield('thin', region, 9, 9)).toBe('thin');
  });

  it('gives a candidate without a gap no money', () => {
    expect(reckon(buildCandidate({ gap: null, verdict: 'thin' }))?.money).toBeNull();
  });
});

describe('what would turn the answer', () => {
  const turn = (estimate: number, candidate = idOf(2)) => {
    const moneyGap = { estimate, se: 0.2, df: 20 };
    const result = weighMoney({ varietyId: candidate, moneyGap, traits: [] }, basis, assumptions);
    if (!result) throw new Error('no money');
    return { ...findTurningPoints(result, estimate, assumptions), result };
  };

  it('lies at the figures where the return is nothing, and on the right side of them', () => {
    const { pays, points } = turn(0.4);
    expect(pays).toBe(true);
    const price = points.find((point) => point.kind === 'price');
    // 30 / 0.4 + 20 = 95 per tonne; 30 / 270 t/ha; 148 + 78 of seed.
    expect(price).toEqual({ kind: 'price', side: 'under', value: expect.closeTo(95, 9) });
    expect(points).toContainEqual({ kind: 'gap', side: 'under', value: expect.closeTo(30 / 270, 9) });
    expect(points).toContainEqual({ kind: 'seed', side: 'over', value: expect.closeTo(226, 9) });
  });

  it('turns the sides round where the candidate does not pay', () => {
    const { pays, points } = turn(0.05);
    expect(pays).toBe(false);
    expect(points.find((point) => point.kind === 'price')?.side).toBe('over');
    expect(points.find((point) => point.kind === 'gap')?.side).toBe('over');
    expect(points.find((point) => point.kind === 'seed')?.side).toBe('under');
  });

  it('names no price that no market comes near, high or low', () => {
    // 30 / 0.01 + 20 = 3,020 per tonne, 30 / 3 + 20 = 30; the sheet says 255 to 340.
    for (const estimate of [0.01, 3])
      expect(turn(estimate).points.map(({ kind }) => kind)).toEqual(['gap', 'seed']);
  });

  it('names no price where none can turn it: same seed cost, lower yield', () => {
    expect(turn(-0.2, idOf(3)).points.some((point) => point.kind === 'price')).toBe(false);
  });
});
