import { describe, expect, it } from 'vitest';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import { DeviationLog } from '#tests/support/deviation.ts';
import { readCase } from '#tests/support/reference-case.ts';
import { compareFamily, compareFixedCase } from '#tests/support/trial-deviation.ts';

describe('03-factorial-npk, N:P:K confounded with blocks (R datasets::npk, lm and emmeans)', () => {
  const { plots, expected } = readCase('03-factorial-npk', { block: 'block', factors: ['N', 'P', 'K'] });
  const actual = analyseTrial(plots, { kind: 'factorial', factors: ['N', 'P', 'K'] });

  it('equals R in the fit, both analyses of variance and the checks', () => {
    const log = new DeviationLog();
    compareFixedCase(log, actual, expected);
    expect(Object.entries(log.largest).filter(([, value]) => !(value < 1e-8))).toEqual([]);
  });

  it('equals R in the means and gaps of each factor and each pair of factors', () => {
    const log = new DeviationLog();
    for (const section of ['main_effects', 'two_way'])
      for (const [name, tables] of Object.entries(expected[section]!))
        compareFamily(log, actual.factors[name]!, tables['emmeans']!, tables['pairwise']!, '', 'level');
    expect(Object.entries(log.largest).filter(([, value]) => !(value < 1e-8))).toEqual([]);
  });

  it('says that the combinations are not estimable, and why', () => {
    expect(actual.anova.find((row) => row.term === 'N:P:K')).toMatchObject({ df: 0, f: null, p: null });
    expect(actual.means).toHaveLength(8);
    expect(actual.means.every((mean) => !mean.estimable && mean.mean === null && mean.se === null)).toBe(
      true,
    );
    expect(actual.notices).toContainEqual({ code: 'term-confounded', terms: ['N:P:K'] });
  });
});
