import { jStat } from 'jstat';
import { describe, expect, it } from 'vitest';
import { chiSquareUpper } from '#server/stats/distributions/chi-square.ts';
import { fQuantileUpper, fUpper } from '#server/stats/distributions/f-distribution.ts';
import { normalQuantile, normalUpper } from '#server/stats/distributions/normal.ts';
import { studentisedRangeUpper } from '#server/stats/distributions/studentised-range.ts';
import { tQuantile, tUpper } from '#server/stats/distributions/student-t.ts';

// jstat 1.9.6 is written apart from ours and from R, and is good in the middle of a distribution. In the tails it
// rounds 1 − cdf away, which is why the engine has kernels of its own.
const degrees = [3, 7, 12, 24, 60];
const middle = [0.2, 0.9, 1.7, 2.6];

describe('in the middle of a distribution the engine and jstat agree', () => {
  it.each(middle)('normal at %d', (x) => {
    expect(normalUpper(x)).toBeCloseTo(1 - jStat.normal.cdf(x, 0, 1), 9);
    expect(normalQuantile(1 - normalUpper(x))).toBeCloseTo(x, 9);
  });

  it.each(degrees)('Student’s t at %d df', (df) => {
    for (const t of middle) expect(tUpper(t, df)).toBeCloseTo(1 - jStat.studentt.cdf(t, df), 7);
    expect(tQuantile(0.975, df)).toBeCloseTo(jStat.studentt.inv(0.975, df), 6);
  });

  it.each(degrees)('F at 4 and %d df', (df) => {
    for (const f of middle) expect(fUpper(f, 4, df)).toBeCloseTo(1 - jStat.centralF.cdf(f, 4, df), 8);
    expect(fQuantileUpper(0.05, 4, df)).toBeCloseTo(jStat.centralF.inv(0.95, 4, df), 5);
  });

  it.each(degrees)('χ² at %d df', (df) => {
    for (const x of [0.5 * df, df, 1.5 * df]) {
      expect(chiSquareUpper(x, df)).toBeCloseTo(1 - jStat.chisquare.cdf(x, df), 8);
    }
  });

  it('the studentised range at many df, where the usual algorithm is good to four digits', () => {
    for (const q of [2.5, 3.5, 4.5]) {
      expect(studentisedRangeUpper(q, 6, 60)).toBeCloseTo(1 - jStat.tukey.cdf(q, 6, 60), 4);
    }
  });
});
