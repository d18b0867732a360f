import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { dunnettAdjust, dunnettQuantile } from '#server/stats/distributions/dunnett.ts';
import { tQuantileUpper, tTwoSided } from '#server/stats/distributions/student-t.ts';
import { deviationOf } from '#tests/support/deviation.ts';

function productCorrelation(loadings: readonly number[]): number[][] {
  return loadings.map((a, i) => loadings.map((b, j) => (i === j ? 1 : a * b)));
}

function adjustAll(
  t: number,
  df: number,
  correlation: number[][],
): { p: number; maxError: number; method: string } {
  const { p, maxError, method } = dunnettAdjust({ ts: correlation.map(() => t), df, correlation });
  return { p: p[0] ?? Number.NaN, maxError, method };
}

const unequal = productCorrelation([0.3, 0.55, 0.8, 0.7, -0.5]);
const general = [
  [1, 0.55, 0.42, 0.3],
  [0.55, 1, 0.5, 0.36],
  [0.42, 0.5, 1, 0.61],
  [0.3, 0.36, 0.61, 1],
];
const twoClusters = [
  [1, 0.9, 0.1, 0.1, 0.1],
  [0.9, 1, 0.1, 0.1, 0.1],
  [0.1, 0.1, 1, 0.8, 0.8],
  [0.1, 0.1, 0.8, 1, 0.8],
  [0.1, 0.1, 0.8, 0.8, 1],
];

// R 4.2.2, mvtnorm 1.1.3: 1 − pmvnorm or pmvt, GenzBretz(maxpts = 4e6, abseps = 1e-8); last column its stated error.
describe('against mvtnorm', () => {
  test.each([
    [1.8, Infinity, 0.279838734, 3.9e-8],
    [1.8, 9, 0.3504350488, 4.6e-7],
    [2.6, Infinity, 0.04267705577, 1.7e-7],
    [2.6, 9, 0.1100881099, 4.7e-7],
  ])('one shared factor, unequal loadings: t = %d, df = %d', (t, df, expected, error) => {
    const { p, method } = adjustAll(t, df, unequal);
    expect(method).toBe('product-form');
    expect(Math.abs(p - expected)).toBeLessThan(error);
  });

  test.each([
    [1.5, Infinity, general, 0.3730017576],
    [1.5, 9, general, 0.4235672111],
    [2.6, Infinity, general, 0.03295694674],
    [2.6, 9, general, 0.08686451372],
    [1.5, Infinity, twoClusters, 0.3754558939],
    [2.6, Infinity, twoClusters, 0.03396595308],
  ])('any correlation keeps within its stated error: t = %d, df = %d', (t, df, correlation, expected) => {
    const { p, maxError } = adjustAll(t, df, correlation);
    expect(Math.abs(p - expected)).toBeLessThan(maxError);
    expect(maxError).toBeLessThan(5e-4);
  });
});

test('one comparison is a t test, two fully independent ones multiply at infinite df', () => {
  expect(deviationOf(adjustAll(2.3, 11.4, [[1]]).p, tTwoSided(2.3, 11.4))).toBeLessThan(1e-11);
  const single = tTwoSided(2.3, Infinity);
  const both = adjustAll(2.3, Infinity, productCorrelation([0, 0])).p;
  expect(deviationOf(both, 1 - (1 - single) ** 2)).toBeLessThan(1e-11);
  expect(dunnettQuantile({ alpha: 0.05, df: 11.4, correlation: [[1]] })).toBeCloseTo(
    tQuantileUpper(0.025, 11.4),
    10,
  );
});

test('lies between the unadjusted p and Bonferroni’s, whatever the correlations', () => {
  const loading = fc.double({ min: -0.95, max: 0.95, noNaN: true });
  fc.assert(
    fc.property(
      fc.array(loading, { minLength: 2, maxLength: 12 }),
      fc.double({ min: 0, max: 9, noNaN: true }),
      fc.double({ min: 2, max: 200, noNaN: true }),
      (loadings, t, df) => {
        const { p } = adjustAll(t, df, productCorrelation(loadings));
        const unadjusted = tTwoSided(t, df);
        expect(p).toBeGreaterThan(unadjusted * (1 - 1e-8));
        expect(p).toBeLessThan(unadjusted * loadings.length * (1 + 1e-8));
      },
    ),
    { numRuns: 40 },
  );
});

test('signs of the estimates do not matter, their order does', () => {
  const ts = [2.9, -1.1, 0.4, -3.3, 2];
  const { p } = dunnettAdjust({ ts, df: 20, correlation: unequal });
  const mirrored = dunnettAdjust({ ts: ts.map((t) => -t), df: 20, correlation: unequal });
  expect([...mirrored.p]).toEqual([...p]);
  expect([...p].map((_, i) => i).sort((i, j) => (p[i] ?? 0) - (p[j] ?? 0))).toEqual([3, 0, 4, 1, 2]);
});

test('each comparison may have its own df', () => {
  const { p } = dunnettAdjust({ ts: [2.5, 2.5], df: [6.5, 40], correlation: productCorrelation([0.7, 0.7]) });
  expect(p[0]).toBe(
    dunnettAdjust({ ts: [2.5, 2.5], df: 6.5, correlation: productCorrelation([0.7, 0.7]) }).p[0],
  );
  expect(p[0]).toBeGreaterThan((p[1] ?? 1) * 1.5);
});

test('the quantile undoes the adjustment, also where the expansion is corrected', () => {
  for (const correlation of [unequal, general]) {
    const d = dunnettQuantile({ alpha: 0.05, df: 14.2, correlation });
    expect(Math.abs(adjustAll(d, 14.2, correlation).p - 0.05)).toBeLessThan(1e-4);
  }
});

test('a far tail keeps its relative accuracy: nearly Bonferroni', () => {
  const { p } = adjustAll(20, 400, productCorrelation([0.7, 0.7, 0.7]));
  expect(deviationOf(p, 3 * tTwoSided(20, 400))).toBeLessThan(1e-3);
  expect(p).toBeGreaterThan(1e-70);
});

test('a gap without any error is certain, by every method', () => {
  for (const correlation of [unequal, general]) expect(adjustAll(Infinity, 9, correlation).p).toBe(0);
});

test('Dunnett’s d′ of the Erdman data', () => {
  // Steel & Torrie (1980), ch. 8: five against Composite, 24 df, MSE 11.789, r = 5, d′ 5.852.
  const d = dunnettQuantile({
    alpha: 0.05,
    df: 24,
    correlation: productCorrelation(Array(5).fill(Math.SQRT1_2)),
  });
  expect(d * Math.sqrt((2 * 11.789) / 5)).toBeCloseTo(5.852, 2);
});

test('impossible input is refused', () => {
  expect(() => adjustAll(2, 0, [[1]])).toThrow(RangeError);
  expect(() => adjustAll(Number.NaN, 5, [[1]])).toThrow(RangeError);
  expect(() =>
    adjustAll(2, 5, [
      [1, 1.2],
      [1.2, 1],
    ]),
  ).toThrow(RangeError);
  expect(() => dunnettAdjust({ ts: [1, 2], df: 5, correlation: [[1]] })).toThrow(RangeError);
  expect(() => dunnettQuantile({ alpha: 0, df: 5, correlation: [[1]] })).toThrow(RangeError);
});
