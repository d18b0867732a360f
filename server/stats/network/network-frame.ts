import { AnalysisError } from '#server/stats/analysis-error.ts';
import type { TrialCell } from './network-cell.ts';

export interface NetworkEnvironment {
  readonly key: string;
  readonly site: string;
  readonly year: string;
  /** plain mean of the cells that stood in it; taken off every cell before fitting */
  readonly offset: number;
}

/**
 * Cells indexed for the kernels: sorted by entry, within an entry by environment.
 * Notation: entries i, environments j; Z_i = [1 | sites | years] of the entry, q_i columns wide.
 */
export interface NetworkFrame {
  /** sorted: by number where all names are numbers, else by code point */
  readonly entries: readonly string[];
  readonly environments: readonly NetworkEnvironment[];
  readonly siteCount: number;
  readonly yearCount: number;
  readonly cellCount: number;
  /** cells of entry i are start[i] … start[i + 1] − 1 */
  readonly start: Int32Array;
  /** environment of each cell */
  readonly environment: Int32Array;
  /** column of the environment among those kept in the model, −1 for the one dropped in each connected part */
  readonly column: Int32Array;
  readonly columnCount: number;
  /** columns of the cell's site and year in the Z of its own entry */
  readonly siteColumn: Int32Array;
  readonly yearColumn: Int32Array;
  /** q_i, and the number of sites of entry i: columns 1 … siteWidth are sites, the rest years */
  readonly width: Int32Array;
  readonly siteWidth: Int32Array;
  /** means less the offset of their environment */
  readonly y: Float64Array;
  readonly v: Float64Array;
  /** row of the input behind each cell, from 0 */
  readonly source: Int32Array;
  readonly entryPart: Int32Array;
  readonly environmentPart: Int32Array;
  readonly partCount: number;
}

const nameOrder = (names: readonly string[]): ((a: string, b: string) => number) =>
  names.every((name) => name.trim() !== '' && Number.isFinite(Number(name)))
    ? (a, b) => Number(a) - Number(b)
    : (a, b) => (a < b ? -1 : a > b ? 1 : 0);

/** Names in the order of every table: by number where all are numbers, else by code point. */
export function sortNames(names: Iterable<string>): string[] {
  const distinct = [...new Set(names)];
  return distinct.sort(nameOrder(distinct));
}

/** Key of the environment in which a cell stood. */
export function environmentKey(cell: TrialCell): string {
  return cell.trial ?? `${cell.site}\u0000${cell.year}`;
}

function requireSound(cells: readonly TrialCell[]): void {
  if (cells.length === 0) throw new AnalysisError('no-values', 'there are no cells');
  const rowsWhere = (isWrong: (cell: TrialCell) => boolean): number[] =>
    cells.flatMap((cell, row) => (isWrong(cell) ? [row + 1] : []));
  const badMean = rowsWhere((cell) => !Number.isFinite(cell.mean));
  if (badMean.length > 0) throw new AnalysisError('not-finite', 'a mean is not a finite number', badMean);
  const badVariance = rowsWhere((cell) => !(Number.isFinite(cell.variance) && cell.variance >= 0));
  if (badVariance.length > 0)
    throw new AnalysisError('bad-variance', 'a variance is not a finite number of at least 0', badVariance);
}

/** Connected parts of the graph in which an entry and an environment are neighbours where the entry stood in it. */
function findParts(
  entryOf: Int32Array,
  environmentOf: Int32Array,
  entries: number,
  environments: number,
): Int32Array {
  const parent = Int32Array.from({ length: entries + environments }, (_, node) => node);
  const findRoot = (node: number): number => {
    let root = node;
    while (parent[root] !== root) root = parent[root]!;
    for (let walk = node; parent[walk] !== root;) {
      const next = parent[walk]!;
      parent[walk] = root;
      walk = next;
    }
    return root;
  };
  for (let c = 0; c < entryOf.length; c++) {
    const a = findRoot(entryOf[c]!);
    const b = findRoot(entries + environmentOf[c]!);
    if (a !== b) parent[Math.max(a, b)] = Math.min(a, b);
  }
  const numberOfRoot = new Map<number, number>();
  return Int32Array.from(parent, (_, node) => {
    const root = findRoot(node);
    const known = numberOfRoot.get(root);
    if (known !== undefined) return known;
    numberOfRoot.set(root, numberOfRoot.size);
    return numberOfRoot.size - 1;
  });
}

interface CellCodes {
  readonly entries: string[];
  readonly environments: NetworkEnvironment[];
  readonly entryOf: Int32Array;
  readonly environmentOf: Int32Array;
}

