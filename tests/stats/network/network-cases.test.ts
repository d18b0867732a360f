import { describe, expect, it } from 'vitest';
import { combineTrials, type CombinedTrials } from '#server/stats/network/combine-trials.ts';
import type { TrialCell } from '#server/stats/network/network-cell.ts';
import { DeviationLog } from '#tests/support/deviation.ts';
import { readBarley, readBigNetwork, readNetworkCase, toCells } from '#tests/support/network-case.ts';
import type { Expected } from '#tests/support/reference-case.ts';

// Every expected figure: R 4.2.2 with metafor, lme4 and pbkrtest, tests/reference/scripts/<case>.R.

function combine(cells: readonly TrialCell[]): CombinedTrials {
  const result = combineTrials(cells, { penalty: 0 });
  if (result.outcome === 'not-fitted') throw new Error(result.reason);
  return result;
}

function compareGaps(
  result: CombinedTrials,
  rows: Expected,
  columns: { se?: string; df?: string; modelSe?: string; p?: string },
): DeviationLog {
  const log = new DeviationLog();
  const gapOf = new Map(result.gaps.map((gap) => [`${gap.a}|${gap.b}`, gap]));
  for (const row of rows) {
    const gap = gapOf.get(`${String(row['a'])}|${String(row['b'])}`);
    log.note('estimate', gap?.estimate, row['estimate'], 0.1);
    for (const [figure, column] of Object.entries(columns))
      log.note(figure, gap?.[figure as 'se' | 'df' | 'modelSe' | 'p'], row[column]);
  }
  return log;
}

function compareMeans(result: CombinedTrials, rows: Expected): DeviationLog {
  const log = new DeviationLog();
  const meanOf = new Map(result.means.map((mean) => [mean.entry, mean]));
  for (const row of rows) {
    const mean = meanOf.get(String(row['entry']));
    log.note('mean', mean?.estimate, row['emmean']);
    log.note('se', mean?.se, row['se']);
    log.note('environments', mean?.environments, row['n_env']);
  }
  return log;
}

describe('A: barley, ten varieties at six sites in two years', () => {
  const { mixed } = readNetworkCase('A-barley');
  const result = combine(readBarley());

  it('finds the variances of lmer, where environments are fixed instead of random', () => {
    const variance = Object.fromEntries(
      Array.from(mixed!['varcomp']!, (row) => [String(row['component']), Number(row['variance'])]),
    );
    expect(result.fit.components.site).toBeCloseTo(variance['entry:site']!, 6);
    expect(result.fit.components.year).toBeCloseTo(variance['entry:year']!, 6);
    expect(result.fit.components.rest).toBeCloseTo(variance['residual']!, 6);
  });

  it('gives every gap with the standard error, df and p of Kenward and Roger', () => {
    const { largest } = compareGaps(result, mixed!['pairwise']!, { se: 'se_kr', df: 'df_kr', p: 'p_kr' });
    expect(largest['estimate']).toBeLessThan(1e-9);
    expect(largest['se']).toBeLessThan(1e-9);
    expect(largest['df']).toBeLessThan(1e-9);
    expect(largest['p']).toBeLessThan(1e-8);
  });
});

