import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import { AnalysisError } from '#server/stats/analysis-error.ts';

/** A CSV file with a header, as text. */
export interface Table {
  readonly columns: readonly string[];
  readonly rows: readonly (readonly string[])[];
  /** line of each row in the file; the header is line 1 */
  readonly lines: readonly number[];
}

/** Longer files hold more than one trial or one network. */
const mostLines = 50_000;

const number = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/;
const infinite = /^[+-]?inf(inity)?$|^nan$/i;

/**
 * Reads a comma-, semicolon- or tab-separated file.
 * @throws AnalysisError unreadable-file, no-values
 */
export function readTable(path: string): Table {
  let text: string;
  try {
    text = readFileSync(path, 'utf8').replace(/^\uFEFF/, '');
  } catch {
    throw new AnalysisError('unreadable-file', `cannot read ${path}`);
  }
  refuseLong(text);
  const records = text.includes('"') ? readQuoted(text) : readPlain(text);
  const header = records[0];
  if (!header) throw new AnalysisError('no-values', `${path} is empty`);
  const columns = header.fields.map((name) => name.trim());
  if (new Set(columns).size !== columns.length)
    throw new AnalysisError('unreadable-file', 'a column name appears twice', [1]);
  const body = records.slice(1);
  const odd = body.filter((record) => record.fields.length !== columns.length).map((record) => record.line);
  if (odd.length > 0)
    throw new AnalysisError('unreadable-file', 'rows with more or fewer fields than the header', odd);
  return {
    columns,
    rows: body.map((record) => record.fields),
    lines: body.map((record) => record.line),
  };
}

/** Counts lines before anything is split: a file that is far too long is refused at once. */
function refuseLong(text: string): void {
  let lines = 0;
  for (let at = text.indexOf('\n'); at >= 0; at = text.indexOf('\n', at + 1)) lines++;
  if (lines > mostLines)
    throw new AnalysisError('too-large', `${lines} lines; at most ${mostLines} are read`, [mostLines + 1]);
}

interface RecordOfFields {
  readonly fields: string[];
  readonly line: number;
}

function readQuoted(text: string): RecordOfFields[] {
  try {
    const parsed: unknown = parse(text, {
      delimiter: delimiterOf(text),
      info: true,
      relax_column_count: true,
      skip_empty_lines: true,
      trim: true,
    });
    const rows = parsed as { record: string[]; info: { lines: number } }[];
    return rows.map(({ record, info }) => ({ fields: record, line: info.lines }));
  } catch (error) {
    throw new AnalysisError('unreadable-file', error instanceof Error ? error.message : 'not a CSV file');
  }
}

/** Without quotes a line is a record: several times faster than the parser, which matters for long files. */
function readPlain(text: string): RecordOfFields[] {
  const delimiter = delimiterOf(text);
  const records: RecordOfFields[] = [];
  text.split(/\r\n|\n|\r/).forEach((line, i) => {
    if (line.trim() === '') return;
    records.push({ fields: line.split(delimiter).map((field) => field.trim()), line: i + 1 });
  });
  return records;
}

function delimiterOf(text: string): string {
  const header = text.slice(0, text.search(/[\r\n]|$/));
  return [',', ';', '\t'].find((mark) => header.includes(mark)) ?? ',';
}

/** @throws AnalysisError missing-column */
export function requireColumn(table: Table, name: string): number {
  const at = table.columns.indexOf(name);
  if (at < 0) throw new AnalysisError('missing-column', `no column is named ${name}`, [1]);
  return at;
}

/**
 * A column of numbers, null where the cell is empty.
 * @throws AnalysisError not-a-number, not-finite, with lines of the file
 */
export function readNumbers(table: Table, column: number): (number | null)[] {
  const texts: number[] = [];
  const endless: number[] = [];
  const values = table.rows.map((row, i) => {
    const text = row[column] ?? '';
    if (text === '') return null;
    const value = number.test(text) ? Number(text) : Number.NaN;
    if (Number.isFinite(value)) return value;
    (number.test(text) || infinite.test(text) ? endless : texts).push(table.lines[i]!);
    return null;
  });
  const name = table.columns[column]!;
  if (texts.length > 0)
    throw new AnalysisError('not-a-number', `text where ${name} should be a number`, texts);
  if (endless.length > 0) throw new AnalysisError('not-finite', `${name} is not a finite number`, endless);
  return values;
}

/** Runs an analysis for each file and prints one line of JSON for each; the exit code is 2 where one failed. */
export function printEach(files: readonly string[], analyse: (table: Table) => unknown): number {
  let exitCode = 0;
  for (const file of files) {
    try {
      console.log(JSON.stringify(analyseFile(file, analyse)));
    } catch (error) {
      if (!(error instanceof AnalysisError)) throw error;
      printError(error);
      exitCode = 2;
    }
  }
  return exitCode;
}

/** Rows at fault that are named; the message counts them all. */
const mostRows = 1000;

export function printError({ code, message, rows }: AnalysisError): void {
  console.log(JSON.stringify({ error: { code, message, rows: rows.slice(0, mostRows) } }));
}

function analyseFile(file: string, analyse: (table: Table) => unknown): unknown {
  const table = readTable(file);
  return analyse(table);
}

/** Runs an engine call on rows of the table and turns its row numbers into lines of the file. */
export function withLines<Result>(table: Table, call: () => Result): Result {
  try {
    return call();
  } catch (error) {
    if (!(error instanceof AnalysisError)) throw error;
    throw new AnalysisError(
      error.code,
      error.message,
      error.rows.map((row) => table.lines[row - 1] ?? row),
    );
  }
}
