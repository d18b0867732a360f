import { expect, test } from 'vitest';
import { checkLayout, connectedParts, type PlacedPlot } from '#server/stats/checks/field-layout.ts';
import { readReferenceRows } from '#tests/support/reference-case.ts';

/** Plots in rows of blocks: each letter is an entry, each row a block and a field row. */
function layOut(...blocks: readonly string[]): PlacedPlot[] {
  return blocks.flatMap((entries, row) =>
    [...entries].map((entry, column) => ({
      plot: `${row + 1}-${column + 1}`,
      entry,
      block: `B${row + 1}`,
      row: row + 1,
      column: column + 1,
    })),
  );
}

const complete = { completeBlocks: true };

test('a sound layout has no finding', () => {
  expect(checkLayout(layOut('ABCD', 'DBCA', 'CADB'), complete)).toEqual([]);
  expect(checkLayout([], complete)).toEqual([]);
});

test('an entry twice in a block and one missing from it', () => {
  expect(checkLayout(layOut('ABC', 'AAC', 'CAB'), complete)).toEqual([
    { code: 'entry-repeated-in-block', entry: 'A', block: 'B2', plots: ['2-1', '2-2'] },
    { code: 'entry-missing-from-block', entry: 'B', block: 'B2' },
    { code: 'unequal-replication', fewest: 2, most: 4, entries: ['B', 'C'] },
  ]);
});

test('incomplete blocks by design are none', () => {
  expect(checkLayout(layOut('AB', 'BC', 'CA'), { completeBlocks: false })).toEqual([]);
});

test('two plots with one name, or in one place', () => {
  const plots = layOut('AB', 'BA');
  const [first, ...rest] = plots;
  if (!first) throw new Error('no plot');
  const findings = checkLayout([{ ...first, plot: '1-2', row: 2 }, ...rest], complete);
  expect(findings).toContainEqual({ code: 'plot-named-twice', plot: '1-2', times: 2 });
  expect(findings).toContainEqual({ code: 'position-taken-twice', row: 2, column: 1, plots: ['1-2', '2-1'] });
});

test('an entry with one plot', () => {
  const findings = checkLayout(layOut('ABC', 'AB', 'AB'), { completeBlocks: false });
  expect(findings).toContainEqual({ code: 'entry-not-replicated', entry: 'C' });
  expect(findings).toContainEqual({ code: 'unequal-replication', fewest: 1, most: 3, entries: ['C'] });
});

test('blocks that share no entry fall apart', () => {
  // Case 12d: blocks 1 and 2 hold A, B, C; blocks 3 and 4 hold D, E, F.
  const plots = readReferenceRows('open/12d-disconnected-blocks/plots.csv').map((row) => ({
    plot: row['plot'] ?? '',
    entry: row['entry'] ?? '',
    block: row['block'] ?? '',
  }));
  const parts = connectedParts(plots).map((part) => part.toSorted());
  expect(parts.toSorted()).toEqual([
    ['A', 'B', 'C'],
    ['D', 'E', 'F'],
  ]);
  expect(checkLayout(plots, { completeBlocks: false }).map((finding) => finding.code)).toEqual([
    'entries-disconnected',
  ]);
});

test('a long chain of shared entries holds together', () => {
  const chain = Array.from({ length: 200 }, (_, i) => [
    { entry: `E${i}`, block: `B${i}` },
    { entry: `E${i + 1}`, block: `B${i}` },
  ]).flat();
  expect(connectedParts(chain)).toHaveLength(1);
  expect(connectedParts(chain.toReversed())).toHaveLength(1);
});
