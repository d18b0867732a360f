import { expect, test } from 'vitest';
import { errorDfOfDesign, harmonicReplication, type TrialSize } from '#server/stats/summary/error-df.ts';

// Error df as printed with the examples in their books (domain.md, examples A, B, C, E and F), else by the textbook rule.
test.each<[string, TrialSize, number | undefined]>([
  ['Erdman, completely randomised', { design: 'crd', entries: 6, replicates: 5 }, 24],
  ['seed rates in blocks', { design: 'rcbd', entries: 6, replicates: 4 }, 15],
  ['the same, one plot missing', { design: 'rcbd', entries: 6, replicates: [4, 4, 4, 3, 4, 4] }, 14],
  ['Goulden, Latin square', { design: 'latin-square', entries: 5, replicates: 5 }, 12],
  [
    'Yates, nitrogen in a split plot',
    { design: 'split-plot', entries: 4, mainLevels: 3, replicates: 18 },
    45,
  ],
  ['two entries side by side', { design: 'strips', entries: 2, replicates: 6 }, 5],
  [
    '24 entries in 18 blocks of 4',
    { design: 'incomplete-blocks', entries: 24, replicates: 3, blocks: 18 },
    31,
  ],
  [
    'incomplete blocks, number unknown',
    { design: 'incomplete-blocks', entries: 24, replicates: 3 },
    undefined,
  ],
  ['no replication', { design: 'rcbd', entries: 6, replicates: 1 }, undefined],
  ['replication unknown', { design: 'rcbd', entries: 6 }, undefined],
  ['design unknown', { design: 'unknown', entries: 6, replicates: 4 }, undefined],
])('%s', (_, size, df) => {
  expect(errorDfOfDesign(size)).toBe(df);
});

test('the harmonic mean of plots, or nothing where an entry has none', () => {
  expect(harmonicReplication({ design: 'crd', entries: 3, replicates: [2, 4, 4] })).toBeCloseTo(3, 12);
  expect(harmonicReplication({ design: 'crd', entries: 2, replicates: [2, 0] })).toBeUndefined();
});