function codeCells(cells: readonly TrialCell[]): CellCodes {
  const entries = sortNames(cells.map((cell) => cell.entry));
  const entryIndex = new Map(entries.map((entry, i) => [entry, i]));
  const environmentIndex = new Map<string, number>();
  const found: { key: string; site: string; year: string; sum: number; count: number; first: number }[] = [];
  const entryOf = new Int32Array(cells.length);
  const environmentOf = new Int32Array(cells.length);
  cells.forEach((cell, row) => {
    const key = environmentKey(cell);
    let index = environmentIndex.get(key);
    if (index === undefined) {
      index = found.length;
      environmentIndex.set(key, index);
      // the first mean stands in while summing, so that a large level does not cost digits
      found.push({ key, site: cell.site, year: String(cell.year), sum: 0, count: 0, first: cell.mean });
    }
    const environment = found[index]!;
    if (environment.site !== cell.site || environment.year !== String(cell.year))
      throw new AnalysisError('bad-option', 'one trial is given with two sites or two years', [row + 1]);
    environment.sum += cell.mean - environment.first;
    environment.count++;
    entryOf[row] = entryIndex.get(cell.entry)!;
    environmentOf[row] = index;
  });
  const environments = found.map(({ key, site, year, sum, count, first }) => ({
    key,
    site,
    year,
    offset: first + sum / count,
  }));
  return { entries, environments, entryOf, environmentOf };
}

/** Local columns of one entry's sites and years, in the order of its cells. */
function numberColumns(labels: readonly string[], first: number): { columns: number[]; count: number } {
  const known = new Map<string, number>();
  const columns = labels.map((label) => {
    const column = known.get(label) ?? first + known.size;
    known.set(label, column);
    return column;
  });
  return { columns, count: known.size };
}

/**
 * Indexes cells for fitting. Entries without cells are not in it by construction.
 * @throws AnalysisError no-values, not-finite, bad-variance, duplicate-cell (an entry twice in one trial), bad-option
 */
export function frameNetwork(cells: readonly TrialCell[]): NetworkFrame {
  requireSound(cells);
  const { entries, environments, entryOf, environmentOf } = codeCells(cells);
  const n = cells.length;
  const order = Int32Array.from({ length: n }, (_, row) => row).sort(
    (a, b) => entryOf[a]! - entryOf[b]! || environmentOf[a]! - environmentOf[b]! || a - b,
  );
  const duplicates = Array.from(order).filter((row, k) => {
    const previous = order[k - 1];
    return (
      previous !== undefined &&
      entryOf[row] === entryOf[previous] &&
      environmentOf[row] === environmentOf[previous]
    );
  });
  if (duplicates.length > 0)
    throw new AnalysisError(
      'duplicate-cell',
      'an entry stands twice in one trial',
      duplicates.map((row) => row + 1).sort((a, b) => a - b),
    );

  const parts = findParts(entryOf, environmentOf, entries.length, environments.length);
  const environmentPart = parts.slice(entries.length);
  const isDropped = new Set<number>();
  const kept = Int32Array.from(environmentPart, (part) => {
    if (isDropped.has(part)) return 0;
    isDropped.add(part);
    return -1;
  });
  let columnCount = 0;
  for (let j = 0; j < kept.length; j++) if (kept[j] !== -1) kept[j] = columnCount++;

  const start = new Int32Array(entries.length + 1);
  for (const entry of entryOf) start[entry + 1]!++;
  for (let i = 0; i < entries.length; i++) start[i + 1]! += start[i]!;
  const siteColumn = new Int32Array(n);
  const yearColumn = new Int32Array(n);
  const width = new Int32Array(entries.length);
  const siteWidth = new Int32Array(entries.length);
  for (let i = 0; i < entries.length; i++) {
    const own = Array.from(
      order.subarray(start[i], start[i + 1]),
      (row) => environments[environmentOf[row]!]!,
    );
    const sites = numberColumns(
      own.map(({ site }) => site),
      1,
    );
    const years = numberColumns(
      own.map(({ year }) => year),
      1 + sites.count,
    );
    siteColumn.set(sites.columns, start[i]);
    yearColumn.set(years.columns, start[i]);
    siteWidth[i] = sites.count;
    width[i] = 1 + sites.count + years.count;
  }
  return {
    entries,
    environments,
    siteCount: new Set(environments.map(({ site }) => site)).size,
    yearCount: new Set(environments.map(({ year }) => year)).size,
    cellCount: n,
    start,
    environment: Int32Array.from(order, (row) => environmentOf[row]!),
    column: Int32Array.from(order, (row) => kept[environmentOf[row]!]!),
    columnCount,
    siteColumn,
    yearColumn,
    width,
    siteWidth,
    y: Float64Array.from(order, (row) => cells[row]!.mean - environments[environmentOf[row]!]!.offset),
    v: Float64Array.from(order, (row) => cells[row]!.variance),
    source: order,
    entryPart: parts.slice(0, entries.length),
    environmentPart,
    partCount: isDropped.size,
  };
}
