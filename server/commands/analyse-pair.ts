import { parseArgs } from 'node:util';
import { AnalysisError } from '#server/stats/analysis-error.ts';
import { synthesisePair } from '#server/stats/network/pair-synthesis.ts';
import { printEach, printError, readNumbers, requireColumn, withLines, type Table } from './read-table.ts';

/** `pair DIFFS.csv…` with columns estimate and variance; returns the exit code. */
export async function runPair(args: readonly string[]): Promise<number> {
  let files: string[];
  try {
    files = parseArgs({ args: [...args], allowPositionals: true, options: {} }).positionals;
    if (files.length === 0) throw new AnalysisError('bad-option', 'say which file to analyse');
  } catch (error) {
    printError(error instanceof AnalysisError ? error : new AnalysisError('bad-option', String(error)));
    return 2;
  }
  return printEach(files, synthesiseTable);
}

function synthesiseTable(table: Table): unknown {
  const estimates = readNumbers(table, requireColumn(table, 'estimate'));
  const variances = readNumbers(table, requireColumn(table, 'variance'));
  const rows = table.rows.flatMap((_, i) => (estimates[i] === null ? [] : [i]));
  const bare = rows.filter((i) => variances[i] === null);
  if (bare.length > 0)
    throw new AnalysisError(
      'bad-variance',
      'an estimate without variance',
      bare.map((i) => table.lines[i]!),
    );
  return withLines({ ...table, lines: rows.map((i) => table.lines[i]!) }, () =>
    synthesisePair(rows.map((i) => ({ estimate: estimates[i]!, variance: variances[i]! }))),
  );
}
