import { expect, test } from 'vitest';
import { dunnettQuantile } from '#server/stats/distributions/dunnett.ts';
import { fQuantileUpper, fUpper } from '#server/stats/distributions/f-distribution.ts';
import { oneSidedDunnettQuantile } from '#server/stats/distributions/one-sided-dunnett.ts';
import { powerOfF } from '#server/stats/distributions/noncentral-f.ts';
import { tQuantile, tTwoSided, tUpper } from '#server/stats/distributions/student-t.ts';
import {
  studentisedRangeQuantile,
  studentisedRangeUpper,
} from '#server/stats/distributions/studentised-range.ts';
import { deviationOf } from '#tests/support/deviation.ts';
import { readReferenceJson } from '#tests/support/reference-case.ts';

// R 4.2.2; where R itself is not exact, quadrature: see the file's `source` and its script.
const grids = readReferenceJson('open/distributions.json');

type Row = Readonly<Record<string, number>>;

/** The row of a grid on which a function is farthest from R, and how far. */
function worstRow(grid: string, deviation: (row: Row) => number): { deviation: number; row?: Row } {
  const rows = grids[grid] as unknown as readonly Row[];
  return rows.reduce<{ deviation: number; row?: Row }>(
    (worst, row) => {
      const own = deviation(row);
      return own > worst.deviation || Number.isNaN(own) ? { deviation: own, row } : worst;
    },
    { deviation: -1 },
  );
}

function equalCorrelation(m: number, rho: number): number[][] {
  return Array.from({ length: m }, (_, i) => Array.from({ length: m }, (__, j) => (i === j ? 1 : rho)));
}

const named = (row: Row, ...names: string[]): number[] => names.map((name) => row[name] ?? Number.NaN);

test.each<[string, number, (row: Row) => number]>([
  ['f_upper', 1e-12, (row) => deviationOf(fUpper(...three(row, 'F', 'df1', 'df2')), row['upper'])],
  ['f_far_tail', 1e-12, (row) => deviationOf(fUpper(...three(row, 'F', 'df1', 'df2')), row['upper'])],
  [
    'f_far_tail',
    1e-12,
    (row) => deviationOf(fQuantileUpper(...three(row, 'p_upper', 'df1', 'df2')), row['F']),
  ],
  ['t', 1e-12, (row) => deviationOf(tUpper(...two(row, 't', 'df')), row['upper'])],
  ['t', 1e-12, (row) => deviationOf(tTwoSided(...two(row, 't', 'df')), row['two_sided'])],
  ['t_quantile', 1e-12, (row) => deviationOf(tQuantile(...two(row, 'p', 'df')), row['q'], 1e-3)],
  [
    'tukey',
    1e-10,
    (row) => deviationOf(studentisedRangeUpper(...three(row, 'q', 'k', 'df')), row['upper_acc']),
  ],
  [
    'tukey_quantile',
    1e-10,
    (row) => deviationOf(studentisedRangeQuantile(...three(row, 'p', 'k', 'df')), row['q_acc']),
  ],
  [
    'noncentral_f_power',
    1e-12,
    (row) => deviationOf(powerOfF(...four(row, 'alpha', 'df1', 'df2', 'ncp')), row['power_series']),
  ],
])('%s within %d of R, relative', (grid, tolerance, deviation) => {
  const worst = worstRow(grid, deviation);
  expect(worst.deviation, JSON.stringify(worst.row)).toBeLessThan(tolerance);
});

test.each(['dunnett_quantile', 'dunnett_other_rho'])('%s, two-sided', (grid) => {
  const worst = worstRow(grid, (row) => {
    const [p = 0, df = 0, m = 0, rho = 0] = named(row, 'p', 'df', 'comparisons', 'rho');
    return deviationOf(
      dunnettQuantile({ alpha: 1 - p, df, correlation: equalCorrelation(m, rho) }),
      row['two_sided'],
    );
  });
  expect(worst.deviation, JSON.stringify(worst.row)).toBeLessThan(1e-9);
});

test('dunnett_quantile, one-sided', () => {
  const worst = worstRow('dunnett_quantile', (row) => {
    const [p = 0, df = 0, m = 0, rho = 0] = named(row, 'p', 'df', 'comparisons', 'rho');
    return deviationOf(oneSidedDunnettQuantile(1 - p, df, equalCorrelation(m, rho)), row['one_sided']);
  });
  expect(worst.deviation, JSON.stringify(worst.row)).toBeLessThan(1e-9);
});

function two(row: Row, a: string, b: string): [number, number] {
  const [x = 0, y = 0] = named(row, a, b);
  return [x, y];
}

function three(row: Row, a: string, b: string, c: string): [number, number, number] {
  return [...two(row, a, b), ...named(row, c)] as [number, number, number];
}

function four(row: Row, a: string, b: string, c: string, d: string): [number, number, number, number] {
  return [...two(row, a, b), ...two(row, c, d)];
}
