import { describe, expect, it } from 'vitest';
import {
  combineTrials,
  type CombinedGap,
  type CombinedTrials,
} from '#server/stats/network/combine-trials.ts';
import type { TrialCell } from '#server/stats/network/network-cell.ts';
import { growCells } from '#tests/support/random-network.ts';

const usual = { site: 0.02, year: 0.015, rest: 0.05 };
const cells = growCells({ entries: 9, sites: 5, years: 3, presence: 0.6, seed: 3 });

function combine(chosen: readonly TrialCell[], options: object = { usual }): CombinedTrials {
  const result = combineTrials(chosen, options);
  if (result.outcome === 'not-fitted') throw new Error(result.reason);
  return result;
}

const gapOf = (result: CombinedTrials, a: string, b: string): CombinedGap =>
  result.gaps.find((gap) => gap.a === a && gap.b === b)!;

/** Gaps equal up to a factor on the unit. */
function expectSameGaps(actual: CombinedTrials, expected: CombinedTrials, unit = 1, digits = 9): void {
  expected.gaps.forEach((gap) => {
    const same = gapOf(actual, gap.a, gap.b);
    expect(same.estimate / unit).toBeCloseTo(gap.estimate, digits);
    expect(same.se / unit).toBeCloseTo(gap.se, digits);
    expect(same.ownSeason.se / unit).toBeCloseTo(gap.ownSeason.se, digits);
    expect(same.shrunken / unit).toBeCloseTo(gap.shrunken, digits - 2);
    expect(same.df / gap.df).toBeCloseTo(1, digits - 2);
  });
}

describe.each([
  { name: 'penalised', options: { usual } },
  { name: 'plain', options: { penalty: 0 } },
])('$name REML', ({ options }) => {
  const plain = combine(cells, options);

  it('does not depend on the order of the rows', () => {
    const shuffled = cells.toSorted((a, b) => Math.sin(1e4 * a.mean) - Math.sin(1e4 * b.mean));
    expectSameGaps(combine(shuffled, options), plain);
  });

  it('does not depend on the names of sites and years', () => {
    const renamed = cells.map((cell) => ({
      ...cell,
      site: `the field ${cell.site}`,
      year: `season ${cell.year}`,
    }));
    expectSameGaps(combine(renamed, options), plain);
  });

  it('does not see a level that an environment adds to all, however large', () => {
    const lifted = cells.map((cell) => ({ ...cell, mean: cell.mean + 1024 * Number(cell.site.slice(1)) }));
    expectSameGaps(combine(lifted, options), plain, 1, 7);
  });

  it('gives each of sites and years what it gave the other, once they change places', () => {
    const turned = combine(
      cells.map((cell) => ({ ...cell, site: `${cell.year}`, year: cell.site })),
      'usual' in options ? { usual: { site: usual.year, year: usual.site, rest: usual.rest } } : options,
    );
    expectSameGaps(turned, plain);
    const { site, year, rest } = plain.fit.components;
    expect(turned.fit.components.site).toBeCloseTo(year, 9);
    expect(turned.fit.components.year).toBeCloseTo(site, 9);
    expect(turned.fit.components.rest).toBeCloseTo(rest, 9);
  });

  it('answers in the unit of the means', () => {
    const factor = 1000;
    const inKilograms = cells.map((cell) => ({
      ...cell,
      mean: cell.mean * factor,
      variance: cell.variance * factor ** 2,
    }));
    const scaled = {
      ...options,
      ...('usual' in options && {
        usual: {
          site: usual.site * factor ** 2,
          year: usual.year * factor ** 2,
          rest: usual.rest * factor ** 2,
        },
      }),
    };
    expectSameGaps(combine(inKilograms, scaled), plain, factor, 7);
  });

  it('turns a gap round with its entries', () => {
    const [first] = plain.gaps;
    const back = combineTrials(cells, { ...options, current: first!.a });
    if (back.outcome === 'not-fitted') throw new Error(back.reason);
    const turned = gapOf(back, first!.b, first!.a);
    expect(turned.estimate).toBeCloseTo(-first!.estimate, 12);
    expect(turned.se).toBeCloseTo(first!.se, 12);
    expect(turned.df).toBeCloseTo(first!.df, 9);
  });
});

