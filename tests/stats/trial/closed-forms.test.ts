import { describe, expect, it } from 'vitest';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import { evaluatePoint, fitComponents, type AbsorbedModel } from '#server/stats/trial/variance-components.ts';
import { deviationOf } from '#tests/support/deviation.ts';
import { readCase } from '#tests/support/reference-case.ts';

describe('two entries side by side in strips', () => {
  const { plots, expected } = readCase('10-paired-strips-6', { block: 'block' });
  const { gaps, anova } = analyseTrial(plots, { kind: 'strips' });
  const paired = expected['paired_t']!;

  it('are a paired t test (R t.test)', () => {
    for (const key of ['estimate', 'se', 't', 'df', 'p'] as const)
      expect(deviationOf(gaps[0]?.[key], paired[key])).toBeLessThan(1e-9);
  });

  it('have t² = F', () => {
    expect(deviationOf(gaps[0]!.t! ** 2, anova.find((row) => row.term === 'entry')!.f)).toBeLessThan(1e-12);
  });

  it('need no adjustment: one gap is a family of one', () => {
    for (const p of [gaps[0]!.pTukey, gaps[0]!.pHolm, gaps[0]!.pBonferroni])
      expect(deviationOf(p, gaps[0]!.p)).toBeLessThan(1e-8);
  });
});

/** Groups of equal size around one mean: Z'MZ = b(I − J/a), Z'My = b(group mean − mean). */
function oneWay(groups: readonly (readonly number[])[]): {
  model: AbsorbedModel;
  between: number;
  within: number;
} {
  const [a, b] = [groups.length, groups[0]!.length];
  const means = groups.map((group) => group.reduce((sum, value) => sum + value, 0) / b);
  const mean = means.reduce((sum, value) => sum + value, 0) / a;
  const between = (b * means.reduce((sum, m) => sum + (m - mean) ** 2, 0)) / (a - 1);
  const within = groups
    .flatMap((group, i) => group.map((value) => (value - means[i]!) ** 2))
    .reduce((s, v) => s + v, 0);
  const zmz = Float64Array.from({ length: a * a }, (_, i) => b * ((i % (a + 1) === 0 ? 1 : 0) - 1 / a));
  return {
    model: {
      zmz,
      zmy: Float64Array.from(means, (m) => b * (m - mean)),
      ymy: groups.flat().reduce((sum, value) => sum + (value - mean) ** 2, 0),
      residualDf: a * b - 1,
      starts: [0, a],
    },
    between,
    within: within / (a * (b - 1)),
  };
}

describe('balanced one-way random effects', () => {
  it('have the analysis of variance estimator (MSB − MSW)/b where it is positive', () => {
    const { model, between, within } = oneWay([
      [5.1, 5.9, 5.4],
      [7.2, 6.8, 7.7],
      [4.1, 4.9, 4.2],
      [6.3, 6.0, 5.1],
    ]);
    const fit = fitComponents(model);
    expect(fit.converged).toBe(true);
    expect(deviationOf(fit.point.theta[0], (between - within) / 3)).toBeLessThan(1e-10);
    expect(deviationOf(fit.point.theta[1], within)).toBeLessThan(1e-10);
  });

  it('have 0 and the total mean square where it is negative', () => {
    const { model, between, within } = oneWay([
      [1, 5, 9],
      [2, 5, 8.2],
      [1.5, 5, 9.1],
    ]);
    expect(between).toBeLessThan(within);
    const fit = fitComponents(model);
    expect(fit.point.theta[0]).toBe(0);
    expect(deviationOf(fit.point.theta[1], model.ymy / model.residualDf)).toBeLessThan(1e-10);
    expect(fit.point.gradient[0]).toBeLessThan(0);
    expect(fit.converged).toBe(true);
  });
});

describe('derivatives of the restricted likelihood', () => {
  const { model } = oneWay([
    [5.1, 5.9, 5.4],
    [7.2, 6.8, 7.7],
    [4.1, 4.9, 4.2],
  ]);
  const at = Float64Array.of(0.7, 0.4);
  const point = evaluatePoint(model, at)!;
  const step = 1e-5;
  const moved = (k: number, by: number) =>
    evaluatePoint(
      model,
      at.map((value, i) => (i === k ? value + by : value)),
    )!;

  it('agree with differences of the criterion', () => {
    for (const k of [0, 1]) {
      const slope = (moved(k, step).logLik - moved(k, -step).logLik) / (2 * step);
      expect(deviationOf(point.gradient[k], slope)).toBeLessThan(1e-7);
    }
  });

  it('agree with differences of the gradient: observed information is 2 average − expected', () => {
    for (const k of [0, 1])
      for (const l of [0, 1]) {
        const observed = -(moved(k, step).gradient[l]! - moved(k, -step).gradient[l]!) / (2 * step);
        const i = k * 2 + l;
        expect(deviationOf(2 * point.average[i]! - point.expected[i]!, observed)).toBeLessThan(1e-7);
      }
  });
});
