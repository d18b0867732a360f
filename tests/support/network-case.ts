import { readFileSync } from 'node:fs';
import { gunzipSync } from 'node:zlib';
import type { TrialCell } from '#server/stats/network/network-cell.ts';
import { readReferenceJson, readReferenceRows, type Expected } from './reference-case.ts';

/** Cells of a case's stage 1 as R found them. */
export function toCells(stage1: Expected): TrialCell[] {
  return Array.from(stage1, (cell) => ({
    entry: String(cell['entry']),
    site: String(cell['site']),
    year: String(cell['year']),
    mean: Number(cell['mean']),
    variance: Number(cell['variance']),
  }));
}

export function readNetworkCase(name: string): Expected {
  return readReferenceJson(`open/${name}/expected.json`);
}

/** One mean a cell, without error of its own: the interaction is the error. */
export function readBarley(): TrialCell[] {
  return readReferenceRows('open/A-barley/plots.csv').map((row) => ({
    entry: row['entry']!,
    site: row['site']!,
    year: row['year']!,
    mean: Number(row['yield']),
    variance: 0,
  }));
}

export function readBigNetwork(): TrialCell[] {
  const packed = readFileSync(new URL('../reference/open/big-network/cells.csv.gz', import.meta.url));
  const [, ...lines] = gunzipSync(packed).toString('utf8').trimEnd().split('\n');
  return lines.map((line) => {
    const [entry, site, year, mean, variance] = line.split(',');
    return { entry: entry!, site: site!, year: year!, mean: Number(mean), variance: Number(variance) };
  });
}

/** Means of the levels of two columns, in the order in which they appear. */
export function averageBy(
  rows: readonly Record<string, string>[],
  entry: string,
  environment: string,
  value: string,
): { entry: string; environment: string; mean: number }[] {
  const sums = new Map<string, { entry: string; environment: string; sum: number; count: number }>();
  for (const row of rows) {
    const key = `${row[entry]}\u0000${row[environment]}`;
    const cell = sums.get(key) ?? { entry: row[entry]!, environment: row[environment]!, sum: 0, count: 0 };
    sums.set(key, { ...cell, sum: cell.sum + Number(row[value]), count: cell.count + 1 });
  }
  return [...sums.values()].map(({ sum, count, ...cell }) => ({ ...cell, mean: sum / count }));
}
