import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import english from '#locales/en/problems.json' with { type: 'json' };
import { problemReasons } from '#server/trial-desk/row-problems.ts';
import { readLongCsv, type ReadOptions } from '#server/trial-desk/read-long-csv.ts';

const options: ReadOptions = {
  design: 'rcbd',
  trait: 'yield',
  traits: [
    { slug: 'yield', names: ['yield', 'Yield', 'Rendement'], min: 0, max: Infinity },
    { slug: 'protein', names: ['protein', 'Protéines'], min: 0, max: Infinity },
    { slug: 'lodging', names: ['lodging', 'Verse'], min: 1, max: 9 },
  ],
  rowLimit: 50_000,
};

function read(text: string | Uint8Array, changes: Partial<ReadOptions> = {}) {
  const bytes = typeof text === 'string' ? new TextEncoder().encode(text) : text;
  return readLongCsv(bytes, { ...options, ...changes });
}

/** Reasons with the line and column that they name. */
function problemsOf(text: string | Uint8Array, changes: Partial<ReadOptions> = {}): string[] {
  return read(text, changes).problems.map(({ row, column, reason }) => `${row} ${column ?? '-'} ${reason}`);
}

const values = (file: ReturnType<typeof read>) => file.plots.map((plot) => plot.values['yield']);

describe('files as the trade writes them', () => {
  test('a plain file with commas', () => {
    const file = read('plot,entry,block,yield\n1,A,1,5.1\n2,B,1,4.9\n');
    expect(file.problems).toEqual([]);
    expect(file.plots).toEqual([
      {
        plotNumber: '1',
        entry: 'A',
        rep: null,
        block: '1',
        row: null,
        col: null,
        mainLevel: null,
        factorLevels: null,
        values: { yield: 5.1 },
        isCheck: false,
      },
      expect.objectContaining({ plotNumber: '2', entry: 'B', values: { yield: 4.9 } }),
    ]);
  });

  test('French headers, semicolons, decimal commas, a byte-order mark and Windows line ends', () => {
    const file = read('\ufeffParcelle;Variété;Répétition;Rendement (t/ha)\r\n1;A;1;5,113\r\n2;B;1;4,9\r\n');
    expect(file.problems).toEqual([]);
    expect(values(file)).toEqual([5.113, 4.9]);
    expect(file.plots.map((plot) => plot.rep)).toEqual(['1', '1']);
    expect(file.statedUnit).toBe('t/ha');
  });

  test('Windows-1252 and UTF-16', () => {
    const latin = Uint8Array.from('variété,bloc,rendement\nÉpi,1,5.1\nB,1,4.9\n', (sign) =>
      sign.charCodeAt(0),
    );
    expect(read(latin).plots[0]?.entry).toBe('Épi');
    const utf16 = Buffer.from('\ufeffentry\tblock\tyield\nÉpi\t1\t5,1\nB\t1\t4,9\n', 'utf16le');
    const file = read(utf16);
    expect(file.plots[0]?.entry).toBe('Épi');
    expect(values(file)).toEqual([5.1, 4.9]);
  });

  test('the long form of BrAPI, one row for each plot and trait', () => {
    const file = read(
      [
        'observationUnitDbId,germplasmName,entryType,blockNumber,observationVariableName,value',
        'p1,A,CHECK,1,Yield,5.1',
        'p1,A,CHECK,1,Protein,11.2',
        'p2,B,TEST,1,Yield,4.9',
        'p2,B,TEST,1,Protein,',
      ].join('\n'),
    );
    expect(file.problems).toEqual([]);
    expect(file.rows).toBe(4);
    expect(file.plots.map((plot) => [plot.plotNumber, plot.isCheck, plot.values])).toEqual([
      ['p1', true, { yield: 5.1, protein: 11.2 }],
      ['p2', false, { yield: 4.9 }],
    ]);
    expect(file.traits).toEqual(['yield', 'protein']);
  });

  test('several traits side by side, a missing plot, columns chosen by hand and columns that mean nothing', () => {
    const file = read('who,rep,Yield,Verse,remark\nA,1,5.1,3,fine\nB,1,NA,4,\n', {
      columns: { entry: 'who' },
    });
    expect(file.problems).toEqual([]);
    expect(file.plots.map((plot) => plot.values)).toEqual([{ yield: 5.1, lodging: 3 }, { lodging: 4 }]);
  });

  test('a split plot and a factorial by their columns', () => {
    const split = read('B,V,N,Y\nI,Victory,0,111\nI,Victory,1,130\n', {
      design: 'split-plot',
      columns: { block: 'B', main: 'V', entry: 'N', value: 'Y' },
    });
    expect(split.plots.map((plot) => [plot.mainLevel, plot.entry])).toEqual([
      ['Victory', '0'],
      ['Victory', '1'],
    ]);
    const factorial = read('block,N,P,yield\n1,0,0,49\n1,1,0,51\n', {
      design: 'factorial',
      factors: ['N', 'P'],
    });
    expect(factorial.plots.map((plot) => [plot.entry, plot.factorLevels])).toEqual([
      ['0:0', { N: '0', P: '0' }],
      ['1:0', { N: '1', P: '0' }],
    ]);
  });

  test('spellings that differ in case or spaces are one entry', () => {
    const file = read('entry,rep,yield\nFennick Row,1,5\nfennick  row,2,5\nB,1,4\nB,2,4\n');
    expect(file.plots.map((plot) => plot.entry)).toEqual(['Fennick Row', 'Fennick Row', 'B', 'B']);
  });
});

