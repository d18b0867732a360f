import { describe, expect, it } from 'vitest';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import { deviationOf } from '#tests/support/deviation.ts';
import { readCase } from '#tests/support/reference-case.ts';

const untested = { t: null, p: null, pTukey: null, pHolm: null, pBonferroni: null };

describe('12a, one plot an entry', () => {
  const { plots, expected } = readCase('12a-single-replicate', {});
  const actual = analyseTrial(plots, { kind: 'crd' }, { check: 'E1' });

  it('gives means and gaps, but no error to judge them by', () => {
    expect(actual.fit).toMatchObject({ residualDf: 0, residualMs: null, cvPercent: null, r2: null });
    for (const row of expected['emmeans']!) {
      const mean = actual.means.find((own) => own.entry === String(row['entry']));
      expect(mean?.mean).toBeCloseTo(Number(row['emmean']), 12);
      expect(mean).toMatchObject({ se: null, df: null, estimable: true });
    }
    for (const gap of actual.gaps)
      expect(gap).toMatchObject({ ...untested, se: null, lsd05: null, estimable: true });
    expect(actual).toMatchObject({ lsd: {}, dunnett: null, groups: [] });
    expect(actual.anova[0]).toMatchObject({ df: 7, f: null, p: null });
    expect(actual.diagnostics.shapiroWilk).toBeNull();
    expect(actual.notices).toContainEqual({ code: 'no-residual-df' });
  });
});

describe('12b, blocks and entries add up without a remainder', () => {
  const { plots, expected } = readCase('12b-zero-residual', { block: 'block' });
  const actual = analyseTrial(plots, { kind: 'rcbd' });

  it('gives errors of exactly 0 and no test', () => {
    expect(actual.fit).toMatchObject({ residualDf: 8, residualMs: 0, cvPercent: 0, r2: 1 });
    for (const row of expected['emmeans']!) {
      const mean = actual.means.find((own) => own.entry === String(row['entry']));
      expect(deviationOf(mean?.mean, row['emmean'])).toBeLessThan(1e-12);
      expect(mean?.se).toBe(0);
    }
    for (const gap of actual.gaps)
      expect(gap).toMatchObject({ ...untested, se: 0, lsd05: 0, estimable: true });
    const entry = actual.anova.find((row) => row.term === 'entry');
    expect(deviationOf(entry?.ss, 30)).toBeLessThan(1e-12);
    expect(entry).toMatchObject({ f: null, p: null });
    expect(actual.diagnostics.shapiroWilk).toBeNull();
    expect(actual.notices).toEqual([{ code: 'zero-residual-variance' }]);
  });
});

describe('entries and blocks that add up in decimals, which doubles hold with a rounding', () => {
  it.each([0, 1e9])('leave no residual variance either, at an offset of %d', (offset) => {
    const plots = Array.from({ length: 20 }, (_, i) => ({
      plot: String(i),
      entry: `E${i % 5}`,
      block: String(Math.floor(i / 5)),
      value: offset + 4.1 + 0.7 * (i % 5) + 0.3 * Math.floor(i / 5),
    }));
    const { fit, gaps } = analyseTrial(plots, { kind: 'rcbd' });
    expect(fit.residualMs).toBe(0);
    expect(gaps[0]).toMatchObject({ ...untested, se: 0 });
    expect(gaps[0]!.estimate).toBeCloseTo(-0.7, 6);
  });
});

describe('12c, an entry without a harvested plot', () => {
  const { plots } = readCase('12c-entry-all-missing', { block: 'block' });
  const actual = analyseTrial(plots, { kind: 'rcbd' });

  it('lists it as not estimable and counts five entries for the rest (figures: fixed-cases)', () => {
    expect(actual.means.map((mean) => mean.entry)).toEqual(['E1', 'E2', 'E3', 'E4', 'E5', 'E6']);
    expect(actual.means[3]).toMatchObject({ n: 0, mean: null, se: null, estimable: false });
    const own = actual.gaps.filter((gap) => gap.a === 'E4' || gap.b === 'E4');
    expect(own).toHaveLength(5);
    expect(own.every((gap) => !gap.estimable && gap.estimate === null && gap.p === null)).toBe(true);
    expect(actual.gaps.filter((gap) => gap.estimable)).toHaveLength(10);
    expect(actual.notices).toEqual([{ code: 'entry-without-data', entries: ['E4'] }]);
  });

  it('refuses it as a check', () => {
    expect(() => analyseTrial(plots, { kind: 'rcbd' }, { check: 'E4' })).toThrow('E4');
  });
});

describe('12d, two sets of entries that share no block', () => {
  const { plots, expected } = readCase('12d-disconnected-blocks', { block: 'block' });
  const actual = analyseTrial(plots, { kind: 'rcbd' });

  it('estimates gaps within a set only', () => {
    expect(actual.fit.residualDf).toBe(4);
    expect(deviationOf(actual.fit.residualMs, expected['fit']!['residual_ms'])).toBeLessThan(1e-9);
    for (const row of expected['pairwise']!) {
      const gap = actual.gaps.find((own) => own.a === String(row['a']) && own.b === String(row['b']));
      expect(gap?.estimable).toBe(row['estimable']);
      if (!gap?.estimable) continue;
      for (const key of ['estimate', 'se', 'df', 't', 'p'] as const)
        expect(deviationOf(gap[key], row[key])).toBeLessThan(1e-9);
    }
  });

  it('gives no adjusted means and names the sets', () => {
    expect(actual.means.every((mean) => mean.mean === null && !mean.estimable)).toBe(true);
    for (const row of expected['raw_means']!)
      expect(actual.means.find((m) => m.entry === String(row['entry']))?.rawMean).toBeCloseTo(
        Number(row['mean']),
        12,
      );
    const parts = [...expected['components']!].map((part) => [...part].map(String));
    expect(actual.notices).toContainEqual({ code: 'disconnected', parts });
  });

  it('equals R in the sequential analysis of variance', () => {
    for (const row of expected['anova_sequential']!) {
      const own = actual.anova.find((a) => a.term === String(row['term']));
      if (!own) continue;
      for (const key of ['df', 'ss', 'p'] as const)
        expect(deviationOf(own.sequential?.[key], row[key])).toBeLessThan(1e-9);
    }
    // blocks after entries: only 1 v. 2 and 3 v. 4 can be told from the entries
    expect(actual.anova[0]).toMatchObject({ term: 'block', df: 2 });
    expect(actual.anova[1]).toMatchObject({ term: 'entry', df: 4 });
  });
});
