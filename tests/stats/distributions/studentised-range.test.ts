import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  studentisedRangeQuantileUpper,
  studentisedRangeUpper,
  tukeyAdjust,
} from '#server/stats/distributions/studentised-range.ts';
import { tTwoSided } from '#server/stats/distributions/student-t.ts';
import { deviationOf } from '#tests/support/deviation.ts';

// mpmath 1.3.0: nested quadrature in 18 digits. Fractional df, as Kenward–Roger gives them.
test.each([
  [4.2, 5, 7.35, 0.10350074398661],
  [3.5, 12, 61.8, 0.3745935472558],
  [14, 4, 27.46, 8.6797793277355e-10],
])('P(Q > %d) for k = %d, df = %d', (q, k, df, expected) => {
  expect(deviationOf(studentisedRangeUpper(q, k, df), expected)).toBeLessThan(1e-10);
});

test('of two values it is √2 |t|', () => {
  fc.assert(
    fc.property(
      fc.double({ min: 0, max: 40, noNaN: true }),
      fc.double({ min: 0.7, max: 1e5, noNaN: true }),
      (q, df) => {
        expect(deviationOf(studentisedRangeUpper(q, 2, df), tTwoSided(q / Math.SQRT2, df))).toBeLessThan(
          1e-9,
        );
      },
    ),
  );
});

test('falls with q, rises with k', () => {
  fc.assert(
    fc.property(
      fc.double({ min: 0.5, max: 20, noNaN: true }),
      fc.integer({ min: 2, max: 80 }),
      fc.double({ min: 1, max: 300, noNaN: true }),
      (q, k, df) => {
        const p = studentisedRangeUpper(q, k, df);
        expect(studentisedRangeUpper(q * 1.05, k, df)).toBeLessThanOrEqual(p * (1 + 1e-12));
        expect(studentisedRangeUpper(q, k + 1, df)).toBeGreaterThanOrEqual(p * (1 - 1e-12));
        expect(p).toBeGreaterThan(0);
      },
    ),
    { numRuns: 60 },
  );
});

test('the quantile undoes the tail', () => {
  const q = studentisedRangeQuantileUpper(0.05, 15, 39.2);
  expect(deviationOf(studentisedRangeUpper(q, 15, 39.2), 0.05)).toBeLessThan(1e-12);
});

test('does not round to 0 where p is still a number', () => {
  expect(studentisedRangeUpper(48, 30, 1000)).toBeGreaterThan(1e-300);
  expect(studentisedRangeUpper(48, 30, 1000)).toBeLessThan(1e-150);
});

describe('tukeyAdjust', () => {
  test('Steel & Torrie’s HSD of the Erdman data is where p crosses 5 %', () => {
    // Erdman 1946 in Steel & Torrie (1980), ch. 8: six treatments, 24 df, MSE 11.789, r = 5, HSD 6.714.
    const sed = Math.sqrt((2 * 11.789) / 5);
    const [below = 0, above = 0] = tukeyAdjust([6.715 / sed, 6.713 / sed], 6, 24);
    expect(below).toBeLessThan(0.05);
    expect(above).toBeGreaterThan(0.05);
  });

  test('many at once are as exact as one by one', () => {
    const ts = Float64Array.from({ length: 435 }, (_, i) => (i - 217) * 0.05);
    const together = tukeyAdjust(ts, 30, 41.7);
    ts.forEach((t, i) => {
      const alone = studentisedRangeUpper(Math.SQRT2 * Math.abs(t), 30, 41.7);
      expect(deviationOf(together[i], alone)).toBeLessThan(1e-10);
    });
  });
});

test('a range of one, no df, or no number is refused', () => {
  expect(() => studentisedRangeUpper(3, 1, 10)).toThrow(RangeError);
  expect(() => studentisedRangeUpper(3, 4, 0)).toThrow(RangeError);
  expect(() => studentisedRangeUpper(Number.NaN, 4, 10)).toThrow(RangeError);
});
