import { describe, expect, it } from 'vitest';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import { designKinds } from '#server/stats/trial/trial-data.ts';
import { DeviationLog } from '#tests/support/deviation.ts';
import {
  readReferenceJson,
  readReferenceRows,
  toPlots,
  type CaseColumns,
} from '#tests/support/reference-case.ts';

const columns: Record<string, CaseColumns> = {
  'incomplete-blocks': { rep: 'rep', block: 'block' },
  'row-column': { rep: 'rep', row: 'row', col: 'col' },
  'split-plot': { block: 'block', main: 'harvest', sub: 'sow' },
  factorial: { block: 'block', factors: ['a', 'b'] },
  'latin-square': { row: 'row', col: 'col' },
};

/** lmer's optimiser leaves about 1e-7 in the variances, and more where p is far in the tail; lm is exact. */
const mixedTolerance = 1e-5;
const fixedTolerance = 1e-9;

const cases = readReferenceJson('unbalanced/expected.json')['cases']!;

describe.each(Object.keys(cases))('%s against R (tests/reference/scripts/unbalanced.R)', (name) => {
  const expected = cases[name]!;
  const kind = designKinds.find((one) => one === String(expected['kind']))!;
  const plots = toPlots(readReferenceRows(`unbalanced/${name}.csv`), columns[kind]!);
  const actual = analyseTrial(plots, {
    kind,
    factors: ['a', 'b'],
    termNames: { main: 'harvest', sub: 'sow' },
  });
  const tolerance = actual.fit.method === 'reml' ? mixedTolerance : fixedTolerance;

  it('has its components and its analysis of variance', () => {
    const log = new DeviationLog();
    const total = actual.fit.components.reduce((sum, one) => sum + one.variance, 0);
    for (const row of expected['components'] ?? []) {
      const own = actual.fit.components.find((one) => one.name === String(row['name']).toLowerCase());
      log.note('component', own?.variance, row['variance'], 1e-4 * total);
    }
    for (const row of expected['anova']!) {
      const term = String(row['term']) === 'Residuals' ? 'residual' : String(row['term']);
      const own = actual.anova.find((one) => one.term === term);
      for (const key of ['df', 'f', 'p'] as const) log.note(key, own?.[key], row[key] ?? null);
      if (row['denDf'] !== undefined) log.note('denDf', own?.denDf, row['denDf']);
      if (row['ss'] !== undefined) log.note('ss', own?.ss, row['ss']);
    }
    expect(Object.entries(log.largest).filter(([, value]) => !(value < tolerance))).toEqual([]);
  });

  it('has its means and gaps of every family', () => {
    const log = new DeviationLog();
    for (const [family, table] of Object.entries(expected['families']!)) {
      const own = family === 'own' ? actual : actual.factors[family]!;
      for (const row of table['means']!) {
        const mean = own.means.find((one) => one.entry === String(row['entry']));
        for (const key of ['mean', 'se', 'df'] as const) log.note(key, mean?.[key], row[key]);
      }
      for (const row of table['gaps']!) {
        const gap = own.gaps.find((one) => one.a === String(row['a']) && one.b === String(row['b']));
        log.note('estimate', gap?.estimate, row['estimate'], gap?.se ?? 0);
        for (const key of ['se', 'df', 'p'] as const) log.note(key, gap?.[key], row[key]);
      }
    }
    expect(Object.entries(log.largest).filter(([, value]) => !(value < tolerance))).toEqual([]);
  });
});
