import { describe, expect, it } from 'vitest';
import { AnalysisError } from '#server/stats/analysis-error.ts';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import type { TrialDesign, TrialPlot } from '#server/stats/trial/trial-data.ts';

const crd: TrialDesign = { kind: 'crd' };
const rcbd: TrialDesign = { kind: 'rcbd' };

/** Three entries in four blocks; every value its own. */
function layOut(change: (plot: TrialPlot, i: number) => TrialPlot = (plot) => plot): TrialPlot[] {
  return Array.from({ length: 12 }, (_, i) => {
    const noise = ((i * 37) % 11) / 10;
    return change(
      { plot: String(i + 1), entry: 'ABC'[i % 3]!, block: String(Math.floor(i / 3) + 1), value: 6 + noise },
      i,
    );
  });
}

function refusal(
  plots: readonly TrialPlot[],
  design: TrialDesign,
  options = {},
): { code: string; rows: readonly number[] } {
  try {
    analyseTrial(plots, design, options);
  } catch (error) {
    if (error instanceof AnalysisError) return { code: error.code, rows: error.rows };
    throw error;
  }
  return { code: 'none', rows: [] };
}

describe('data that cannot be analysed are refused with the rows at fault', () => {
  const spoil = (row: number, change: Partial<TrialPlot>) =>
    layOut((plot, i) => (i === row - 1 ? { ...plot, ...change } : plot));

  it.each([
    ['NaN', spoil(3, { value: Number.NaN }), 'not-finite', [3]],
    ['an infinity', spoil(4, { value: Infinity }), 'not-finite', [4]],
    ['a value no arithmetic holds', spoil(5, { value: 1e200 }), 'value-out-of-range', [5]],
    ['a negative yield', spoil(6, { value: -0.1 }), 'negative-value', [6]],
    ['a plot twice', spoil(7, { plot: '2' }), 'duplicate-plot', [2, 7]],
    ['a plot without an entry', spoil(8, { entry: '' }), 'missing-level', [8]],
    ['a plot without a block', spoil(9, { block: null }), 'missing-level', [9]],
    ['no value at all', layOut((plot) => ({ ...plot, value: null })), 'no-values', []],
    ['a single plot', layOut().slice(0, 1), 'one-plot', [1]],
    ['a single entry', layOut((plot) => ({ ...plot, entry: 'A' })).slice(0, 2), 'one-entry', [1, 2]],
  ])('%s', (_, plots, code, rows) => {
    expect(refusal(plots, rcbd)).toEqual({ code, rows });
  });

  it('a check that is not in the trial', () => {
    expect(refusal(layOut(), rcbd, { check: 'Z' })).toMatchObject({ code: 'unknown-check' });
  });

  it('a level of alpha that is none', () => {
    expect(refusal(layOut(), rcbd, { alpha: 1 })).toMatchObject({ code: 'bad-option' });
  });

  it('more plots, entries or blocks than one trial has', () => {
    const many = (count: number, entry: (i: number) => string) =>
      Array.from({ length: count }, (_, i) => ({
        plot: String(i),
        entry: entry(i),
        block: String(i),
        value: 5,
      }));
    expect(
      refusal(
        many(100_000, () => 'A'),
        crd,
      ),
    ).toMatchObject({ code: 'too-large' });
    expect(
      refusal(
        many(2_000, (i) => `E${i}`),
        crd,
      ),
    ).toMatchObject({ code: 'too-large' });
    expect(
      refusal(
        many(4_000, (i) => `E${i % 2}`),
        rcbd,
      ),
    ).toMatchObject({ code: 'too-large' });
    expect(
      refusal(
        many(4_000, (i) => `E${i % 2}`),
        { kind: 'incomplete-blocks' },
      ),
    ).toMatchObject({ code: 'too-large' });
  });
});

