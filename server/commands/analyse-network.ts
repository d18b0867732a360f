import { parseArgs } from 'node:util';
import { AnalysisError } from '#server/stats/analysis-error.ts';
import { combineTrials, type CombineOptions } from '#server/stats/network/combine-trials.ts';
import type { InteractionVariances, TrialCell } from '#server/stats/network/network-cell.ts';
import { printEach, printError, readNumbers, requireColumn, withLines, type Table } from './read-table.ts';

interface NetworkCommand {
  readonly files: readonly string[];
  readonly options: CombineOptions;
}

/** `network CELLS.csv… [--penalty 3 --usual site,year,rest [--spread S] | --penalty 0] [--current NAME]`; returns the exit code. */
export async function runNetwork(args: readonly string[]): Promise<number> {
  let command: NetworkCommand;
  try {
    command = readCommand(args);
  } catch (error) {
    printError(error instanceof AnalysisError ? error : new AnalysisError('bad-option', String(error)));
    return 2;
  }
  return printEach(command.files, (table) => combineTable(table, command.options));
}

function readCommand(args: readonly string[]): NetworkCommand {
  const text = { type: 'string' } as const;
  const { values, positionals } = parseArgs({
    args: [...args],
    allowPositionals: true,
    options: { penalty: text, usual: text, spread: text, current: text },
  });
  if (positionals.length === 0) throw new AnalysisError('bad-option', 'say which file to analyse');
  const penalty = values.penalty === undefined ? 3 : Number(values.penalty);
  if (!(penalty >= 0 && Number.isFinite(penalty)))
    throw new AnalysisError('bad-option', '--penalty is a number of at least 0');
  return {
    files: positionals,
    options: {
      penalty,
      ...(values.usual !== undefined && { usual: readUsual(values.usual) }),
      ...(values.spread !== undefined && { spread: Number(values.spread) }),
      ...(values.current !== undefined && { current: values.current }),
    },
  };
}

function readUsual(text: string): InteractionVariances {
  const numbers = text.split(',').map((part) => (part.trim() === '' ? Number.NaN : Number(part)));
  const [site, year, rest] = numbers;
  if (numbers.length !== 3 || numbers.some((x) => !(x > 0 && Number.isFinite(x))))
    throw new AnalysisError('bad-option', '--usual is three positive variances: site,year,rest');
  return { site: site!, year: year!, rest: rest! };
}

function combineTable(table: Table, options: CombineOptions): unknown {
  const { cells, lines } = readCells(table);
  const result = withLines({ ...table, lines }, () => combineTrials(cells, options));
  if (result.outcome === 'not-fitted') throw new AnalysisError('no-values', messages[result.reason]);
  const { outcome: _, ...rest } = result;
  return rest;
}

const messages = {
  'no-residual': 'as many effects as cells: nothing is left over to estimate variances from',
  'no-variation': 'the cells are perfectly additive: there is no variance to estimate',
  'not-converged': 'the variances did not settle',
};

/** Rows with a mean; an empty mean is an entry that was not harvested. */
function readCells(table: Table): { cells: TrialCell[]; lines: number[] } {
  const entry = requireColumn(table, 'entry');
  const site = requireColumn(table, 'site');
  const year = requireColumn(table, 'year');
  const trial = table.columns.indexOf('trial');
  const means = readNumbers(table, requireColumn(table, 'mean'));
  const variances = readNumbers(table, requireColumn(table, 'variance'));
  const rows = table.rows.flatMap((_, i) => (means[i] === null ? [] : [i]));
  const nameless = rows.filter((i) => [entry, site, year].some((column) => table.rows[i]![column] === ''));
  const linesOf = (picked: readonly number[]): number[] => picked.map((i) => table.lines[i]!);
  if (nameless.length > 0)
    throw new AnalysisError('missing-level', 'entry, site or year is empty', linesOf(nameless));
  const bare = rows.filter((i) => variances[i] === null);
  if (bare.length > 0) throw new AnalysisError('bad-variance', 'a mean without variance', linesOf(bare));
  return {
    lines: linesOf(rows),
    cells: rows.map((i) => {
      const row = table.rows[i]!;
      const name = trial < 0 ? '' : row[trial]!;
      return {
        entry: row[entry]!,
        site: row[site]!,
        year: row[year]!,
        mean: means[i]!,
        variance: variances[i]!,
        ...(name !== '' && { trial: name }),
      };
    }),
  };
}