describe('decimal signs', () => {
  const column = (...cells: string[]) =>
    `entry;rep;yield\n${cells.map((cell, i) => `E${i};1;${cell}`).join('\n')}\n`;
  const quoted = (...cells: string[]) =>
    `entry,rep,yield\n${cells.map((cell, i) => `E${i},1,"${cell}"`).join('\n')}\n`;

  test('thousands and decimals told apart by the file as a whole', () => {
    expect(values(read(column('5.113,5', '4 900,25')))).toEqual([5113.5, 4900.25]);
    expect(values(read(quoted('5,113.5', '4,900')))).toEqual([5113.5, 4900]);
    expect(values(read(quoted('5,11', '4,900')))).toEqual([5.11, 4.9]);
    expect(values(read(column('5,113', '4,900')))).toEqual([5.113, 4.9]);
  });

  test('a figure that nothing decides is refused', () => {
    expect(problemsOf(quoted('5,113', '4,900'))).toEqual([
      '2 yield ambiguous-number',
      '3 yield ambiguous-number',
    ]);
  });

  test('one decimal sign through the file', () => {
    expect(problemsOf(quoted('5.11', '4.93', '4,9'))).toEqual(['4 yield mixed-decimals']);
    expect(problemsOf(column('5,11', '4,93', '4.900'))).toEqual(['4 yield mixed-decimals']);
  });
});

