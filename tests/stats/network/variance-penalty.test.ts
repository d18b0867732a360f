import { describe, expect, it } from 'vitest';
import { fitNetwork, type NetworkFit } from '#server/stats/network/fit-network.ts';
import { frameNetwork } from '#server/stats/network/network-frame.ts';
import {
  commonFactor,
  holdsAt,
  loosening,
  penaltyAt,
  penaltyInformation,
  type VariancePenalty,
} from '#server/stats/network/variance-penalty.ts';
import { growCells } from '#tests/support/random-network.ts';

const penalty: VariancePenalty = {
  nu: 3,
  usual: { site: 0.0144, year: 0.02, rest: 0.0324 },
  spread: Math.LN2,
};
const usual = [penalty.usual.site, penalty.usual.year, penalty.usual.rest];
const thetas = [
  [0.0144, 0.02, 0.0324],
  [0.06, 0.09, 0.12],
  [0.001, 0.02, 0.3],
  [1e-6, 2e-6, 1e-7],
].map((theta) => Float64Array.from(theta));

/** The penalty with κ written out, as the docstring has it. */
const jointly = (theta: Float64Array, x: number): number =>
  -1.5 *
    theta.reduce(
      (sum, value, k) => sum + Math.log(value) - x + (Math.exp(x) * (usual[k] ?? NaN)) / value,
      0,
    ) -
  (x * x) / (2 * Math.LN2 ** 2);

/** Largest value of a function with one peak, by golden sections. */
function highest(of: (x: number) => number, from: number, to: number): number {
  const golden = (Math.sqrt(5) - 1) / 2;
  let [low, high] = [from, to];
  for (let step = 0; step < 120; step++) {
    const [a, b] = [high - golden * (high - low), low + golden * (high - low)];
    if (of(a) < of(b)) low = a;
    else high = b;
  }
  return of((low + high) / 2);
}

const moved = (theta: Float64Array, steps: readonly number[]): Float64Array =>
  theta.map((value, k) => value * Math.exp(steps[k] ?? 0));

describe('the common factor of the usual variances', () => {
  it('is 1 where they are right or held fast, and goes part of the way where all are off alike', () => {
    const [right, larger] = [thetas[0]!, Float64Array.from(usual, (s2) => 4 * s2)];
    expect(commonFactor(penalty, right)).toBeCloseTo(1, 12);
    expect(commonFactor({ nu: 3, usual: penalty.usual }, larger)).toBe(1);
    const factor = commonFactor(penalty, larger);
    // (ν/2)(3 − 3κ/4) = ln κ / spread²
    expect(1.5 * (3 - (3 * factor) / 4)).toBeCloseTo(Math.log(factor) / Math.LN2 ** 2, 10);
    expect(factor).toBeGreaterThan(2);
    expect(factor).toBeLessThan(4);
  });

  it('is the one at which the penalty is least severe', () => {
    for (const theta of thetas)
      expect(penaltyAt(penalty, theta)).toBeCloseTo(
        highest((x) => jointly(theta, x), Math.log(0.25), 25),
        9,
      );
  });
});

describe('trials that agree better than they should', () => {
  const calm = Float64Array.from(usual, (s2) => s2 / 1e4);

  it('are taken for a quarter of what is usual, not for less', () => {
    expect(commonFactor(penalty, calm)).toBe(0.25);
    const quartered = { site: 0.0036, year: 0.005, rest: 0.0081 };
    expect([...penaltyInformation(penalty, calm)]).toEqual([
      ...penaltyInformation({ nu: 3, usual: quartered }, calm),
    ]);
    holdsAt(penalty, calm).forEach((hold, k) =>
      expect(hold).toBeCloseTo(holdsAt({ nu: 3, usual: quartered }, calm)[k]!, 6),
    );
  });
});

describe('slope and curvature of the penalty in ln θ', () => {
  const step = 1e-4;
  const along = (theta: Float64Array, k: number, l: number, a: number, b: number): number => {
    const steps = [0, 0, 0];
    steps[k]! += a * step;
    steps[l]! += b * step;
    return penaltyAt(penalty, moved(theta, steps));
  };

  it('are those of differences', () => {
    for (const theta of thetas.slice(0, 3)) {
      const holds = holdsAt(penalty, theta);
      const open = loosening(penalty, theta, holds);
      for (let k = 0; k < 3; k++) {
        const slope = (along(theta, k, k, 1, 0) - along(theta, k, k, -1, 0)) / (2 * step);
        expect(holds[k]! - 1.5).toBeCloseTo(slope, 5);
        for (let l = 0; l < 3; l++) {
          const second =
            (along(theta, k, l, 1, 1) -
              along(theta, k, l, 1, -1) -
              along(theta, k, l, -1, 1) +
              along(theta, k, l, -1, -1)) /
            (4 * step * step);
          const written = (k === l ? holds[k]! : 0) - open * holds[k]! * holds[l]!;
          expect(Math.abs(written + second)).toBeLessThan(1e-4 * (1 + Math.abs(second)));
        }
      }
    }
  });

  it('are expected to be what is left of the information on θ and κ together once κ is unknown', () => {
    // information on (ln θ, ln κ): ν/2 each, −ν/2 across, 3ν/2 + 1/spread² for κ
    const own = 4.5 + 1 / Math.LN2 ** 2;
    for (let k = 0; k < 3; k++)
      for (let l = 0; l < 3; l++)
        expect(penaltyInformation(penalty, thetas[1]!)[k * 3 + l]).toBeCloseTo(
          (k === l ? 1.5 : 0) - (1.5 * 1.5) / own,
          12,
        );
    expect([...penaltyInformation({ nu: 3, usual: penalty.usual }, thetas[1]!)]).toEqual([
      ...[1.5, 0, 0],
      ...[0, 1.5, 0],
      ...[0, 0, 1.5],
    ]);
  });
});

describe('a fit with a common factor', () => {
  const frame = frameNetwork(growCells({ entries: 6, sites: 4, years: 3, presence: 0.8, seed: 21 }));
  const fit = (change: Partial<VariancePenalty>): NetworkFit => {
    const found = fitNetwork(frame, { ...penalty, ...change });
    if (found.outcome === 'not-fitted') throw new Error(found.reason);
    return found;
  };
  const doubled = { site: 0.0288, year: 0.04, rest: 0.0648 };
  const distance = (a: NetworkFit, b: NetworkFit): number =>
    Math.max(...a.point.theta.map((value, k) => Math.abs(Math.log(value / b.point.theta[k]!))));

  it('does not ask how large the usual variances are, only how they stand to each other, once the factor is free', () => {
    expect(distance(fit({ spread: 1e4 }), fit({ spread: 1e4, usual: doubled }))).toBeLessThan(1e-6);
    expect(distance(fit({}), fit({ usual: doubled }))).toBeGreaterThan(0.05);
  });

  it('is the fit without one where the factor is held', () => {
    const { spread: _, ...plain } = penalty;
    const without = fitNetwork(frame, plain);
    if (without.outcome === 'not-fitted') throw new Error(without.reason);
    expect(distance(fit({ spread: 1e-6 }), without)).toBeLessThan(1e-6);
  });

  it('stands between the two, nearer to what was seen', () => {
    const far = { site: 0.01, year: 0.01, rest: 0.01 };
    const seen = fit({ spread: 1e4, usual: far }).point.theta[0]!;
    const held = fit({ spread: 1e-6, usual: far }).point.theta[0]!;
    const between = fit({ usual: far }).point.theta[0]!;
    expect(between).toBeLessThan(seen);
    expect(between).toBeGreaterThan(Math.sqrt(held * seen));
  });
});
