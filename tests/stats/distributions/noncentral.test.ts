import fc from 'fast-check';
import { expect, test } from 'vitest';
import { noncentralFUpper } from '#server/stats/distributions/noncentral-f.ts';
import { noncentralTUpper } from '#server/stats/distributions/noncentral-t.ts';
import { fUpper } from '#server/stats/distributions/f-distribution.ts';
import { tUpper } from '#server/stats/distributions/student-t.ts';
import { deviationOf } from '#tests/support/deviation.ts';

// mpmath 1.3.0: quadrature over the chi distribution in 18 digits.
test.each([
  [2, 10, 2.8, 0.781721759579182],
  [2.06, 24.5, 1, 0.159325320845046],
  [2.06, 24.5, -1, 0.00174591169005038],
  [3, 4, -2, 0.000118145972406162],
])('P(T > %d) with %d df around %d', (t, df, noncentrality, expected) => {
  expect(deviationOf(noncentralTUpper(t, df, noncentrality), expected)).toBeLessThan(1e-11);
});

test('the two tails of noncentral t make noncentral F', () => {
  fc.assert(
    fc.property(
      fc.double({ min: 0.1, max: 8, noNaN: true }),
      fc.double({ min: 1, max: 300, noNaN: true }),
      fc.double({ min: 0, max: 6, noNaN: true }),
      (t, df, delta) => {
        const both = noncentralTUpper(t, df, delta) + noncentralTUpper(t, df, -delta);
        expect(deviationOf(both, noncentralFUpper(t * t, 1, df, delta * delta))).toBeLessThan(1e-9);
      },
    ),
  );
});

test('without noncentrality both are central', () => {
  expect(deviationOf(noncentralTUpper(2.5, 7.7, 0), tUpper(2.5, 7.7))).toBeLessThan(1e-12);
  expect(deviationOf(noncentralFUpper(2.5, 3, 7.7, 0), fUpper(2.5, 3, 7.7))).toBeLessThan(1e-13);
  expect(noncentralTUpper(-2.5, 7.7, 0)).toBeCloseTo(1 - tUpper(2.5, 7.7), 12);
});
