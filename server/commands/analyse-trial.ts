import { parseArgs } from 'node:util';
import { AnalysisError } from '#server/stats/analysis-error.ts';
import {
  designKinds,
  type DesignKind,
  type DesignPart,
  type TrialPlot,
} from '#server/stats/trial/trial-data.ts';
import { analyseTrial } from '#server/stats/trial/trial-analysis.ts';
import { printEach, printError, readNumbers, requireColumn, withLines, type Table } from './read-table.ts';

const parts = ['entry', 'rep', 'block', 'row', 'col', 'main', 'sub'] as const satisfies readonly DesignPart[];

/** What each design must find; 'block' may be given as rep where a complete block is a replicate. */
const neededParts: Record<DesignKind, readonly DesignPart[]> = {
  crd: ['entry'],
  rcbd: ['entry', 'block'],
  strips: ['entry', 'block'],
  'latin-square': ['entry', 'row', 'col'],
  'incomplete-blocks': ['entry', 'block'],
  'row-column': ['entry', 'row', 'col'],
  'split-plot': ['block', 'main', 'sub'],
  factorial: [],
};

interface TrialCommand {
  readonly files: readonly string[];
  readonly design: DesignKind;
  readonly response: string;
  readonly check: string | undefined;
  readonly alpha: number;
  readonly factors: readonly string[];
  /** column of each part, as told or by its own name */
  readonly columns: Readonly<Record<DesignPart | 'plot', string>>;
  readonly told: ReadonlySet<string>;
  readonly spatial: boolean;
  /** whether the comparison with the best and the checks that cost more are printed too */
  readonly checks: boolean;
  /** whether each plot's fitted value and residual are printed */
  readonly withResiduals: boolean;
  readonly allowNegative: boolean;
}

/** `trial FILE.csv… --design … --response …`: prints the analyses, returns the exit code. */
export async function runTrial(args: readonly string[]): Promise<number> {
  let command: TrialCommand;
  try {
    command = readCommand(args);
  } catch (error) {
    printError(error instanceof AnalysisError ? error : badOption(error));
    return 2;
  }
  return printEach(command.files, (table) => analyseTable(table, command));
}

function badOption(error: unknown): AnalysisError {
  return new AnalysisError('bad-option', error instanceof Error ? error.message : String(error));
}

function readCommand(args: readonly string[]): TrialCommand {
  const text = { type: 'string' } as const;
  const flag = { type: 'boolean', default: false } as const;
  const { values, positionals } = parseArgs({
    args: [...args],
    allowPositionals: true,
    options: {
      design: text,
      response: text,
      check: text,
      alpha: text,
      factors: text,
      plot: text,
      entry: text,
      rep: text,
      block: text,
      row: text,
      col: text,
      main: text,
      sub: text,
      spatial: flag,
      checks: flag,
      residuals: flag,
      'allow-negative': flag,
    },
  });
  const design = designKinds.find((kind) => kind === values.design);
  if (!design) throw new AnalysisError('unknown-design', `--design is one of ${designKinds.join(' ')}`);
  if (positionals.length === 0) throw new AnalysisError('bad-option', 'say which file to analyse');
  const alpha = values.alpha === undefined ? 0.05 : Number(values.alpha);
  if (!(alpha > 0 && alpha < 1)) throw new AnalysisError('bad-option', '--alpha lies between 0 and 1');
  const factors = (values.factors ?? '').split(',').filter((name) => name !== '');
  if (design === 'factorial' && factors.length === 0)
    throw new AnalysisError('bad-option', 'a factorial needs --factors a,b');
  return {
    files: positionals,
    design,
    response: values.response ?? 'yield',
    check: values.check,
    alpha,
    factors,
    columns: {
      plot: values.plot ?? 'plot',
      entry: values.entry ?? 'entry',
      rep: values.rep ?? 'rep',
      block: values.block ?? 'block',
      row: values.row ?? 'row',
      col: values.col ?? 'col',
      main: values.main ?? 'main',
      sub: values.sub ?? 'sub',
    },
    told: new Set(['plot', ...parts].filter((part) => Object.hasOwn(values, part))),
    spatial: values.spatial,
    checks: values.checks,
    withResiduals: values.residuals,
    allowNegative: values['allow-negative'],
  };
}

