import { describe, expect, test } from 'vitest';
import type { TrialContent } from '#shared/trial-content.ts';
import { generateDemo } from '#server/demo/generate-demo.ts';
import { checkContentLayout } from '#server/trials/analyse-content-layout.ts';

type Plot = TrialContent['plots'][number];

function sow(design: TrialContent['design'], rows: [string, Partial<Plot>][]): TrialContent {
  return {
    format: 1,
    cropSlug: 'crop',
    siteSlug: 'site',
    season: 2026,
    name: 'Trial',
    design,
    kind: 'plots',
    alpha: 0.05,
    management: {},
    sownOn: null,
    harvestedOn: null,
    entries: [],
    summary: [],
    plots: rows.map(([entry, place], i) => ({
      plotNumber: String(101 + i),
      entry,
      rep: null,
      block: null,
      row: null,
      col: null,
      mainLevel: null,
      factorLevels: null,
      excludedReason: null,
      values: {},
      ...place,
    })),
  };
}

const inBlocks = (...names: string[]): [string, Partial<Plot>][] =>
  names.flatMap((entries, i) =>
    [...entries].map((entry): [string, Partial<Plot>] => [entry, { block: `${i + 1}` }]),
  );

const codes = (content: TrialContent) => checkContentLayout(content).map(({ code }) => code);

describe('complete blocks', () => {
  test('that hold each entry once are sound, measured or not', () => {
    expect(checkContentLayout(sow('rcbd', inBlocks('ABC', 'BCA', 'CAB')))).toEqual([]);
  });

  test('tell an entry sown twice in a block, and where it is missing', () => {
    expect(checkContentLayout(sow('rcbd', inBlocks('ABC', 'BBA', 'CAB')))).toEqual([
      { code: 'unequal-replication', values: { fewest: 2, most: 4, entries: 'A, C' } },
      { code: 'entry-repeated-in-block', values: { entry: 'B', block: '2', plots: '104, 105' } },
      { code: 'entry-missing-from-block', values: { entry: 'C', blocks: '2', count: 1 } },
    ]);
  });

  test('that share no entry fall into parts', () => {
    expect(checkContentLayout(sow('rcbd', inBlocks('AB', 'CD', 'BA', 'DC')))).toContainEqual({
      code: 'entries-disconnected',
      values: { parts: 'A, B · C, D' },
    });
  });

  test('tell entries on one plot in one sentence, and cut a long list of them short', () => {
    const many = Array.from({ length: 20 }, (_, i): [string, Partial<Plot>] => [`E${i}`, { block: '1' }]);
    const found = checkContentLayout(sow('rcbd', many));
    expect(found).toEqual([
      { code: 'entry-not-replicated', values: { entries: expect.any(String), count: 20 } },
    ]);
    expect(found[0]?.values['entries']).toMatch(/^E0, E1, .*E11…$/);
  });
});

describe('places of the field', () => {
  test('taken twice are told', () => {
    const plots = inBlocks('AB', 'BA').map(([entry, place], i): [string, Partial<Plot>] => [
      entry,
      { ...place, row: 1, col: i === 3 ? 3 : i + 1 },
    ]);
    expect(checkContentLayout(sow('rcbd', plots))).toEqual([
      { code: 'position-taken-twice', values: { row: 1, column: 3, plots: '103, 104' } },
    ]);
  });

  test('may be counted anew in each replicate', () => {
    const plots = ['1', '2'].flatMap((rep) =>
      ['A', 'B'].map((entry, i): [string, Partial<Plot>] => [entry, { rep, row: 1, col: i + 1 }]),
    );
    expect(codes(sow('row-column', plots))).toEqual([]);
  });
});

describe('other designs', () => {
  test('ask for an entry once in each main plot, replicate, row and column', () => {
    const split = ['1', '2'].flatMap((block) =>
      ['treated', 'untreated'].flatMap((mainLevel) =>
        ['A', 'B'].map((entry): [string, Partial<Plot>] => [entry, { block, mainLevel }]),
      ),
    );
    expect(codes(sow('split-plot', split))).toEqual([]);
    expect(codes(sow('split-plot', split.slice(1)))).toContain('entry-missing-from-block');
    const square = ['ABC', 'BCA', 'CAB'].flatMap((line, row) =>
      [...line].map((entry, col): [string, Partial<Plot>] => [entry, { row: row + 1, col: col + 1 }]),
    );
    expect(codes(sow('latin-square', square))).toEqual([]);
    const [first, second, ...rest] = square;
    if (first === undefined || second === undefined) throw new Error('no square');
    const swapped: [string, Partial<Plot>][] = [[second[0], first[1]], [first[0], second[1]], ...rest];
    expect(codes(sow('latin-square', swapped))).toContain('entry-repeated-in-block');
    const alpha = ['1', '2'].flatMap((rep) =>
      ['A', 'B', 'C', 'D'].map((entry, i): [string, Partial<Plot>] => [
        entry,
        { rep, block: i < 2 ? '1' : '2' },
      ]),
    );
    expect(codes(sow('incomplete-blocks', alpha))).toEqual(['entries-disconnected']);
  });

  test('take combinations of factors for what stands once in a block', () => {
    const plots = ['1', '2'].flatMap((block) =>
      ['N0', 'N1'].flatMap((n) =>
        ['P0', 'P1'].map((p): [string, Partial<Plot>] => ['A', { block, factorLevels: { n, p } }]),
      ),
    );
    expect(codes(sow('factorial', plots))).toEqual([]);
  });
});

test('every invented trial lies as its design asks', () => {
  const plotted = generateDemo().trials.filter(({ content }) => content.kind === 'plots');
  expect(plotted.flatMap(({ content }) => checkContentLayout(content))).toEqual([]);
});
