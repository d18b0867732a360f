import fc from 'fast-check';
import { expect, test } from 'vitest';
import { normalCdf, normalQuantile, normalUpper } from '#server/stats/distributions/normal.ts';
import { deviationOf } from '#tests/support/deviation.ts';

// mpmath 1.3.0, erfc in 30 digits; both sides of each switch of the approximation.
test.each([
  [-3, 0.99865010196836991],
  [0.5, 0.3085375387259869],
  [0.67, 0.2514288950953101],
  [0.68, 0.24825223045357051],
  [3, 0.0013498980316300945],
  [5.6, 1.0717590258310929e-8],
  [5.7, 5.9903714010635282e-9],
  [10, 7.6198530241605261e-24],
  [20, 2.7536241186062337e-89],
  [37, 5.7255712225245768e-300],
])('P(Z > %d)', (x, expected) => {
  expect(deviationOf(normalUpper(x), expected)).toBeLessThan(2e-15);
});

test('the quantile undoes the distribution, in relative terms in the tail', () => {
  fc.assert(
    fc.property(fc.double({ min: -37, max: -0.5, noNaN: true }), (x) => {
      expect(deviationOf(normalQuantile(normalCdf(x)), x)).toBeLessThan(2e-14);
    }),
    { numRuns: 500 },
  );
});

test('symmetric, with the ends of the line at the ends of the scale', () => {
  expect(normalUpper(0)).toBe(0.5);
  expect(normalQuantile(0)).toBe(-Infinity);
  expect(normalQuantile(1)).toBe(Infinity);
  expect(normalQuantile(0.975)).toBeCloseTo(1.959963984540054, 14);
  expect(() => normalQuantile(1.1)).toThrow(RangeError);
});
