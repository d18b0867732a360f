import { expect, test } from 'vitest';
import { tTwoSided } from '#server/stats/distributions/student-t.ts';
import { studentUpperTail } from '#shared/student-tail.ts';

// Student's table: upper 2.5 % and 5 % points as printed in any text (three decimals).
test.each([
  [12.706, 1, 0.025],
  [2.776, 4, 0.025],
  [2.228, 10, 0.025],
  [2.042, 30, 0.025],
  [6.314, 1, 0.05],
  [1.812, 10, 0.05],
])('the table value %f on %i df has its tail', (t, df, tail) => {
  expect(studentUpperTail(t, df)).toBeCloseTo(tail, 4);
});

test('closed forms: one df is Cauchy, two df algebraic, infinite df normal', () => {
  for (const t of [-30, -3, -0.7, 0, 1e-9, 0.2, 1, 2.5, 12]) {
    expect(studentUpperTail(t, 1)).toBeCloseTo(0.5 - Math.atan(t) / Math.PI, 12);
    expect(studentUpperTail(t, 2)).toBeCloseTo(0.5 * (1 - t / Math.sqrt(2 + t * t)), 12);
  }
  // Normal upper tail at 1.959963984540054 is 0.025.
  expect(studentUpperTail(1.959963984540054, Infinity)).toBeCloseTo(0.025, 8);
});

test('page and engine agree to 1e-10', () => {
  for (const df of [1, 1.7, 3, 5.5, 12, 40.25, 300, 5000]) {
    for (const t of [0, 0.01, 0.5, 1, 1.96, 3, 6, 15]) {
      expect(Math.abs(2 * studentUpperTail(t, df) - tTwoSided(t, df))).toBeLessThan(1e-10);
    }
  }
});