describe.each([
  { name: 'own error variance of each trial', key: 'two_stage_env_specific_variance', isPooled: false },
  { name: 'pooled error variance', key: 'two_stage_pooled_variance', isPooled: true },
])('C: a balanced network of one season, $name', ({ key, isPooled }) => {
  const expected = readNetworkCase('C-network-balanced-open');
  const cells = toCells(expected['stage1']!).map((cell) =>
    isPooled ? { ...cell, variance: Number(expected['pooled_error_ms']) / 3 } : cell,
  );
  const part = expected[key]!;
  const result = combine(cells);

  it('keeps one variance, since site and season cannot be told from others', () => {
    expect(result.fit.dropped.toSorted()).toEqual(['site', 'year']);
    expect(result.fit.components.site).toBe(0);
    expect(result.fit.components.year).toBe(0);
    expect(result.fit.components.rest).toBeCloseTo(Number(part['components']![0]!['variance']), 8);
    expect(result.fit.logLik).toBeCloseTo(Number(part['logLik_REML_metafor']), 9);
  });

  it('agrees in means and gaps', () => {
    const means = compareMeans(result, part['emmeans']!);
    expect(means.largest['mean']).toBeLessThan(1e-10);
    expect(means.largest['se']).toBeLessThan(1e-9);
    const gaps = compareGaps(result, part['pairwise']!, {
      se: 'se_kr_known_v',
      df: 'df_kr_known_v',
      modelSe: 'se',
    });
    expect(gaps.largest['estimate']).toBeLessThan(1e-9);
    expect(gaps.largest['se']).toBeLessThan(1e-9);
    expect(gaps.largest['modelSe']).toBeLessThan(1e-9);
    expect(gaps.largest['df']).toBeLessThan(1e-9);
  });
});

describe('D: thirty entries, eight sites, three seasons, most cells empty', () => {
  const expected = readNetworkCase('D-network-unbalanced-open');
  const cells = toCells(expected['stage1']!);
  const part = expected['two_stage_diagonal_V']!;
  const result = combine(cells);

  it('finds the variances and the likelihood of rma.mv', () => {
    const components = Array.from(part['components']!, (row) => Number(row['variance']));
    const { site, year, rest } = result.fit.components;
    const total = components.reduce((sum, x) => sum + x, 0);
    [site, year, rest].forEach((value, k) =>
      expect(Math.abs(value - components[k]!) / total).toBeLessThan(1e-8),
    );
    expect(result.fit.logLik).toBeCloseTo(Number(part['logLik_REML_metafor']), 9);
    expect(result.fit.dropped).toEqual([]);
  });

  it('agrees in 30 means and 435 gaps', () => {
    const means = compareMeans(result, part['emmeans']!);
    expect(means.largest['mean']).toBeLessThan(1e-8);
    expect(means.largest['se']).toBeLessThan(1e-8);
    const gaps = compareGaps(result, part['pairwise']!, {
      se: 'se_kr_known_v',
      df: 'df_kr_known_v',
      modelSe: 'se',
    });
    expect(result.gaps).toHaveLength(435);
    expect(gaps.largest['estimate']).toBeLessThan(1e-8);
    expect(gaps.largest['se']).toBeLessThan(1e-8);
    expect(gaps.largest['modelSe']).toBeLessThan(1e-8);
    expect(gaps.largest['df']).toBeLessThan(1e-7);
  });

  it('agrees with one variance for the cell, where sites and seasons are not told apart', () => {
    const single = combine(
      cells.map((cell) => ({ ...cell, site: `${cell.site} ${cell.year}`, year: 'any' })),
    );
    const cell = expected['two_stage_diagonal_V_cell_component_only']!;
    expect(single.fit.components.rest).toBeCloseTo(Number(cell['components']![0]!['variance']), 8);
    expect(compareMeans(single, cell['emmeans']!).largest['mean']).toBeLessThan(1e-8);
  });
});

describe('the big network: 6,000 cells, 200 environments', () => {
  const part = readNetworkCase('big-network')['known_variance']!;
  const result = combine(readBigNetwork());

  it('agrees with sparse REML in R, which stopped at seven digits', () => {
    const components = Array.from(part['components']!, (row) => Number(row['variance']));
    const { site, year, rest } = result.fit.components;
    [site, year, rest].forEach((value, k) => expect(value / components[k]!).toBeCloseTo(1, 6));
    expect(result.fit.logLik).toBeCloseTo(Number(part['logLik_REML_metafor_form']), 7);
    const means = compareMeans(result, part['emmeans']!);
    expect(means.largest['mean']).toBeLessThan(1e-8);
    expect(means.largest['se']).toBeLessThan(1e-6);
    const gaps = compareGaps(result, part['pairwise']!, { modelSe: 'se' });
    expect(gaps.largest['estimate']).toBeLessThan(1e-7);
    expect(gaps.largest['modelSe']).toBeLessThan(1e-6);
  });
});
