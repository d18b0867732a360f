import type { RowProblem } from '#shared/trial-desk.ts';
import type { TrialDesign } from '#shared/trial.ts';
import type { YieldUnit } from '#shared/units.ts';
import { CodedError } from '#shared/error-codes.ts';
import { decodeText } from './decode-text.ts';
import { matchColumns, type ColumnChoice, type MatchedColumns } from './match-columns.ts';
import { neededPlaces } from './design-columns.ts';
import { gatherPlots } from './gather-plots.ts';
import type { ReadableTrait, ReadPlot } from './read-row.ts';
import { openProblemList, type ProblemList } from './row-problems.ts';
import { splitRecords, type FileTable } from './split-records.ts';

export type ReadOptions = Omit<ColumnChoice, 'traits'> & {
  design: TrialDesign;
  traits: readonly ReadableTrait[];
  rowLimit: number;
};

export type ReadFile = {
  rows: number;
  plots: ReadPlot[];
  /** Trait slugs in the order of the file. */
  traits: string[];
  /** Unit that the header of the yield column states; null where it states none. */
  statedUnit: YieldUnit | null;
  problems: RowProblem[];
  problemsTotal: number;
};

/**
 * Reads a file of plots: one row a plot, or one row a plot and trait. Delimiter, encoding, decimal sign and columns are
 * found from the file. Pure: nothing is looked up or stored. A file with problems has no usable plots.
 * @throws CodedError import-too-large when it has more rows than the limit; told before anything is read in detail
 */
export function readLongCsv(bytes: Uint8Array, options: ReadOptions): ReadFile {
  refuseTooManyLines(bytes, options.rowLimit);
  const problems = openProblemList();
  const text = decodeText(bytes);
  if (text === null) {
    problems.add('not-text', {});
    return refuse(problems, 0);
  }
  const table = splitRecords(text, options.rowLimit);
  if ('fault' in table) {
    problems.add(table.fault, { row: table.line });
    return refuse(problems, 0);
  }
  const rows = table.records.length;
  if (rows > options.rowLimit)
    throw new CodedError('import-too-large', { values: { limit: options.rowLimit } });
  const columns = findColumns(table, options, problems);
  if (columns === null) return refuse(problems, rows);
  const plots = gatherPlots(table, columns, options, problems);
  const [yieldColumn] = columns.values.filter((column) => column.traitSlug === 'yield');
  if (problems.total() > 0) return refuse(problems, rows);
  return {
    rows,
    plots,
    traits: [...new Set(plots.flatMap((plot) => Object.keys(plot.values)))],
    statedUnit: yieldColumn?.statedUnit ?? null,
    problems: [],
    problemsTotal: 0,
  };
}

function refuse(problems: ProblemList, rows: number): ReadFile {
  return {
    rows,
    plots: [],
    traits: [],
    statedUnit: null,
    problems: problems.list(),
    problemsTotal: problems.total(),
  };
}

/** Counts line ends only, which takes milliseconds; a quoted cell with line ends in it is why twice the limit passes. */
function refuseTooManyLines(bytes: Uint8Array, rowLimit: number): void {
  let lines = 0;
  for (let at = bytes.indexOf(10); at >= 0; at = bytes.indexOf(10, at + 1)) {
    lines += 1;
    if (lines > 2 * rowLimit) throw new CodedError('import-too-large', { values: { limit: rowLimit } });
  }
}

/** The columns of the file; null, with what is missing among the problems, where plots cannot be read from them. */
function findColumns(table: FileTable, options: ReadOptions, problems: ProblemList): MatchedColumns | null {
  const { matched, faults } = matchColumns(table.header, options);
  for (const { reason, column } of faults) problems.add(reason, { column });
  const { fields, factors, values } = matched;
  const missing = (column: string): void => problems.add('missing-column', { column }, { column });
  if (options.design === 'factorial') {
    if (factors.length === 0) missing('factors');
  } else if (fields.entry === undefined) missing('entry');
  for (const place of neededPlaces[options.design]) {
    if (place.every((field) => fields[field] === undefined)) missing(place.join(' / '));
  }
  if (fields.trait !== undefined) {
    if (fields.value === undefined) missing('value');
    if (fields.plot === undefined) missing('plot');
  } else if (values.length === 0) problems.add('no-value-column', {}, { trait: options.trait });
  if (problems.total() > 0) return null;
  if (table.records.length === 0) problems.add('no-rows', {});
  return problems.total() > 0 ? null : matched;
}
