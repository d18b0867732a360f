import { describe, expect, it } from 'vitest';
import { analyseStability, type StabilityAnalysis } from '#server/stats/network/stability.ts';
import type { EnvironmentMean } from '#server/stats/network/two-way-analysis.ts';
import { fUpper } from '#server/stats/distributions/f-distribution.ts';
import { DeviationLog } from '#tests/support/deviation.ts';
import { readNetworkCase } from '#tests/support/network-case.ts';
import { readReferenceRows } from '#tests/support/reference-case.ts';

function readTable(name: string): EnvironmentMean[] {
  return readReferenceRows(`open/${name}/plots.csv`).map((row) => ({
    entry: row['entry']!,
    environment: row['env']!,
    mean: Number(row['yield']),
  }));
}

function analyse(table: readonly EnvironmentMean[]): StabilityAnalysis {
  const result = analyseStability(table);
  if (result.outcome === 'not-analysed') throw new Error(result.reason);
  return result;
}

// Expected figures: formulas by hand in R, checked with lm, tests/reference/scripts/F-stability.R.
describe.each(['F-stability-barley', 'F-stability-sim10x12'])('%s', (name) => {
  const expected = readNetworkCase(name);
  const result = analyse(readTable(name));

  it('indexes environments by their means', () => {
    const index = new Map(result.environments.map((row) => [row.environment, row.index]));
    for (const row of expected['environment_index']!)
      expect(index.get(String(row['env']))).toBeCloseTo(Number(row['index']), 10);
  });

  it('agrees in slopes, ecovalence and Shukla’s variance', () => {
    const log = new DeviationLog();
    // 'entries' is also a method of arrays
    const rows = expected['entries' as string]!;
    result.entries.forEach((entry, i) => {
      const row = rows[i]!;
      expect(entry.entry).toBe(row['entry']);
      log.note('mean', entry.mean, row['mean']);
      log.note('slope', entry.response?.slope, row['slope']);
      log.note('se', entry.response?.se, row['slope_se']);
      log.note('p', entry.response?.p, row['p_slope_eq_1']);
      log.note('deviation', entry.response?.deviationMs, row['deviation_ms']);
      log.note('r2', entry.response?.r2, row['r2']);
      log.note('ecovalence', entry.ecovalence, row['ecovalence']);
      log.note('percent', entry.ecovalencePercent, row['ecovalence_pct']);
      log.note('shukla', entry.shuklaVariance, row['shukla_variance'], 0.01);
    });
    expect(Math.max(...Object.values(log.largest))).toBeLessThan(1e-9);
  });

  it('tests whether slopes differ', () => {
    const { anova } = expected;
    const ss = Number(anova!['ss_heterogeneity_of_slopes']);
    const df = Number(anova!['df_heterogeneity']);
    const denDf = Number(anova!['df_deviations']);
    const f = ss / df / (Number(anova!['ss_deviations']) / denDf);
    expect(result.heterogeneity!.ss / ss).toBeCloseTo(1, 9);
    expect(result.heterogeneity!.f / f).toBeCloseTo(1, 9);
    expect(result.heterogeneity!.p / fUpper(f, df, denDf)).toBeCloseTo(1, 7);
  });
});

describe('tables with holes', () => {
  const table = readTable('F-stability-sim10x12');

  it('keeps slopes near those of the whole table and withholds what needs a whole one', () => {
    const whole = analyse(table);
    const holed = analyse(table.filter((_, i) => i % 7 !== 0));
    expect(holed.isComplete).toBe(false);
    expect(holed.heterogeneity).toBeNull();
    holed.entries.forEach(({ response, shuklaVariance }, i) => {
      expect(shuklaVariance).toBeNull();
      expect(response!.slope).toBeCloseTo(whole.entries[i]!.response!.slope, 0);
    });
  });

  it('compares nothing across environments that share no entry', () => {
    const apart = table.map((cell, i) => (i < 60 ? cell : { ...cell, entry: `${cell.entry} again` }));
    expect(analyseStability(apart)).toEqual({ outcome: 'not-analysed', reason: 'disconnected' });
  });
});
