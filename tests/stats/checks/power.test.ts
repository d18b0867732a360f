import { expect, test } from 'vitest';
import { powerOfT, smallestShownDifference } from '#server/stats/checks/power.ts';
import { deviationOf } from '#tests/support/deviation.ts';

// R 4.2.2, power.t.test(n = 16, sd = 1.2, strict = TRUE): SE √(2/16) · 1.2, 30 df.
const se = 1.2 * Math.sqrt(2 / 16);

test('power of a two-sided t test as in R', () => {
  expect(deviationOf(powerOfT(1, se, 30, 0.05), 0.625960910578672)).toBeLessThan(1e-9);
  expect(powerOfT(-1, se, 30, 0.05)).toBe(powerOfT(1, se, 30, 0.05));
});

test('the smallest difference shown with power .8 as in R', () => {
  expect(deviationOf(smallestShownDifference({ se, df: 30 }), 1.22839649280159)).toBeLessThan(1e-8);
});

test('without a difference the power is the level; it grows with the difference', () => {
  expect(powerOfT(0, 1, 7.4, 0.1)).toBeCloseTo(0.1, 10);
  expect(powerOfT(3, 1, 7.4, 0.1)).toBeGreaterThan(powerOfT(2, 1, 7.4, 0.1));
});

test('it scales with the standard error, and few df ask for more', () => {
  const one = smallestShownDifference({ se: 1, df: 6 });
  expect(smallestShownDifference({ se: 2.5, df: 6 })).toBeCloseTo(2.5 * one, 9);
  expect(smallestShownDifference({ se: 1, df: 2 })).toBeGreaterThan(one);
  expect(powerOfT(one, 1, 6, 0.05)).toBeCloseTo(0.8, 9);
});

test('a level above the power, or no error, is refused', () => {
  expect(() => smallestShownDifference({ se: 1, df: 6, power: 0.04 })).toThrow(RangeError);
  expect(() => powerOfT(1, 0, 6, 0.05)).toThrow(RangeError);
});
