import { describe, expect, it } from 'vitest';
import { fitNetwork, type NetworkFit } from '#server/stats/network/fit-network.ts';
import { frameNetwork, type NetworkFrame } from '#server/stats/network/network-frame.ts';
import { evaluateLikelihood, measureDesign } from '#server/stats/network/restricted-likelihood.ts';
import { startVariances } from '#server/stats/network/start-variances.ts';
import { penaltyAt, type VariancePenalty } from '#server/stats/network/variance-penalty.ts';
import { growCells, type NetworkPlan } from '#tests/support/random-network.ts';

function fitted(frame: NetworkFrame, penalty: VariancePenalty | null, near?: Float64Array): NetworkFit {
  const fit = fitNetwork(frame, penalty, undefined, near);
  if (fit.outcome === 'not-fitted') throw new Error(fit.reason);
  return fit;
}

/** The highest restricted likelihood on a grid of variances, zeros included for site and year. */
function highestOnGrid(frame: NetworkFrame): number {
  const { logDeterminant } = measureDesign(frame);
  const steps = [0, 0.01, 0.03, 0.06, 0.1, 0.15, 0.25, 0.4, 0.6, 0.9];
  let highest = -Infinity;
  for (const site of steps)
    for (const year of steps)
      for (const rest of steps) {
        const point = evaluateLikelihood(frame, Float64Array.of(site, year, rest), logDeterminant);
        highest = Math.max(highest, point?.logLik ?? -Infinity);
      }
  return highest;
}

describe('where the climb ends', () => {
  // The two networks of 2,000 random ones whose likelihood has a lower top with a variance of 0, where the first climb ends.
  it.each<NetworkPlan>([
    { entries: 3, sites: 6, years: 6, presence: 0.4, seed: 129482 },
    { entries: 3, sites: 6, years: 5, presence: 0.4, seed: 945581 },
  ])('is the higher of two tops: $entries × $sites × $years, seed $seed', (plan) => {
    const frame = frameNetwork(growCells(plan));
    expect(fitted(frame, null).point.logLik).toBeGreaterThanOrEqual(highestOnGrid(frame));
  });

  it('does not hang on where it began', () => {
    const frame = frameNetwork(growCells({ entries: 9, sites: 6, years: 4, presence: 0.7, seed: 8 }));
    const penalty = { nu: 3, usual: { site: 0.02, year: 0.02, rest: 0.05 } };
    const far = fitted(frame, penalty, Float64Array.of(1, 0.001, 0.3));
    const near = fitted(frame, penalty);
    near.point.theta.forEach((value, k) => expect(far.point.theta[k]! / value).toBeCloseTo(1, 8));
    const again = fitted(frame, penalty, near.point.theta);
    expect(again.iterations).toBe(0);
  });

  it('is not the lower top beside usual variances that are far too small', () => {
    const frame = frameNetwork(growCells({ entries: 6, sites: 4, years: 3, presence: 0.8, seed: 21 }));
    const penalty = { nu: 3, usual: { site: 1e-4, year: 1e-4, rest: 1e-4 } };
    const heightOf = ({ point }: NetworkFit): number => point.logLik + penaltyAt(penalty, point.theta);
    const beside = fitted(frame, penalty, Float64Array.of(1e-4, 1e-4, 1e-4));
    const found = fitted(frame, penalty);
    expect(heightOf(found)).toBeGreaterThan(heightOf(beside) + 20);
    expect(found.point.theta[2]).toBeGreaterThan(0.1);
  });

  it('takes few steps, and none of a few dozen small networks needs many', () => {
    const steps = Array.from({ length: 60 }, (_, k) => {
      const plan = {
        entries: 3 + (k % 7),
        sites: 2 + (k % 5),
        years: 1 + (k % 4),
        presence: 0.8,
        seed: k + 1,
      };
      const penalty = { nu: 3, usual: { site: 0.0144, year: 0.0144, rest: 0.0324 } };
      return fitted(frameNetwork(growCells(plan)), penalty).iterations;
    });
    expect(Math.max(...steps)).toBeLessThanOrEqual(15);
    expect(steps.reduce((sum, count) => sum + count, 0) / steps.length).toBeLessThan(8);
  });
});

describe('where it begins', () => {
  it('is near the end in a network of a whole region', () => {
    const frame = frameNetwork(growCells({ entries: 16, sites: 16, years: 5, presence: 0.75, seed: 2 }));
    const { residuals } = measureDesign(frame);
    const start = startVariances(frame, residuals, null, 0.1);
    const { theta } = fitted(frame, null).point;
    start.forEach((value, k) => {
      expect(value / theta[k]!).toBeGreaterThan(0.7);
      expect(value / theta[k]!).toBeLessThan(1.4);
    });
  });

  it('is at the usual variances where the cells say nothing', () => {
    const cells = growCells({ entries: 4, sites: 3, years: 2, presence: 1, seed: 5 });
    const apart = frameNetwork(cells.map((cell, row) => ({ ...cell, trial: `own ${row}` })));
    const usual = { site: 0.02, year: 0.03, rest: 0.05 };
    const start = startVariances(apart, measureDesign(apart).residuals, { nu: 3, usual }, 0.1);
    [usual.site, usual.year, usual.rest].forEach((value, k) => expect(start[k]).toBeCloseTo(value, 14));
  });
});
