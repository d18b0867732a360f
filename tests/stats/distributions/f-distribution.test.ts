import fc from 'fast-check';
import { expect, test } from 'vitest';
import { chiSquareUpper } from '#server/stats/distributions/chi-square.ts';
import { fQuantileUpper, fUpper } from '#server/stats/distributions/f-distribution.ts';
import { normalUpper } from '#server/stats/distributions/normal.ts';
import { deviationOf } from '#tests/support/deviation.ts';

test('the quantile undoes the tail', () => {
  fc.assert(
    fc.property(
      fc.double({ min: -60, max: -0.05, noNaN: true }),
      fc.double({ min: 0.5, max: 200, noNaN: true }),
      fc.double({ min: 2, max: 500, noNaN: true }),
      (logAlpha, df1, df2) => {
        const alpha = Math.exp(logAlpha);
        expect(deviationOf(fUpper(fQuantileUpper(alpha, df1, df2), df1, df2), alpha)).toBeLessThan(1e-10);
      },
    ),
  );
});

test('the tail of 1/F is the other tail', () => {
  expect(fUpper(2.5, 4.5, 17) + fUpper(1 / 2.5, 17, 4.5)).toBeCloseTo(1, 13);
});

test('with infinite denominator df it is a mean square: χ²/df', () => {
  expect(fUpper(3, 5, Infinity)).toBe(chiSquareUpper(15, 5));
  expect(deviationOf(fUpper(3, 5, 1e7), chiSquareUpper(15, 5))).toBeLessThan(1e-5);
  expect(deviationOf(chiSquareUpper(36, 1), 2 * normalUpper(6))).toBeLessThan(1e-13);
});

test('the ends', () => {
  expect(fUpper(0, 3, 10)).toBe(1);
  expect(fUpper(Infinity, 3, 10)).toBe(0);
  expect(() => fUpper(2, 0, 10)).toThrow(RangeError);
  expect(() => fUpper(Number.NaN, 3, 10)).toThrow(RangeError);
});