describe('data at the edge of what can be analysed', () => {
  it('two plots of two entries: a gap, and no error to judge it by', () => {
    const { gaps, notices } = analyseTrial(layOut().slice(0, 2), crd);
    expect(gaps).toHaveLength(1);
    expect(gaps[0]).toMatchObject({ estimable: true, se: null, p: null });
    expect(notices).toContainEqual({ code: 'no-residual-df' });
  });

  it('the same value everywhere: gaps of exactly 0, no test', () => {
    const { gaps, anova } = analyseTrial(
      layOut((plot) => ({ ...plot, value: 7.3 })),
      rcbd,
    );
    for (const gap of gaps) expect(gap).toMatchObject({ estimate: 0, se: 0, p: null });
    for (const row of anova) expect(row.f).toBeNull();
  });

  it('entries confounded with blocks: nothing to compare', () => {
    const plots = layOut((plot) => ({ ...plot, block: plot.entry }));
    const { gaps, notices } = analyseTrial(plots, rcbd);
    expect(gaps.every((gap) => !gap.estimable && gap.estimate === null)).toBe(true);
    expect(notices).toContainEqual({ code: 'term-confounded', terms: ['entry'] });
  });

  it('a single block is no block', () => {
    const plots = layOut((plot) => ({ ...plot, block: '1' }));
    expect(analyseTrial(plots, rcbd).gaps).toEqual(analyseTrial(plots, crd).gaps);
  });

  it('negative values of a trait that may be negative', () => {
    const plots = layOut((plot) => ({ ...plot, value: plot.value! - 7 }));
    expect(analyseTrial(plots, rcbd, { allowNegative: true }).gaps[0]!.p).toBeCloseTo(
      analyseTrial(layOut(), rcbd).gaps[0]!.p!,
      10,
    );
  });

  it('incomplete blocks of one plot: their variance cannot be told from the residual', () => {
    const plots = layOut((plot) => ({ ...plot, rep: plot.block ?? null, block: plot.plot }));
    const { fit, notices } = analyseTrial(plots, { kind: 'incomplete-blocks' });
    expect(fit.components.map((component) => component.name)).toEqual(['residual']);
    expect(notices).toContainEqual({ code: 'component-not-identifiable', components: ['rep:block'] });
  });

  it('blocks that are whole replicates: their variance is in the replicates', () => {
    const plots = layOut((plot) => ({ ...plot, rep: plot.block ?? null, block: 'only' }));
    const actual = analyseTrial(plots, { kind: 'incomplete-blocks' });
    expect(actual.gaps[0]!.se).toBeCloseTo(analyseTrial(layOut(), rcbd).gaps[0]!.se!, 12);
    expect(actual.notices).toContainEqual({ code: 'component-not-identifiable', components: ['rep:block'] });
  });

  it('a split plot without replication of the main plots', () => {
    const plots = layOut((plot, i) => ({
      ...plot,
      block: '1',
      main: plot.block ?? null,
      sub: plot.entry,
      plot: `${i}`,
    }));
    const { gaps, fit } = analyseTrial(plots, { kind: 'split-plot' });
    expect(fit.residualDf).toBe(0);
    expect(gaps.every((gap) => gap.estimable && gap.se === null)).toBe(true);
  });

  it('entry names of any script, and names that JavaScript knows', () => {
    const names = ['小麦', '__proto__', 'قمح'];
    const plots = layOut((plot, i) => ({ ...plot, entry: names[i % 3]! }));
    const { means, gaps } = analyseTrial(plots, rcbd, { check: '__proto__' });
    expect(new Set(means.map((mean) => mean.entry))).toEqual(new Set(names));
    expect(gaps.every((gap) => gap.p !== null)).toBe(true);
  });

  it('unequal p far in the tail keep their digits', () => {
    const plots = layOut((plot, i) => ({ ...plot, value: plot.value! / 1e6 + (i % 3) * 1000 }));
    const { gaps } = analyseTrial(plots, rcbd);
    expect(gaps[0]!.p).toBeGreaterThan(0);
    expect(gaps[0]!.p).toBeLessThan(1e-30);
    expect(gaps[0]!.pTukey).toBeGreaterThan(0);
  });

  it('is JSON without loss: nothing in it is NaN, infinite or undefined', () => {
    for (const plots of [layOut(), layOut().slice(0, 3), layOut((plot) => ({ ...plot, value: 1 }))]) {
      const result = analyseTrial(plots, rcbd, { check: 'A' });
      expect(JSON.parse(JSON.stringify(result))).toEqual(result);
    }
  });
});
