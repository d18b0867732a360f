import { parse } from 'csv-parse/sync';

/** One record of a file with the line it begins on, the header being line 1. */
export type FileRecord = { line: number; cells: string[] };

export type FileTable = { delimiter: Delimiter; header: string[]; records: FileRecord[] };
export type Delimiter = ',' | ';' | '\t';

/** Why a text is no table. */
export type TableFault = { fault: 'empty-file' | 'broken-quotes'; line: number };

/**
 * Cuts a text into records. Lines without any content are passed over.
 * @param mostRecords reading stops after one record more, so that a huge file costs no more than a large one
 */
export function splitRecords(text: string, mostRecords: number): FileTable | TableFault {
  const delimiter = findDelimiter(text);
  const records: FileRecord[] = [];
  try {
    parse(text, {
      delimiter,
      bom: true,
      relax_column_count: true,
      skip_empty_lines: true,
      to: mostRecords + 2,
      on_record: (raw: string[], context) => {
        const cells = raw.map((cell) => cell.trim());
        if (cells.some((cell) => cell !== '')) records.push({ line: context.lines, cells });
        return raw;
      },
    });
  } catch (error) {
    return { fault: 'broken-quotes', line: lineOf(error) };
  }
  const [header, ...rest] = records;
  if (header === undefined) return { fault: 'empty-file', line: 1 };
  return { delimiter, header: header.cells, records: rest };
}

/** The sign that the first line with any of them holds most of, quoted parts aside. */
function findDelimiter(text: string): Delimiter {
  const lines = text.slice(0, 20_000).split(/\r\n|\n|\r/);
  const header = (lines.find((line) => line.trim() !== '') ?? '').replace(/"[^"]*"/g, '');
  const count = (sign: Delimiter): number => header.split(sign).length - 1;
  const [best] = ([';', '\t', ','] as const).toSorted((a, b) => count(b) - count(a));
  return best ?? ',';
}

function lineOf(error: unknown): number {
  return error instanceof Error && 'lines' in error && typeof error.lines === 'number' ? error.lines : 1;
}