describe('what carries no evidence', () => {
  it('an entry in one trial changes no other gap once the variances are what they are', () => {
    const lonely: TrialCell = { entry: 'lonely', site: 'S0', year: 2015, mean: 7, variance: 0.05 };
    const without = combine(cells);
    const withIt = combine([...cells, lonely]);
    expect(withIt.fit.components.rest).toBeCloseTo(without.fit.components.rest, 9);
    for (const gap of without.gaps) {
      expect(gapOf(withIt, gap.a, gap.b).estimate).toBeCloseTo(gap.estimate, 9);
      expect(gapOf(withIt, gap.a, gap.b).se).toBeCloseTo(gap.se, 9);
    }
    const own = withIt.gaps.find(({ b }) => b === 'lonely')!;
    expect(own.se).toBeGreaterThan(Math.max(...without.gaps.map(({ se }) => se)));
  });

  it('a trial with one entry changes nothing at all', () => {
    const alone: TrialCell = { entry: 'E1', site: 'S9', year: 2030, mean: 3, variance: 0.05 };
    expectSameGaps(combine([...cells, alone]), combine(cells), 1, 8);
  });
});

describe('a network in two pieces', () => {
  const other = growCells({ entries: 4, sites: 3, years: 2, presence: 0.9, seed: 8 }).map((cell) => ({
    ...cell,
    entry: `other ${cell.entry}`,
    site: `other ${cell.site}`,
  }));
  const result = combine([...cells, ...other]);

  it('refuses every gap between the pieces, and says why', () => {
    expect(result.connected.map((part) => part.length).toSorted()).toEqual([4, 9]);
    expect(result.refused).toHaveLength(36);
    expect(result.refused.every(({ reason }) => reason === 'disconnected')).toBe(true);
    expect(result.gaps).toHaveLength(36 + 6);
  });

  it('answers within a piece as it would with the same variances alone', () => {
    // the two pieces share the variances, so compare by estimates from a fit held at the usual variances
    const held = { penalty: 1e7, usual };
    const together = combine([...cells, ...other], held);
    const apart = combine(cells, held);
    for (const gap of apart.gaps) {
      expect(gapOf(together, gap.a, gap.b).estimate).toBeCloseTo(gap.estimate, 5);
      expect(gapOf(together, gap.a, gap.b).modelSe).toBeCloseTo(gap.modelSe, 5);
    }
  });
});

describe('cells that cannot be read', () => {
  const [first, second] = cells as [TrialCell, TrialCell];
  it.each([
    ['no-values', [], []],
    ['not-finite', [first, { ...second, mean: Number.NaN }], [2]],
    ['bad-variance', [{ ...first, variance: -1 }, second], [1]],
    ['bad-variance', [{ ...first, variance: Infinity }, second], [1]],
    ['duplicate-cell', [first, second, first], [3]],
    ['one-entry', [first], []],
    [
      'bad-option',
      [
        { ...first, trial: 'T' },
        { ...second, trial: 'T', site: 'elsewhere' },
      ],
      [2],
    ],
  ] as const)('%s', (code, chosen, rows) => {
    expect(() => combineTrials(chosen, { usual })).toThrow(expect.objectContaining({ code, rows }));
  });

  it('refuses options that mean nothing', () => {
    expect(() => combineTrials(cells, { penalty: -1 })).toThrow(
      expect.objectContaining({ code: 'bad-option' }),
    );
    expect(() => combineTrials(cells, { usual: { ...usual, year: 0 } })).toThrow(
      expect.objectContaining({ code: 'bad-option' }),
    );
    expect(() => combineTrials(cells, { usual, current: 'nobody' })).toThrow(
      expect.objectContaining({ code: 'unknown-entry' }),
    );
  });
});
