import { expect, test } from 'vitest';
import { findRoot, findUpperQuantile } from '#server/stats/distributions/find-root.ts';

test('finds a root however flat the function is there', () => {
  expect(findRoot((x) => x ** 3 - 2, 0, 8)).toBeCloseTo(Math.cbrt(2), 12);
  expect(findRoot((x) => (x - 1) ** 9, -3, 4)).toBeCloseTo(1, 1);
  expect(findRoot((x) => x, 0, 5)).toBe(0);
});

test('without a change of sign there is nothing to find', () => {
  expect(() => findRoot((x) => x * x + 1, -1, 1)).toThrow(RangeError);
});

test('a quantile is found from starts far off on either side', () => {
  for (const start of [1e-6, 1, 1e4]) {
    expect(findUpperQuantile((x) => Math.exp(-x), 1e-40, start)).toBeCloseTo(40 * Math.LN10, 9);
  }
});
