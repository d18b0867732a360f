import fc from 'fast-check';
import { expect, test } from 'vitest';
import { fUpper } from '#server/stats/distributions/f-distribution.ts';
import { normalUpper } from '#server/stats/distributions/normal.ts';
import { tPdf, tQuantile, tQuantileUpper, tTwoSided, tUpper } from '#server/stats/distributions/student-t.ts';
import { deviationOf } from '#tests/support/deviation.ts';

// mpmath 1.3.0, incomplete beta in 30 digits.
test.each([
  [2.3, 0.7, 0.16877269872841429],
  [3.1, 2.5, 0.033894189162460167],
  [8, 27.46, 5.9519833288245603e-9],
  [40, 33.3, 4.9180560679087935e-30],
  [1e6, 3, 1.1026577908396145e-18],
  [5, 2e6, 2.8667573189157315e-7],
  [30, 1.5e6, 5.6172949679500554e-198],
  [1e-3, 12.5, 0.49960894909694836],
])('P(T > %d) with %d df', (t, df, expected) => {
  expect(deviationOf(tUpper(t, df), expected)).toBeLessThan(1e-12);
});

test('one df is Cauchy, two df have a closed form, infinite df are normal', () => {
  expect(deviationOf(tUpper(50, 1), Math.atan(1 / 50) / Math.PI)).toBeLessThan(1e-14);
  expect(deviationOf(tUpper(3, 2), 0.5 - 3 / (2 * Math.sqrt(11)))).toBeLessThan(1e-13);
  expect(tUpper(3, Infinity)).toBe(normalUpper(3));
});

test('squared, it is F with one numerator df', () => {
  fc.assert(
    fc.property(
      fc.double({ min: 0, max: 50, noNaN: true }),
      fc.double({ min: 0.5, max: 500, noNaN: true }),
      (t, df) => {
        expect(deviationOf(tTwoSided(t, df), fUpper(t * t, 1, df))).toBeLessThan(1e-9);
      },
    ),
  );
});

test('the quantile undoes the tail', () => {
  fc.assert(
    fc.property(
      fc.double({ min: -200, max: -0.01, noNaN: true }),
      fc.double({ min: 0.3, max: 1e7, noNaN: true }),
      (logAlpha, df) => {
        const alpha = Math.exp(logAlpha);
        const t = tQuantileUpper(alpha, df);
        fc.pre(Number.isFinite(t) && Math.abs(t) < 1e100);
        expect(deviationOf(tUpper(t, df), alpha)).toBeLessThan(1e-9);
      },
    ),
    { numRuns: 500 },
  );
});

test('the lower tail mirrors the upper', () => {
  expect(tQuantile(0.025, 7.3)).toBe(-tQuantileUpper(0.025, 7.3));
  expect(tQuantile(0.5, 4)).toBe(-0);
  expect(tUpper(-2, 9) + tUpper(2, 9)).toBeCloseTo(1, 15);
});

test('the density is the slope of the tail', () => {
  const slope = (tUpper(1.2 - 1e-5, 6.6) - tUpper(1.2 + 1e-5, 6.6)) / 2e-5;
  expect(tPdf(1.2, 6.6)).toBeCloseTo(slope, 8);
});

test('a tail has no df of 0, and a t is a number', () => {
  expect(() => tUpper(1, 0)).toThrow(RangeError);
  expect(() => tUpper(Number.NaN, 4)).toThrow(RangeError);
  expect(() => tQuantileUpper(0, 4)).toThrow(RangeError);
});
