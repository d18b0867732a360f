import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, it, vi } from 'vitest';
import { runNetwork } from '#server/commands/analyse-network.ts';
import { runPair } from '#server/commands/analyse-pair.ts';
import { combineTrials } from '#server/stats/network/combine-trials.ts';
import { synthesisePair } from '#server/stats/network/pair-synthesis.ts';
import { growCells } from '#tests/support/random-network.ts';

let folder: string;

beforeAll(() => {
  folder = mkdtempSync(path.join(tmpdir(), 'gavelrow-doors-'));
});
afterAll(() => rmSync(folder, { recursive: true }));

function write(name: string, lines: readonly string[]): string {
  const file = path.join(folder, name);
  writeFileSync(file, `${lines.join('\n')}\n`);
  return file;
}

type Answer = Record<string, unknown>;

/** Runs a door in this process and gathers what it prints. */
async function analyse(
  door: 'network' | 'pair',
  ...args: readonly string[]
): Promise<{ status: number; answers: Answer[] }> {
  const printed = vi.spyOn(console, 'log').mockReturnValue();
  try {
    const status = await (door === 'network' ? runNetwork : runPair)(args);
    return { status, answers: printed.mock.calls.map(([line]) => JSON.parse(String(line)) as Answer) };
  } finally {
    printed.mockRestore();
  }
}

const cells = growCells({ entries: 4, sites: 3, years: 2, presence: 1, seed: 21 });
const header = 'entry,site,year,mean,variance';
const rows = cells.map(({ entry, site, year, mean, variance }) =>
  [entry, site, year, mean, variance].join(','),
);

describe('analyse network', () => {
  it('prints the engine’s own figures at full precision, one object a file', async () => {
    const first = write('first.csv', [header, ...rows]);
    const second = write('second.csv', [header, ...rows.slice(0, 16)]);
    const { status, answers } = await analyse(
      'network',
      first,
      second,
      '--penalty',
      '3',
      '--usual',
      '0.02,0.015,0.05',
    );
    expect(status).toBe(0);
    expect(answers).toHaveLength(2);
    const expected = combineTrials(
      cells.map((cell) => ({ ...cell, year: String(cell.year) })),
      { usual: { site: 0.02, year: 0.015, rest: 0.05 } },
    );
    if (expected.outcome === 'not-fitted') throw new Error(expected.reason);
    const { outcome: _, ...figures } = expected;
    expect(answers[0]).toEqual(figures);
    expect(answers[1]).toMatchObject({ cells: 16 });
  });

  it('has the fields that are agreed', async () => {
    const { answers } = await analyse(
      'network',
      write('plain.csv', [header, ...rows]),
      '--penalty',
      '0',
      '--current',
      'E0',
    );
    expect(answers[0]).toMatchObject({
      environments: 6,
      entries: 4,
      cells: 24,
      fit: {
        penalty: 0,
        components: { site: expect.any(Number), year: expect.any(Number), rest: expect.any(Number) },
      },
      connected: [['E0', 'E1', 'E2', 'E3']],
    });
    const gaps = answers[0]!['gaps'] as Record<string, unknown>[];
    expect(gaps.map(({ a, b }) => [a, b])).toEqual([
      ['E1', 'E0'],
      ['E2', 'E0'],
      ['E3', 'E0'],
    ]);
    expect(Object.keys(gaps[0]!)).toEqual(
      expect.arrayContaining(['a', 'b', 'estimate', 'se', 'df', 'p', 'interval95', 'ownSeason', 'shrunken']),
    );
    expect(gaps[0]!['ownSeason']).toMatchObject({
      se: expect.any(Number),
      df: expect.any(Number),
      interval95: expect.any(Array),
    });
  });

  it.each([
    ['a mean that is text', [header, ...rows, 'E1,S9,2020,heavy,0.1'], [], 'not-a-number', [26]],
    ['a mean without variance', [header, ...rows, 'E1,S9,2020,6.5,'], [], 'bad-variance', [26]],
    ['a negative variance', [header, 'E1,S9,2020,6.5,-1', ...rows], [], 'bad-variance', [2]],
    ['an entry twice in a trial', [header, ...rows, rows[0]!], [], 'duplicate-cell', [26]],
    ['a nameless entry', [header, ...rows, ',S9,2020,6.5,0.1'], [], 'missing-level', [26]],
    ['a missing column', ['entry,site,mean,variance', 'A,S,5,0.1'], [], 'missing-column', [1]],
    ['one entry', [header, rows[0]!], [], 'one-entry', []],
    ['nothing to estimate from', [header, rows[0]!, rows[1]!], ['--penalty', '0'], 'no-values', []],
    ['a current variety that is not there', [header, ...rows], ['--current', 'Nobody'], 'unknown-entry', []],
    ['usual variances of 0', [header, ...rows], ['--usual', '0,0.1,0.1'], 'bad-option', []],
    ['an option that is not there', [header, ...rows], ['--penality', '3'], 'bad-option', []],
  ])('refuses %s with exit 2 and the lines at fault', async (_, lines, options, code, faulty) => {
    const { status, answers } = await analyse('network', write('bad.csv', lines), ...options);
    expect(status).toBe(2);
    expect(answers[0]).toEqual({ error: { code, message: expect.any(String), rows: faulty } });
  });

  it('passes over an entry that was not harvested', async () => {
    const { status, answers } = await analyse(
      'network',
      write('empty.csv', [header, ...rows, 'E1,S9,2020,,']),
    );
    expect(status).toBe(0);
    expect(answers[0]).toMatchObject({ cells: 24 });
  });
});

describe('analyse pair', () => {
  const gaps = [
    { estimate: 0.4, variance: 0.02 },
    { estimate: -0.1, variance: 0.03 },
    { estimate: 0.7, variance: 0.05 },
  ];

  it('prints both syntheses', async () => {
    const file = write('pair.csv', [
      'trial,estimate,variance',
      ...gaps.map(({ estimate, variance }, i) => `T${i},${estimate},${variance}`),
    ]);
    const { status, answers } = await analyse('pair', file);
    expect(status).toBe(0);
    expect(answers).toEqual([synthesisePair(gaps)]);
    expect(Object.keys(answers[0]!['reml'] as object)).toEqual(
      expect.arrayContaining(['estimate', 'se', 'tau2', 'ci', 'ciHk', 'prediction', 'q', 'i2']),
    );
  });

  it('refuses a variance of 0 by its line', async () => {
    const { status, answers } = await analyse(
      'pair',
      write('zero.csv', ['estimate,variance', '0.4,0.02', '0.1,0']),
    );
    expect(status).toBe(2);
    expect(answers[0]).toMatchObject({ error: { code: 'bad-variance', rows: [3] } });
  });
});
