import { readFileSync } from 'node:fs';
import { parse } from 'csv-parse/sync';
import type { TrialPlot } from '#server/stats/trial/trial-data.ts';

const root = new URL('../reference/', import.meta.url);

/** A value of expected.json, walked by key; absent keys give undefined and so a failing comparison. */
export type Expected = { readonly [key: string]: Expected } & readonly Expected[] & (number | string | null);

/** The rows of a file under tests/reference, as text by column. */
export function readReferenceRows(path: string): Record<string, string>[] {
  const rows: unknown = parse(readFileSync(new URL(path, root)), { columns: true, skip_empty_lines: true });
  return rows as Record<string, string>[];
}

export function readReferenceJson(path: string): Expected {
  return JSON.parse(readFileSync(new URL(path, root), 'utf8')) as Expected;
}

/** Columns of a reference file that play the parts of a design. */
export interface CaseColumns {
  readonly entry?: string;
  readonly rep?: string;
  readonly block?: string;
  readonly row?: string;
  readonly col?: string;
  readonly main?: string;
  readonly sub?: string;
  readonly value?: string;
  readonly factors?: readonly string[];
}

/** Plots from rows of text; an empty value is a missing plot. */
export function toPlots(rows: readonly Record<string, string>[], columns: CaseColumns): TrialPlot[] {
  const pick = (row: Record<string, string>, column: string | undefined) =>
    column ? (row[column] ?? null) : null;
  return rows.map((row, i) => {
    const value = row[columns.value ?? 'yield'] ?? '';
    const factors = columns.factors
      ? Object.fromEntries(columns.factors.map((f) => [f, row[f] ?? '']))
      : null;
    return {
      plot: row['plot'] ?? String(i + 1),
      entry:
        pick(row, columns.entry ?? 'entry') ??
        pick(row, columns.sub) ??
        Object.values(factors ?? {}).join(':'),
      rep: pick(row, columns.rep),
      block: pick(row, columns.block),
      row: pick(row, columns.row),
      col: pick(row, columns.col),
      main: pick(row, columns.main),
      sub: pick(row, columns.sub),
      factors,
      value: value === '' ? null : Number(value),
    };
  });
}

/** A case of tests/reference/open: its plots and what R (or exact arithmetic) says of them. */
export function readCase(name: string, columns: CaseColumns): { plots: TrialPlot[]; expected: Expected } {
  return {
    plots: toPlots(readReferenceRows(`open/${name}/plots.csv`), columns),
    expected: readReferenceJson(`open/${name}/expected.json`),
  };
}
