import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  incompleteBeta,
  incompleteGammaUpper,
  logBeta,
  logGamma,
} from '#server/stats/distributions/special-functions.ts';
import { deviationOf } from '#tests/support/deviation.ts';

// Values of mpmath 1.3.0 in 30 digits.
describe('against values of many digits', () => {
  test.each([
    [0.1, 2.2527126517342059],
    [2.5, 0.28468287047291916],
    [9.75, 12.242204940050763],
    [33.25, 82.429238345909042],
    [1e5, 1051287.7089736569],
  ])('logGamma(%d)', (x, expected) => {
    expect(deviationOf(logGamma(x), expected)).toBeLessThan(2e-14);
  });

  test.each([
    [0.5, 3.7, -0.048118367370501826],
    [4.4, 25, -12.131686090074861],
    [60, 180.5, -136.08733745051999],
    [0.5, 1e6, -6.335390211057437],
  ])('logBeta(%d, %d)', (a, b, expected) => {
    expect(deviationOf(logBeta(a, b), expected)).toBeLessThan(3e-14);
    expect(logBeta(b, a)).toBe(logBeta(a, b));
  });

  test.each([
    [0.5, 0.2, 0.5270892568655381],
    [2.5, 3.1, 0.2872416834255611],
    [44.5, 90, 3.982569758377296e-8],
    [500, 560, 0.004693165999294769],
    [3, 100, 1.897610755368228e-40],
  ])('incompleteGammaUpper(%d, %d)', (a, x, expected) => {
    expect(deviationOf(incompleteGammaUpper(a, x), expected)).toBeLessThan(1e-13);
  });
});

test('the two tails of the beta distribution make one', () => {
  fc.assert(
    fc.property(
      fc.double({ min: 0.001, max: 0.999, noNaN: true }),
      fc.double({ min: 0.2, max: 300, noNaN: true }),
      fc.double({ min: 0.2, max: 300, noNaN: true }),
      (x, a, b) => {
        expect(incompleteBeta(x, 1 - x, a, b) + incompleteBeta(1 - x, x, b, a)).toBeCloseTo(1, 12);
      },
    ),
  );
});

test('closed form: I_x(a, 1) = x^a, and Q(1, x) = exp(−x)', () => {
  expect(deviationOf(incompleteBeta(0.3, 0.7, 4.5, 1), 0.3 ** 4.5)).toBeLessThan(1e-14);
  expect(deviationOf(incompleteGammaUpper(1, 30), Math.exp(-30))).toBeLessThan(1e-14);
});

test('what has no gamma function is refused', () => {
  expect(() => logGamma(0)).toThrow(RangeError);
  expect(() => logGamma(Number.NaN)).toThrow(RangeError);
});