function analyseTable(table: Table, command: TrialCommand): unknown {
  const plots = readPlotRows(table, command);
  const { residuals, ...result } = withLines(table, () =>
    analyseTrial(
      plots,
      { kind: command.design, factors: command.factors, termNames: command.columns },
      {
        check: command.check ?? null,
        alpha: command.alpha,
        spatial: command.spatial,
        checks: command.checks,
        comparisons: command.checks,
        allowNegative: command.allowNegative,
      },
    ),
  );
  const { largestStudentised: largest } = result.diagnostics;
  const diagnostics = {
    ...result.diagnostics,
    largestStudentised: largest && { ...largest, plot: asWritten(largest.plot) },
  };
  return { ...result, diagnostics, ...(command.withResiduals ? { residuals } : {}) };
}

function readPlotRows(table: Table, command: TrialCommand): TrialPlot[] {
  const { design, columns, told } = command;
  const at = (name: string, isNeeded: boolean) =>
    isNeeded ? requireColumn(table, name) : table.columns.indexOf(name);
  const needed = new Set(neededParts[design]);
  const repIsBlock =
    needed.has('block') && design !== 'incomplete-blocks' && !table.columns.includes(columns.block);
  if (repIsBlock && table.columns.includes(columns.rep) && !told.has('block')) needed.delete('block');
  const place = {
    plot: at(columns.plot, told.has('plot')),
    entry: at(columns.entry, needed.has('entry') || told.has('entry')),
    rep: at(columns.rep, told.has('rep')),
    block: at(columns.block, needed.has('block') || told.has('block')),
    row: at(columns.row, needed.has('row') || told.has('row')),
    col: at(columns.col, needed.has('col') || told.has('col')),
    main: at(columns.main, needed.has('main') || told.has('main')),
    sub: at(columns.sub, needed.has('sub') || told.has('sub')),
    excluded: table.columns.indexOf('excluded'),
  };
  const factorColumns = command.factors.map(
    (name) => [name, levelReader(table, requireColumn(table, name))] as const,
  );
  const readMain = levelReader(table, place.main);
  const readSub = levelReader(table, place.sub);
  const values = readNumbers(table, requireColumn(table, command.response));
  const cell = (row: readonly string[], column: number) => (column < 0 ? null : (row[column] ?? '') || null);
  return table.rows.map((row, i) => {
    const main = design === 'split-plot' ? readMain(row) : null;
    const sub = design === 'split-plot' ? readSub(row) : null;
    const levels = factorColumns.map(([name, read]) => [name, read(row) ?? ''] as const);
    return {
      plot: cell(row, place.plot) ?? String(i + 1),
      entry: entryOf(design, cell(row, place.entry), sub, levels),
      rep: cell(row, place.rep),
      block: cell(row, place.block),
      row: cell(row, place.row),
      col: cell(row, place.col),
      main,
      sub,
      factors: levels.length > 0 ? Object.fromEntries(levels) : null,
      value: values[i]!,
      excluded: cell(row, place.excluded),
    };
  });
}

/** A plot's number as a number, any other name as text: as a reader of the file would take it. */
function asWritten(plot: string): string | number {
  return /^(0|[1-9]\d{0,14})$/.test(plot) ? Number(plot) : plot;
}

/** What a plot is compared as; a factorial's combination takes the place of the entry. */
function entryOf(
  design: DesignKind,
  entry: string | null,
  sub: string | null,
  levels: readonly (readonly [string, string])[],
): string {
  if (design === 'factorial') return levels.map(([, level]) => level).join(':');
  return (design === 'split-plot' ? sub : entry) ?? '';
}

/** Reads a factor's levels; where all are numbers, 0.0 and 0 are the same dose. */
function levelReader(table: Table, column: number): (row: readonly string[]) => string | null {
  const isNumeric =
    column >= 0 &&
    table.rows.every((row) => row[column] === '' || Number.isFinite(Number(row[column] ?? '')));
  return (row) => {
    const text = column < 0 ? '' : (row[column] ?? '');
    if (text === '') return null;
    return isNumeric ? String(Number(text)) : text;
  };
}
