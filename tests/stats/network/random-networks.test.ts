import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { combineTrials, type CombinedTrials } from '#server/stats/network/combine-trials.ts';
import { fitNetwork } from '#server/stats/network/fit-network.ts';
import { frameNetwork } from '#server/stats/network/network-frame.ts';
import type { VariancePenalty } from '#server/stats/network/variance-penalty.ts';
import { growCells, type NetworkPlan } from '#tests/support/random-network.ts';

const plan: fc.Arbitrary<NetworkPlan> = fc.record({
  entries: fc.integer({ min: 2, max: 9 }),
  sites: fc.integer({ min: 1, max: 5 }),
  years: fc.integer({ min: 1, max: 4 }),
  presence: fc.double({ min: 0.25, max: 1, noNaN: true }),
  seed: fc.integer({ min: 1, max: 1e9 }),
});
const variance = fc.double({ min: 1e-4, max: 1, noNaN: true });
const usual = fc.record({ site: variance, year: variance, rest: variance });

/** Every number of a result, however deep. */
function numbersOf(value: unknown): number[] {
  if (typeof value === 'number') return [value];
  return typeof value === 'object' && value !== null ? Object.values(value).flatMap(numbersOf) : [];
}

function expectSound(result: CombinedTrials): void {
  expect(numbersOf(result).every(Number.isFinite)).toBe(true);
  expect(result.fit.gradientNorm).toBeLessThan(1e-6);
  for (const gap of result.gaps) {
    expect(gap.se).toBeGreaterThan(0);
    expect(gap.ownSeason.se).toBeGreaterThanOrEqual(gap.se);
    expect(gap.df).toBeGreaterThan(0);
    expect(gap.p).toBeGreaterThanOrEqual(0);
    expect(gap.p).toBeLessThanOrEqual(1);
    expect(gap.interval95[0]).toBeLessThanOrEqual(gap.estimate);
    expect(gap.interval95[1]).toBeGreaterThanOrEqual(gap.estimate);
  }
}

const isFit = (cells: readonly { entry: string }[]): boolean =>
  new Set(cells.map(({ entry }) => entry)).size > 1;

describe('a thousand random networks', () => {
  it('are answered with the penalty, all numbers finite, at a stationary point', () => {
    fc.assert(
      fc.property(plan, usual, (layout, s2) => {
        const cells = growCells(layout);
        fc.pre(isFit(cells));
        const result = combineTrials(cells, { usual: s2 });
        if (result.outcome === 'not-fitted') throw new Error(result.reason);
        expectSound(result);
      }),
      { numRuns: 700, seed: 4 },
    );
  }, 120_000);

  it('are answered by plain REML, or refused with a reason', () => {
    fc.assert(
      fc.property(plan, (layout) => {
        const cells = growCells(layout);
        fc.pre(isFit(cells));
        const result = combineTrials(cells, { penalty: 0 });
        if (result.outcome === 'not-fitted') expect(result.reason).toBe('no-residual');
        else expectSound(result);
      }),
      { numRuns: 300, seed: 5 },
    );
  }, 120_000);

  it('never let the objective fall from one step to the next', () => {
    fc.assert(
      fc.property(plan, usual, fc.constantFrom(0, 3), fc.boolean(), (layout, s2, nu, isLoose) => {
        const cells = growCells(layout);
        fc.pre(isFit(cells));
        const penalty: VariancePenalty | null =
          nu === 0 ? null : { nu, usual: s2, ...(isLoose && { spread: Math.LN2 }) };
        const climbed: number[] = [];
        const fit = fitNetwork(frameNetwork(cells), penalty, (objective) => climbed.push(objective));
        if (fit.outcome === 'fitted') expect(fit.gradientNorm).toBeLessThan(1e-6);
        climbed
          .slice(1)
          .forEach((objective, i) =>
            expect(objective).toBeGreaterThanOrEqual(climbed[i]! - 1e-9 * (1 + Math.abs(climbed[i]!))),
          );
      }),
      { numRuns: 400, seed: 6 },
    );
  }, 120_000);
});
