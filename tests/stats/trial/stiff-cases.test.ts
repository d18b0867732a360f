import { describe, expect, it } from 'vitest';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import { deviationOf } from '#tests/support/deviation.ts';
import { readCase, readReferenceJson } from '#tests/support/reference-case.ts';

/** Nine digits of exact rational arithmetic on the stored doubles (tests/reference/scripts/exact_check.py). */
const nineDigits = 1e-9;

describe.each(['11-smls-offset0', '11-smls-offset1e6'])('%s', (name) => {
  const { plots } = readCase(name, {});
  const exact = readReferenceJson(`open/${name}/exact_check.json`)['from_doubles']!;
  const { anova, means, fit } = analyseTrial(plots, { kind: 'crd' });

  it('equals exact arithmetic', () => {
    expect(deviationOf(anova[0]?.ss, exact['between_ss']!['double'])).toBeLessThan(nineDigits);
    expect(deviationOf(anova[1]?.ss, exact['within_ss']!['double'])).toBeLessThan(nineDigits);
    expect(deviationOf(fit.residualMs, exact['within_ms']!['double'])).toBeLessThan(nineDigits);
    expect(deviationOf(anova[0]?.f, exact['F']!['double'])).toBeLessThan(nineDigits);
    for (const mean of means)
      expect(deviationOf(mean.mean, exact['means']![mean.entry])).toBeLessThan(nineDigits);
  });
});

it('keeps nine digits of what doubles hold at an offset of 1e9', () => {
  const { plots } = readCase('11-smls-offset0', {});
  const stored = plots.map((plot) => ({ ...plot, value: plot.value! + 1e9 }));
  // the doubles minus 1e9 are exact differences, so that this data set has the same exact answer
  const shifted = stored.map((plot) => ({ ...plot, value: plot.value - 1e9 }));
  const far = analyseTrial(stored, { kind: 'crd' });
  const near = analyseTrial(shifted, { kind: 'crd' });
  expect(deviationOf(far.anova[0]?.f, near.anova[0]?.f)).toBeLessThan(nineDigits);
  // "The best any program can reach at offset 1e9 is 20.9999992" (tests/reference/README.md)
  expect(far.anova[0]?.f).toBeCloseTo(20.9999992, 6);
});