describe('what is refused', () => {
  test('every reason has its sentence, and every sentence its reason', () => {
    expect(Object.keys(english).sort()).toEqual([...problemReasons].sort());
  });

  test('every bad row, by line, column, value and what was expected', () => {
    const file = read(
      [
        'plot,entry,block,row,col,yield,lodging',
        '1,A,1,1,1,5.1,3',
        '1,B,1,1,2,5.0,3',
        '3,,1,1,3,4.8,3',
        '4,D,,1,4,4.8,3',
        '5,E,1,1,5,heavy,3',
        '6,F,1,1,6,-0.1,3',
        '7,G,1,1,7,NaN,3',
        '8,H,1,1,8,1e999,3',
        '9,I,1,1,1,4.7,3',
        '10,J,1,one,9,4.7,3',
        '11,K,1,1,10,4.7,12',
        '12,L,1,1',
        ',M,1,1,11,4.7,3',
      ].join('\n'),
    );
    expect(file.problems.map(({ row, column, value, reason }) => [row, column, value, reason])).toEqual([
      [3, 'plot', '1', 'duplicate-plot'],
      [4, 'entry', null, 'entry-blank'],
      [5, 'block / rep', null, 'place-blank'],
      [6, 'yield', 'heavy', 'not-a-number'],
      [7, 'yield', '-0.1', 'negative-value'],
      [8, 'yield', 'NaN', 'not-finite'],
      [9, 'yield', '1e999', 'not-finite'],
      [10, 'row / col', '1 / 1', 'position-taken'],
      [11, 'row', 'one', 'not-whole'],
      [12, 'lodging', '12', 'outside-scale'],
      [13, null, null, 'cell-count'],
      [14, 'plot', null, 'plot-blank'],
    ]);
    expect(file.problemsTotal).toBe(12);
    expect(file.plots).toEqual([]);
  });

  test('a plot that is two things in two rows', () => {
    const text =
      'plot,entry,block,trait,value\n1,A,1,yield,5\n1,B,1,protein,11\n2,B,1,yield,5\n2,B,1,yield,6\n';
    expect(problemsOf(text)).toEqual(['3 entry plot-conflict', '5 plot duplicate-plot']);
    expect(problemsOf('plot,entry,block,trait,value\n1,A,1,starch,5\n2,B,1,yield,5\n')).toEqual([
      '2 trait trait-unknown',
    ]);
  });

  test('columns that the design needs', () => {
    expect(problemsOf('entry,yield\nA,1\nB,2\n')).toEqual(['1 block / rep missing-column']);
    expect(problemsOf('entry,rep,yield\nA,1,1\n', { design: 'incomplete-blocks' })).toEqual([
      '1 block missing-column',
    ]);
    expect(problemsOf('entry,yield\nA,1\n', { design: 'latin-square' })).toEqual([
      '1 row missing-column',
      '1 col missing-column',
    ]);
    expect(problemsOf('block,yield\n1,1\n')).toEqual(['1 entry missing-column']);
    expect(problemsOf('entry,block,weight\nA,1,1\n')).toEqual(['1 - no-value-column']);
    expect(problemsOf('entry,variety,block,yield\nA,A,1,1\n')).toEqual(['1 variety column-twice']);
    expect(problemsOf('entry,block,yield\nA,1,1\n', { columns: { value: 'grain' } })).toEqual([
      '1 grain named-column-missing',
      '1 - no-value-column',
    ]);
  });

  test('files that hold no trial', () => {
    expect(problemsOf('')).toEqual(['1 - empty-file']);
    expect(problemsOf('entry,block,yield\n')).toEqual(['1 - no-rows']);
    expect(problemsOf('entry,block,yield\n"A,1,1\nB,1,2\n')[0]).toMatch(/broken-quotes$/);
    expect(problemsOf(Uint8Array.of(0x50, 0x4b, 3, 4, 0, 0))).toEqual(['1 - not-text']);
    expect(problemsOf('entry,block,yield\nA,1,1\nA,2,2\n')).toEqual(['1 entry one-entry']);
    expect(problemsOf('entry,block,yield\nA,1,\nB,1,\n')).toEqual(['1 - no-values']);
  });

  test('a file over the limit is refused before it is read', () => {
    const rows = (count: number) => `entry,block,yield\n${'A,1,5.1\n'.repeat(count)}`;
    // Not even decoded: these bytes are no text, which would be said first.
    expect(() => read(`\0${rows(1_000_000)}`)).toThrow('import-too-large');
    expect(() => read(rows(50_001))).toThrow('import-too-large');
    expect(read(rows(3), { rowLimit: 3 }).rows).toBe(3);
    expect(() => read(rows(4), { rowLimit: 3 })).toThrow('import-too-large');
  });

  test('many problems are counted, and the first of them listed', () => {
    const file = read(`entry,block,yield\n${'A,1,x\n'.repeat(1000)}`);
    expect(file.problemsTotal).toBe(1000);
    expect(file.problems).toHaveLength(200);
  });
});

describe('whatever the bytes', () => {
  test('a file is read or refused with reasons, and never breaks the reader', () => {
    const piece = fc.constantFrom(
      ...[
        'entry',
        'block',
        'plot',
        'yield',
        'trait',
        'A',
        '1',
        '5,1',
        '5.1',
        '1,250',
        '-',
        'NaN',
        '',
        '"',
        ' ',
      ],
      ...[',', ';', '\t', '\n', '\r\n', '\ufeff', 'é', '\0', '9'.repeat(400)],
    );
    const text = fc
      .array(piece, { maxLength: 60 })
      .map((pieces) => new TextEncoder().encode(pieces.join('')));
    fc.assert(
      fc.property(fc.oneof(text, fc.uint8Array({ maxLength: 200 })), (bytes) => {
        const file = read(bytes);
        expect(file.plots.length > 0).toBe(file.problemsTotal === 0);
        for (const plot of file.plots)
          for (const value of Object.values(plot.values)) expect(Number.isFinite(value)).toBe(true);
      }),
      { numRuns: 2000 },
    );
  });

  test('delimiter and decimal sign change nothing', () => {
    const rows = fc.array(fc.tuple(fc.integer({ min: 1, max: 4 }), fc.integer({ min: 0, max: 99_999 })), {
      minLength: 2,
      maxLength: 12,
    });
    const write = (of: [number, number][], delimiter: string, sign: string): string =>
      [
        ['entry', 'block', 'yield'].join(delimiter),
        ...of.map(([block, value], i) =>
          [`E${i}`, block, (value / 1000).toFixed(4).replace('.', sign)].join(delimiter),
        ),
      ].join('\n');
    fc.assert(
      fc.property(rows, (of) => {
        const plain = read(write(of, ',', '.'));
        expect(plain.problems).toEqual([]);
        expect(read(write(of, ';', ','))).toEqual(plain);
        expect(read(write(of, '\t', '.'))).toEqual(plain);
        expect(values(plain)).toEqual(of.map(([, value]) => value / 1000));
      }),
    );
  });
});
