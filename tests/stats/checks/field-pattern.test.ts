import { expect, test } from 'vitest';
import type { ModelResiduals } from '#server/stats/checks/added-covariate.ts';
import { fieldTrend } from '#server/stats/checks/field-trend.ts';
import { moranI } from '#server/stats/checks/moran.ts';
import { nonAdditivity } from '#server/stats/checks/non-additivity.ts';
import { deviationOf } from '#tests/support/deviation.ts';
import { readReferenceRows } from '#tests/support/reference-case.ts';

/** Subtracts group means: the residuals of a one-way layout. */
function withoutGroupMeans(values: ArrayLike<number>, groups: readonly string[]): Float64Array {
  const own = Float64Array.from(values);
  return own.map((value, i) => {
    const members = own.filter((_, j) => groups[j] === groups[i]);
    return value - members.reduce((sum, member) => sum + member, 0) / members.length;
  });
}

function oneWayModel(values: readonly number[], groups: readonly string[]): ModelResiduals {
  return {
    residuals: withoutGroupMeans(values, groups),
    residualDf: values.length - new Set(groups).size,
    residualise: (vector) => withoutGroupMeans(vector, groups),
  };
}

// Cochran & Cox (1957), potato scab: six sulphur treatments and none, completely randomised, on a map of 4 × 8 plots.
const scab = readReferenceRows('published/cochran.crd.csv');
const scabModel = oneWayModel(
  scab.map((plot) => Number(plot['inf'])),
  scab.map((plot) => plot['trt'] ?? ''),
);
const rows = scab.map((plot) => Number(plot['row']));
const columns = scab.map((plot) => Number(plot['col']));

test('Moran’s I of residuals as spdep finds it', () => {
  // R 4.2.2, spdep::lm.morantest(lm(inf ~ trt), mat2listw(rook, style = "B")).
  const result = moranI(scabModel, rows, columns);
  if (!result.computed) throw new Error(result.reason);
  expect(deviationOf(result.i, 0.33964154514082157)).toBeLessThan(1e-12);
  expect(deviationOf(result.expected, -0.00307692307692308)).toBeLessThan(1e-12);
  expect(deviationOf(result.variance, 0.015953714661406972)).toBeLessThan(1e-12);
  expect(deviationOf(result.z, 2.71335487403571)).toBeLessThan(1e-12);
  expect(deviationOf(result.p, 0.00333028678165245)).toBeLessThan(1e-11);
});

test('a chessboard of residuals is as far from clustered as can be', () => {
  const side = Array.from({ length: 36 }, (_, i) => i);
  const values = side.map((i) => ((Math.floor(i / 6) + i) % 2 === 0 ? 1 : -1));
  const model = oneWayModel(
    values,
    side.map(() => 'all'),
  );
  const result = moranI(
    model,
    side.map((i) => Math.floor(i / 6)),
    side.map((i) => i % 6),
  );
  if (!result.computed) throw new Error(result.reason);
  expect(result.i).toBeCloseTo(-1, 12);
  expect(result.p).toBeGreaterThan(0.9999);
});

test('Moran’s I says why it has no result', () => {
  const apart = scab.map((_, i) => 2 * i);
  expect(moranI(scabModel, apart, apart)).toEqual({ computed: false, reason: 'no-neighbours' });
  expect(moranI({ ...scabModel, residualDf: 1 }, rows, columns)).toEqual({
    computed: false,
    reason: 'no-residual-df',
  });
});

test('trend along rows and columns as in the analysis of covariance', () => {
  // R 4.2.2, summary(lm(inf ~ trt + row)) and (inf ~ trt + col).
  const { row, column } = fieldTrend(scabModel, rows, columns);
  if (!row.computed || !column.computed) throw new Error('not computed');
  expect(deviationOf(row.slope, 0.233333333333332)).toBeLessThan(1e-11);
  expect(deviationOf(row.p, 0.836144682660435)).toBeLessThan(1e-10);
  expect(deviationOf(column.slope, 1.2087227414330226)).toBeLessThan(1e-12);
  expect(deviationOf(column.f, 2.5169220443547924 ** 2)).toBeLessThan(1e-11);
  expect(deviationOf(column.p, 0.0189266237437602)).toBeLessThan(1e-10);
  expect(column.df2).toBe(24);
});

test('a trend that the model already holds cannot be tested', () => {
  const columnModel = oneWayModel(
    scab.map((plot) => Number(plot['inf'])),
    columns.map(String),
  );
  // Thirds leave rounding behind where whole columns would leave exact zeros.
  const thirds = columns.map((column) => column / 3);
  expect(fieldTrend(columnModel, rows, thirds).column).toEqual({ computed: false, reason: 'confounded' });
});

test('Tukey’s one degree of freedom in the seed-rate trial', () => {
  // Gomez & Gomez (1984), p. 26; R 4.2.2, anova(lm(yield ~ rep + rate + fitted², …)): F 1.21378, p 0.2891647.
  const plots = readReferenceRows('published/gomez.seedrate.csv');
  const yields = Float64Array.from(plots, (plot) => Number(plot['yield']));
  const labels = (column: string) => plots.map((plot) => plot[column] ?? '');
  const residualise = (vector: ArrayLike<number>) =>
    withoutGroupMeans(withoutGroupMeans(vector, labels('rep')), labels('rate'));
  const residuals = residualise(yields);
  const model = { residuals, residualDf: 15, residualise };
  const fitted = yields.map((value, i) => value - (residuals[i] ?? 0));
  const result = nonAdditivity(model, fitted);
  if (!result.computed) throw new Error(result.reason);
  expect(result.df2).toBe(14);
  expect(result.f).toBeCloseTo(1.21378, 5);
  expect(result.p).toBeCloseTo(0.2891647, 7);
  const shifted = nonAdditivity(
    model,
    fitted.map((value) => value + 1e10),
  );
  if (!shifted.computed) throw new Error(shifted.reason);
  expect(shifted.f).toBeCloseTo(result.f, 5);
});
