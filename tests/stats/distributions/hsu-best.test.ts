import { describe, expect, test } from 'vitest';
import { compareWithBest } from '#server/stats/distributions/hsu-best.ts';
import { oneSidedDunnettQuantile } from '#server/stats/distributions/one-sided-dunnett.ts';
import { tQuantileUpper } from '#server/stats/distributions/student-t.ts';

function diagonal(variances: readonly number[]): number[][] {
  return variances.map((v, i) => variances.map((_, j) => (i === j ? v : 0)));
}

// Erdman 1946 in Steel & Torrie (1980), ch. 7: means in mg N; MSE 11.789 with 24 df, r = 5.
const erdman = [28.82, 23.98, 14.64, 19.92, 13.26, 18.7];
const question = {
  means: erdman,
  covariance: diagonal(erdman.map(() => 11.789 / 5)),
  df: 24,
  alpha: 0.05,
  better: 'higher',
} as const;

test('balanced: limits are the gap to the best other ± the one-sided Dunnett width, cut at 0', () => {
  // One-sided d of five comparisons, ρ = ½, 24 df, 5 %: 2.36 in Dunnett's (1955) table 1a.
  const half = Array.from({ length: 5 }, (_, i) => Array.from({ length: 5 }, (__, j) => (i === j ? 1 : 0.5)));
  const d = oneSidedDunnettQuantile(0.05, 24, half);
  expect(d).toBeCloseTo(2.36, 2);
  const width = d * Math.sqrt((2 * 11.789) / 5);
  const rows = compareWithBest(question);
  expect(rows[0]?.upper).toBeCloseTo(28.82 - 23.98 + width, 8);
  expect(rows[0]?.lower).toBeCloseTo(Math.min(0, 28.82 - 23.98 - width), 8);
  expect(rows[1]?.upper).toBeCloseTo(Math.max(0, 23.98 - 28.82 + width), 8);
  expect(rows.map((row) => row.mayBeBest)).toEqual([true, true, false, false, false, false]);
  expect(rows[4]).toMatchObject({ upper: 0, isBest: false });
  expect(rows[4]?.estimate).toBeCloseTo(13.26 - 28.82, 10);
});

test('one entry far ahead is shown to be the best, and the others not', () => {
  const rows = compareWithBest({ ...question, means: [60, 20, 21, 22, 23, 24] });
  expect(rows[0]).toMatchObject({ lower: 0, isBest: true, mayBeBest: true });
  expect(rows.slice(1).every((row) => !row.mayBeBest && row.upper === 0)).toBe(true);
});

test('two entries: the one-sided t interval, cut at 0', () => {
  const [first] = compareWithBest({ ...question, means: [5, 4], covariance: diagonal([0.1, 0.3]), df: 9.5 });
  const width = tQuantileUpper(0.05, 9.5) * Math.sqrt(0.4);
  expect(first?.upper).toBeCloseTo(1 + width, 8);
  expect(first?.lower).toBeCloseTo(Math.min(0, 1 - width), 8);
});

test('where less is better, everything is mirrored', () => {
  const more = compareWithBest(question);
  const less = compareWithBest({ ...question, means: erdman.map((mean) => -mean), better: 'lower' });
  more.forEach((row, i) => {
    expect(less[i]?.lower).toBeCloseTo(-row.upper, 12);
    expect(less[i]?.upper).toBeCloseTo(-row.lower, 12);
    expect(less[i]?.mayBeBest).toBe(row.mayBeBest);
  });
});

describe('unequal variances', () => {
  test('a poorly known entry is not excluded by a gap that excludes a well known one', () => {
    const rows = compareWithBest({
      ...question,
      means: [10, 8, 8],
      covariance: diagonal([0.2, 0.2, 4]),
      df: 30,
    });
    expect(rows.map((row) => row.mayBeBest)).toEqual([true, false, true]);
  });

  test('only variances of differences count: a shared part changes nothing', () => {
    const base = diagonal([0.2, 0.3, 0.5]);
    const shifted = base.map((row) => row.map((value) => value + 7));
    const plain = compareWithBest({ ...question, means: [10, 9.5, 9], covariance: base });
    const moved = compareWithBest({ ...question, means: [10, 9.5, 9], covariance: shifted });
    plain.forEach((row, i) => expect(moved[i]?.upper).toBeCloseTo(row.upper, 8));
  });
});

describe('many entries, unequally known', () => {
  /** Covariance of k means: variances from 0.2 to 0.7, covariances between −0.02 and 0.06. */
  const uneven = (k: number): number[][] =>
    Array.from({ length: k }, (_, a) =>
      Array.from({ length: k }, (__, b) => {
        const [i, j] = [a + 1, b + 1];
        return a === b ? 0.2 + 0.05 * ((i * 7) % 11) : 0.03 * ((i * j) % 3) - 0.02 * ((i + j) % 2);
      }),
    );
  const gapVariance = (v: number[][], i: number, j: number, k: number): number =>
    v[j]![k]! - v[j]![i]! - v[i]![k]! + v[i]![i]!;
  const gapsFrom = (i: number, v: number[][]): number[][] => {
    const others = v.map((_, j) => j).filter((j) => j !== i);
    const sd = (j: number): number => Math.sqrt(gapVariance(v, i, j, j));
    return others.map((a) => others.map((b) => (a === b ? 1 : gapVariance(v, i, a, b) / (sd(a) * sd(b)))));
  };

  // pmvnorm of R's mvtnorm 1.3, averaged over the scale by a Gauss rule, solved to 1e-5 or so.
  test.each([
    [5, 12.5, 0.05, 2.37862],
    [12, 28.4, 0.05, 2.57131],
    [12, 28.4, 0.01, 3.29328],
    [20, 4, 0.1, 3.12117],
  ])('the critical value of the first of %i, %d df, alpha %d', (k, df, alpha, d) => {
    expect(Math.abs(oneSidedDunnettQuantile(alpha, df, gapsFrom(0, uneven(k))) - d)).toBeLessThan(2e-4);
  });

  test('whoever is left out of the search has an upper limit of 0 by the whole definition too', () => {
    const covariance = uneven(14).map((row) => row.map((value) => value / 4));
    const means = covariance.map((_, i) => 6 + ((i * 5) % 14) / 4);
    const rows = compareWithBest({ means, covariance, df: 21.5, alpha: 0.05, better: 'higher' });
    const uppers = means.map((mean, i) => {
      const d = oneSidedDunnettQuantile(0.05, 21.5, gapsFrom(i, covariance));
      const limits = means.flatMap((other, j) =>
        j === i ? [] : [mean - other + d * Math.sqrt(gapVariance(covariance, i, j, j))],
      );
      return Math.max(0, Math.min(...limits));
    });
    rows.forEach((row, i) => expect(row.upper).toBeCloseTo(uppers[i]!, 10));
    const out = rows.filter((row) => !row.mayBeBest).length;
    expect([out > 3, out < 12]).toEqual([true, true]);
  });
});

test('there is no best of one', () => {
  expect(() => compareWithBest({ ...question, means: [1], covariance: [[1]] })).toThrow(RangeError);
  expect(() => compareWithBest({ ...question, alpha: 0.7 })).toThrow(RangeError);
});
