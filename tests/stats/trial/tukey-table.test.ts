import { describe, expect, it } from 'vitest';
import { studentisedRangeUpper, tukeyAdjust } from '#server/stats/distributions/studentised-range.ts';
import { deviationOf } from '#tests/support/deviation.ts';

describe('Tukey’s p for many pairs, read from a table', () => {
  it.each([
    [3, 1],
    [3, 2],
    [30, 2.5],
    [30, 87],
    [24, 35.2],
    [100, 297],
    [500, 1497],
    [12, 1e6],
  ])('equal those computed one by one: %d entries, %d df', (k, df) => {
    const ts = Float64Array.from({ length: 400 }, (_, i) => (i - 200) / 11.3);
    const adjusted = tukeyAdjust(ts, k, df);
    const deviations = ts.map((t, i) => {
      const one = studentisedRangeUpper(Math.SQRT2 * Math.abs(t), k, df);
      return deviationOf(adjusted[i], one, 1e-300);
    });
    expect(Math.max(...deviations)).toBeLessThan(1e-8);
  });
});
