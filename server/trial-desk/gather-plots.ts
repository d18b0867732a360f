import type { TrialDesign } from '#shared/trial.ts';
import { neededPlaces } from './design-columns.ts';
import type { MatchedColumns } from './match-columns.ts';
import { cellOf, headerOf, openRowReader, readRow, type ReadableTrait, type ReadPlot } from './read-row.ts';
import type { ProblemList } from './row-problems.ts';
import type { FileTable } from './split-records.ts';

/** A plot with the row that told of it first. */
type KnownPlot = { plot: ReadPlot; row: number };

/** Reads all rows of a file into plots; whatever is wrong goes to the problems. */
export function gatherPlots(
  table: FileTable,
  columns: MatchedColumns,
  { traits, design }: { traits: readonly ReadableTrait[]; design: TrialDesign },
  problems: ProblemList,
): ReadPlot[] {
  const reader = openRowReader(table, columns, traits, problems);
  const isLong = columns.fields.trait !== undefined;
  const plots = new Map<string, KnownPlot>();
  const positions = new Map<string, KnownPlot>();
  table.records.forEach((record, i) => {
    if (record.cells.length !== table.header.length) {
      const counts = { expected: table.header.length, found: record.cells.length };
      problems.add('cell-count', { row: record.line }, counts);
      return;
    }
    const plot = readRow(reader, record, i);
    if (plot === null) return;
    for (const place of neededPlaces[design]) {
      if (place.some((field) => cellOf(reader, record, field) !== '')) continue;
      const column = place.map((field) => headerOf(reader, field)).join(' / ');
      problems.add('place-blank', { row: record.line, column });
    }
    const known = plots.get(plot.plotNumber);
    if (known !== undefined) {
      joinRow(known, { plot, row: record.line }, isLong, problems);
      return;
    }
    plots.set(plot.plotNumber, { plot, row: record.line });
    claimPosition({ plot, row: record.line }, design, positions, problems);
  });
  const read = [...plots.values()].map(({ plot }) => plot);
  if (problems.total() === 0) checkWhole(read, problems);
  return read;
}

/** A plot told by several rows, one for each trait, must be the same plot in all of them. */
function joinRow(known: KnownPlot, { plot, row }: KnownPlot, isLong: boolean, problems: ProblemList): void {
  const firstRow = known.row;
  const isRepeated = Object.keys(plot.values).some((slug) => slug in known.plot.values);
  if (!isLong || isRepeated) {
    problems.add('duplicate-plot', { row, column: 'plot', value: plot.plotNumber }, { firstRow });
    return;
  }
  const places = ['entry', 'rep', 'block', 'row', 'col', 'mainLevel'] as const;
  const differing = places.find((place) => plot[place] !== known.plot[place]);
  if (differing === undefined) {
    Object.assign(known.plot.values, plot.values);
    return;
  }
  problems.add(
    'plot-conflict',
    { row, column: differing, value: String(plot[differing] ?? '') },
    { firstRow, plot: plot.plotNumber, first: String(known.plot[differing] ?? '') },
  );
}

/** No two plots lie in one place; row-column designs often count their rows and columns within each replicate. */
function claimPosition(
  claim: KnownPlot,
  design: TrialDesign,
  positions: Map<string, KnownPlot>,
  problems: ProblemList,
): void {
  const { plot, row } = claim;
  if (plot.row === null || plot.col === null) return;
  const place = `${plot.row} / ${plot.col}`;
  const value = design === 'row-column' && plot.rep !== null ? `${plot.rep} / ${place}` : place;
  const taken = positions.get(value);
  if (taken === undefined) {
    positions.set(value, claim);
    return;
  }
  const where = { row, column: 'row / col', value };
  problems.add('position-taken', where, { firstRow: taken.row, plot: taken.plot.plotNumber });
}

function checkWhole(plots: readonly ReadPlot[], problems: ProblemList): void {
  if (new Set(plots.map((plot) => plot.entry)).size < 2) problems.add('one-entry', { column: 'entry' });
  if (plots.every((plot) => Object.keys(plot.values).length === 0)) problems.add('no-values', {});
}
