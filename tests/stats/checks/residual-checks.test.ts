import { describe, expect, test } from 'vitest';
import { brownForsythe } from '#server/stats/checks/brown-forsythe.ts';
import { shapiroWilk } from '#server/stats/checks/shapiro-wilk.ts';
import { studentiseResiduals } from '#server/stats/checks/studentised.ts';
import { deviationOf } from '#tests/support/deviation.ts';
import { type Expected, readReferenceJson, readReferenceRows } from '#tests/support/reference-case.ts';

// Residuals, leverages and results of R 4.2.2 (lm, shapiro.test, car::leveneTest(center = median), rstudent).
const cases = [
  '01-crd-plantgrowth',
  '02-crd-unbalanced-chickwts',
  '03-rcbd-immer',
  '04-rcbd-missing-3of60',
  '05-latin-orchardsprays',
  '12c-entry-all-missing',
];

interface CaseResiduals {
  readonly diagnostics: Expected;
  readonly residuals: number[];
  readonly leverages: number[];
  readonly plots: readonly Record<string, string>[];
  readonly residualDf: number;
}

function readResiduals(name: string): CaseResiduals {
  const expected = readReferenceJson(`open/${name}/expected.json`);
  const diagnostics = expected['diagnostics'] as Expected;
  const rows = [...(diagnostics['residuals'] as Expected)];
  const plots = readReferenceRows(`open/${name}/plots.csv`);
  return {
    diagnostics,
    residuals: rows.map((row) => Number(row['residual'])),
    leverages: rows.map((row) => Number(row['leverage'])),
    plots: rows.map((row) => plots.find((plot) => plot['plot'] === String(row['plot'])) ?? {}),
    residualDf: Number(expected['fit']?.['residual_df']),
  };
}

describe.each(cases)('%s', (name) => {
  const { diagnostics, residuals, leverages, plots, residualDf } = readResiduals(name);

  test('Shapiro–Wilk', () => {
    const result = shapiroWilk(residuals);
    if (!result.computed) throw new Error(result.reason);
    expect(deviationOf(result.w, diagnostics['shapiro_wilk']?.['W'])).toBeLessThan(1e-12);
    expect(deviationOf(result.p, diagnostics['shapiro_wilk']?.['p'])).toBeLessThan(1e-10);
  });

  test.each([
    ['brown_forsythe_residuals_by_entry', 'entry'],
    ['brown_forsythe_residuals_by_block', 'block'],
  ])('%s', (key, column) => {
    const expected = diagnostics[key];
    if (!expected) return;
    const groups = plots.map((plot) => plot[column] ?? plot['row'] ?? '');
    const result = brownForsythe(residuals, groups);
    if (!result.computed) throw new Error(result.reason);
    expect([result.df1, result.df2]).toEqual([expected['df1'], expected['df2']]);
    expect(deviationOf(result.f, expected['F'])).toBeLessThan(1e-10);
    expect(deviationOf(result.p, expected['p'])).toBeLessThan(1e-10);
  });

  test('externally studentised residuals', () => {
    const result = studentiseResiduals(residuals, leverages, residualDf);
    if (!result.computed) throw new Error(result.reason);
    const rows = [...(diagnostics['residuals'] as Expected)];
    rows.forEach((row, i) => expect(deviationOf(result.values[i], row['rstudent'])).toBeLessThan(1e-12));
    const expected = diagnostics['largest_externally_studentised'];
    expect(plots[result.largest.index]?.['plot']).toBe(String(expected?.['plot']));
    expect(deviationOf(result.largest.p, expected?.['p_unadjusted'])).toBeLessThan(1e-12);
    expect(deviationOf(result.largest.pBonferroni, expected?.['p_bonferroni'])).toBeLessThan(1e-12);
    expect(result.largest.tests).toBe(expected?.['n_tests']);
  });
});

describe('Shapiro–Wilk', () => {
  // R 4.2.2, shapiro.test; the first is the example of the test's first paper (Shapiro & Wilk 1965).
  test.each([
    [[148, 154, 158, 160, 161, 162, 166, 170, 182, 195, 236], 0.78881469483538735, 0.00670381405650293],
    [[1, 2, 4], 0.964285714285714, 0.636886845028963],
    [
      [0.1, 0.2, 0.3, 0.9, 1.4, 1.5, 7, 9, 11, 12, 13, 15, 16.5, 18, 21, 40, 41, 42],
      0.83256642314066298,
      0.00455174508923299,
    ],
  ])('%j', (values, w, p) => {
    const result = shapiroWilk(values);
    if (!result.computed) throw new Error(result.reason);
    expect(deviationOf(result.w, w)).toBeLessThan(1e-12);
    expect(deviationOf(result.p, p)).toBeLessThan(1e-10);
  });

  test('neither order, place nor unit matters', () => {
    const values = [3.1, 2.9, 4.4, 3.8, 3.3, 6.1, 2.2, 3.5];
    const moved = values.toReversed().map((value) => 1000 + 250 * value);
    const [plain, other] = [shapiroWilk(values), shapiroWilk(moved)];
    if (!plain.computed || !other.computed) throw new Error('not computed');
    expect(other.w).toBeCloseTo(plain.w, 12);
    expect(other.p).toBeCloseTo(plain.p, 10);
  });

  test('says why it has no result', () => {
    expect(shapiroWilk([1, 2])).toEqual({ computed: false, reason: 'too-few-values' });
    expect(shapiroWilk([2, 2, 2, 2])).toEqual({ computed: false, reason: 'no-spread' });
    expect(shapiroWilk(new Float64Array(5001))).toEqual({ computed: false, reason: 'too-many-values' });
  });
});

test('Brown–Forsythe says why it has no result', () => {
  expect(brownForsythe([1, 2, 3], ['a', 'a', 'a'])).toEqual({ computed: false, reason: 'one-group' });
  expect(brownForsythe([1, 2, 3], ['a', 'b', 'c'])).toEqual({ computed: false, reason: 'too-few-values' });
  expect(brownForsythe([1, 1, 3, 3], ['a', 'a', 'b', 'b'])).toEqual({ computed: false, reason: 'no-spread' });
});

test('a plot that the model fits exactly has no studentised residual, and no test is counted for it', () => {
  const result = studentiseResiduals([0, 2, -1, -2, 1], [1, 0.25, 0.25, 0.25, 0.25], 30);
  if (!result.computed) throw new Error(result.reason);
  expect(result.values[0]).toBeNull();
  expect(result.largest.tests).toBe(4);
  expect(result.largest.pBonferroni).toBe(Math.min(1, 4 * result.largest.p));
  expect(studentiseResiduals([1, -1], [0.5, 0.5], 1)).toEqual({ computed: false, reason: 'no-residual-df' });
  expect(studentiseResiduals([0, 0, 0], [0.3, 0.3, 0.3], 2)).toEqual({
    computed: false,
    reason: 'no-spread',
  });
});
