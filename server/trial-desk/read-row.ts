import type { TrialContent } from '#shared/trial-content.ts';
import { plainHeader, type ColumnField, type MatchedColumns } from './match-columns.ts';
import { findDecimalSign, isMissingMark, readFigure, type DecimalSign } from './read-figure.ts';
import type { ProblemList } from './row-problems.ts';
import type { FileRecord, FileTable } from './split-records.ts';

/** A trait as the file may name it, with the values it can take. */
export type ReadableTrait = { slug: string; names: readonly string[]; min: number; max: number };

/** A plot as the file tells it: content without a reason to leave it out, and whether the file calls its entry a check. */
export type ReadPlot = Omit<TrialContent['plots'][number], 'excludedReason'> & { isCheck: boolean };

/** What the rows of one file are read by. */
export type RowReader = {
  header: readonly string[];
  columns: MatchedColumns;
  traitsBySlug: ReadonlyMap<string, ReadableTrait>;
  /** By plain header. */
  traitsByName: ReadonlyMap<string, ReadableTrait>;
  sign: DecimalSign;
  /** The spelling of each entry that was met first, by the spelling without case and doubled spaces. */
  spellings: Map<string, string>;
  problems: ProblemList;
};

/** One cell that should hold the value of a trait. */
type ValueCell = { trait: ReadableTrait; column: string; text: string };

/** Labels longer than this are a shifted column or a note, not a name. */
const longestLabel = 120;
const checkMarks = /^(check|t[eé]moin|yes|oui|true|1)$/i;

export function openRowReader(
  table: FileTable,
  columns: MatchedColumns,
  traits: readonly ReadableTrait[],
  problems: ProblemList,
): RowReader {
  const reader: RowReader = {
    header: table.header,
    columns,
    traitsBySlug: new Map(traits.map((trait) => [trait.slug, trait])),
    traitsByName: new Map(
      traits.flatMap((trait) => trait.names.map((name) => [plainHeader(name), trait] as const)),
    ),
    sign: 'point',
    spellings: new Map(),
    problems,
  };
  const figures = table.records.flatMap((record) => findValueCells(reader, record).map((cell) => cell.text));
  return { ...reader, sign: findDecimalSign(figures, table.delimiter) };
}

/** What a row has in the column of a field; '' where the file has no such column. */
export function cellOf({ columns }: RowReader, record: FileRecord, field: ColumnField): string {
  return record.cells[columns.fields[field] ?? -1] ?? '';
}

/** The header of a field's column as the file writes it. */
export function headerOf({ columns, header }: RowReader, field: ColumnField): string {
  return header[columns.fields[field] ?? -1] ?? field;
}

/**
 * Reads one row as a plot with the values that it tells.
 * @param index place of the row among the rows: its plot number where the file has none
 * @returns null where the row names no entry or no plot; what is wrong is among the reader's problems
 */
export function readRow(reader: RowReader, record: FileRecord, index: number): ReadPlot | null {
  const { columns, problems } = reader;
  const entry = readEntry(reader, record);
  const plotNumber = columns.fields.plot === undefined ? String(index + 1) : cellOf(reader, record, 'plot');
  if (plotNumber === '') problems.add('plot-blank', { row: record.line, column: headerOf(reader, 'plot') });
  const values = readValues(reader, record);
  const [row, col] = [readPosition(reader, record, 'row'), readPosition(reader, record, 'col')];
  if (entry === null || plotNumber === '') return null;
  return {
    plotNumber,
    entry,
    rep: cellOf(reader, record, 'rep') || null,
    block: cellOf(reader, record, 'block') || null,
    row,
    col,
    mainLevel: cellOf(reader, record, 'main') || null,
    factorLevels: readFactors(reader, record),
    values,
    isCheck: checkMarks.test(cellOf(reader, record, 'check')),
  };
}

function readFactors({ columns }: RowReader, record: FileRecord): Record<string, string> | null {
  if (columns.factors.length === 0) return null;
  return Object.fromEntries(columns.factors.map(({ name, index }) => [name, record.cells[index] ?? '']));
}

/** The entry's label; that of a factorial is its levels, joined. */
function readEntry(reader: RowReader, record: FileRecord): string | null {
  const { factors } = reader.columns;
  const parts =
    factors.length === 0
      ? [cellOf(reader, record, 'entry')]
      : factors.map(({ index }) => record.cells[index] ?? '');
  const column =
    factors.length === 0 ? headerOf(reader, 'entry') : factors.map(({ name }) => name).join(' / ');
  const where = { row: record.line, column };
  if (parts.includes('')) {
    reader.problems.add('entry-blank', where);
    return null;
  }
  const label = parts.join(':').replace(/\s+/g, ' ');
  if (label.length > longestLabel) {
    reader.problems.add('too-long', { ...where, value: label }, { limit: longestLabel });
    return null;
  }
  const key = label.toLowerCase();
  const first = reader.spellings.get(key) ?? label;
  reader.spellings.set(key, first);
  return first;
}

function readPosition(reader: RowReader, record: FileRecord, field: 'row' | 'col'): number | null {
  const value = cellOf(reader, record, field);
  if (value === '') return null;
  if (/^\d{1,5}$/.test(value)) return Number(value);
  reader.problems.add('not-whole', { row: record.line, column: headerOf(reader, field), value });
  return null;
}

function readValues(reader: RowReader, record: FileRecord): Record<string, number> {
  const { columns, problems, traitsByName, traitsBySlug } = reader;
  const named = cellOf(reader, record, 'trait');
  if (columns.fields.trait !== undefined && !traitsByName.has(plainHeader(named))) {
    const where = { row: record.line, column: headerOf(reader, 'trait'), value: named };
    problems.add('trait-unknown', where, { known: [...traitsBySlug.keys()].join(', ') });
  }
  const values: Record<string, number> = {};
  for (const cell of findValueCells(reader, record)) {
    const value = readValue(cell, reader.sign, record.line, problems);
    if (value !== null) values[cell.trait.slug] = value;
  }
  return values;
}

function findValueCells(reader: RowReader, record: FileRecord): ValueCell[] {
  const { columns, traitsByName, traitsBySlug } = reader;
  if (columns.fields.trait !== undefined) {
    const trait = traitsByName.get(plainHeader(cellOf(reader, record, 'trait')));
    if (trait === undefined) return [];
    return [{ trait, column: headerOf(reader, 'value'), text: cellOf(reader, record, 'value') }];
  }
  return columns.values.flatMap(({ traitSlug, header, index }) => {
    const trait = traitsBySlug.get(traitSlug);
    return trait === undefined ? [] : [{ trait, column: header, text: record.cells[index] ?? '' }];
  });
}

/** The value of a cell; null where nothing was measured or the cell is refused. */
function readValue(
  { trait, column, text }: ValueCell,
  sign: DecimalSign,
  row: number,
  problems: ProblemList,
): number | null {
  if (isMissingMark(text)) return null;
  const value = readFigure(text, sign);
  const where = { row, column, value: text };
  if (typeof value !== 'number') {
    problems.add(value, where);
    return null;
  }
  if (value < 0 && trait.min >= 0) {
    problems.add('negative-value', where);
    return null;
  }
  if (value < trait.min || value > trait.max) {
    const max = Number.isFinite(trait.max) ? trait.max : '∞';
    problems.add('outside-scale', where, { min: trait.min, max });
    return null;
  }
  return value;
}
