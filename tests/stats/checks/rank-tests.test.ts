import { expect, test } from 'vitest';
import { friedman } from '#server/stats/checks/friedman.ts';
import { kruskalWallis } from '#server/stats/checks/kruskal-wallis.ts';
import { median } from '#server/stats/checks/median.ts';
import { midRanks } from '#server/stats/checks/mid-ranks.ts';
import { summariseOrdinal } from '#server/stats/checks/ordinal.ts';
import { deviationOf } from '#tests/support/deviation.ts';

test('tied values share the mean of their ranks', () => {
  expect([...midRanks([5, 1, 5, 3, 5]).ranks]).toEqual([4, 1, 4, 2, 4]);
  expect(midRanks([5, 1, 5, 3, 5]).ties).toBe(24);
});

// R 4.2.2, kruskal.test; the first are the data of Hollander & Wolfe (1973), p. 116.
test.each([
  [
    [2.9, 3, 2.5, 2.6, 3.2, 3.8, 2.7, 4, 2.4, 2.8, 3.4, 3.7, 2.2, 2],
    [1, 1, 1, 1, 1, 2, 2, 2, 2, 3, 3, 3, 3, 3],
    0.7714285714286,
    0.679964773579,
  ],
  [[1, 2, 2, 3, 3, 3, 4, 5, 5, 1, 1, 2], [...'aaaabbbbcccc'], 3.99908424908425, 0.135397264130073],
])('Kruskal–Wallis of %j', (scores, groups, statistic, p) => {
  const result = kruskalWallis(scores, groups);
  if (!result.computed) throw new Error(result.reason);
  expect(deviationOf(result.statistic, statistic)).toBeLessThan(1e-12);
  expect(deviationOf(result.p, p)).toBeLessThan(1e-11);
  expect(result.df).toBe(2);
});

// R 4.2.2, friedman.test; both with ties within blocks.
test.each([
  [
    [
      [5.4, 5.5, 5.55],
      [5.85, 5.7, 5.75],
      [5.2, 5.6, 5.5],
      [5.55, 5.5, 5.4],
      [5.9, 5.85, 5.7],
      [5.45, 5.55, 5.6],
      [5.4, 5.4, 5.35],
      [5.45, 5.5, 5.35],
    ],
    0.838709677419355,
    0.657470857760857,
  ],
  [
    [
      [1, 2, 2, 3],
      [1, 1, 4, 2],
      [3, 3, 3, 5],
      [2, 2, 1, 4],
    ],
    6.63636363636364,
    0.0844370356886898,
  ],
])('Friedman of %j', (blocks, statistic, p) => {
  const result = friedman(blocks);
  if (!result.computed) throw new Error(result.reason);
  expect(deviationOf(result.statistic, statistic)).toBeLessThan(1e-12);
  expect(deviationOf(result.p, p)).toBeLessThan(1e-11);
});

test('rank tests say why they have no result', () => {
  expect(kruskalWallis([1, 2], ['a', 'a'])).toEqual({ computed: false, reason: 'one-group' });
  expect(kruskalWallis([2, 2, 2], ['a', 'b', 'c'])).toEqual({ computed: false, reason: 'no-spread' });
  expect(friedman([[1, 2]])).toEqual({ computed: false, reason: 'too-few-values' });
  expect(
    friedman([
      [1, null],
      [2, 3],
    ]),
  ).toEqual({ computed: false, reason: 'incomplete-blocks' });
  expect(
    friedman([
      [1, 1],
      [2, 2],
    ]),
  ).toEqual({ computed: false, reason: 'no-spread' });
});

test('scores are told by median and counts, never by a mean', () => {
  expect(summariseOrdinal([2, 9, 2, 3, 1], ['b', 'a', 'b', 'b', 'a'])).toEqual([
    {
      entry: 'b',
      n: 3,
      median: 2,
      min: 2,
      max: 3,
      counts: [
        { score: 2, count: 2 },
        { score: 3, count: 1 },
      ],
    },
    {
      entry: 'a',
      n: 2,
      median: 5,
      min: 1,
      max: 9,
      counts: [
        { score: 1, count: 1 },
        { score: 9, count: 1 },
      ],
    },
  ]);
  expect(() => median([])).toThrow(RangeError);
});
