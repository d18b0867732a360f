import { AnalysisError } from '#server/stats/analysis-error.ts';
import type { TrialCell } from './network-cell.ts';

export interface NetworkEnvironment {
  readonly key: string;
  readonly site: string;
  readonly year: string;
  /** plain mean of the cells that stood in it; taken off every cell before fitting */
  readonly offset: number;
}

/** Cells with numbers in the place of names. */
export interface CellCodes {
  /** sorted, see sortNames */
  readonly entries: readonly string[];
  /** in the order in which they are met */
  readonly environments: readonly NetworkEnvironment[];
  /** entry and environment of each cell */
  readonly entryOf: Int32Array;
  readonly environmentOf: Int32Array;
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

/** Rows, from 1, of the cells that are not as they should be. */
function rowsWhere(cells: readonly TrialCell[], isWrong: (cell: TrialCell) => boolean): number[] {
  const rows: number[] = [];
  cells.forEach((cell, row) => {
    if (isWrong(cell)) rows.push(row + 1);
  });
  return rows;
}

function requireSound(cells: readonly TrialCell[]): void {
  if (cells.length === 0) throw new AnalysisError('no-values', 'there are no cells');
  const badMean = rowsWhere(cells, (cell) => !Number.isFinite(cell.mean));
  if (badMean.length > 0) throw new AnalysisError('not-finite', 'a mean is not a finite number', badMean);
  const badVariance = rowsWhere(cells, (cell) => !(Number.isFinite(cell.variance) && cell.variance >= 0));
  if (badVariance.length > 0)
    throw new AnalysisError('bad-variance', 'a variance is not a finite number of at least 0', badVariance);
}

/** Finds the environment of a cell; cells without a trial are known by site and year, and no key is built for each. */
class EnvironmentIndex {
  readonly #byKey = new Map<string, number>();
  readonly #bySite = new Map<string, Map<number | string, number>>();

  /** Number of the environment, counted from 0 in the order of asking; `add` is told of each new one. */
  find(cell: TrialCell, add: (key: string) => void): number {
    if (cell.trial !== undefined) return this.#findKey(cell.trial, add);
    let years = this.#bySite.get(cell.site);
    if (years === undefined) this.#bySite.set(cell.site, (years = new Map<number | string, number>()));
    let index = years.get(cell.year);
    if (index === undefined) years.set(cell.year, (index = this.#findKey(environmentKey(cell), add)));
    return index;
  }

  #findKey(key: string, add: (key: string) => void): number {
    const known = this.#byKey.get(key);
    if (known !== undefined) return known;
    add(key);
    this.#byKey.set(key, this.#byKey.size);
    return this.#byKey.size - 1;
  }
}

function numberEntries(cells: readonly TrialCell[]): { entries: string[]; entryOf: Int32Array } {
  const met = new Map<string, number>();
  const entryOf = new Int32Array(cells.length);
  cells.forEach(({ entry }, row) => {
    let index = met.get(entry);
    if (index === undefined) met.set(entry, (index = met.size));
    entryOf[row] = index;
  });
  const entries = sortNames(met.keys());
  const place = new Int32Array(entries.length);
  entries.forEach((entry, i) => (place[met.get(entry)!] = i));
  return { entries, entryOf: entryOf.map((index) => place[index]!) };
}

/**
 * Numbers entries and environments.
 * @throws AnalysisError no-values, not-finite, bad-variance, bad-option
 */
export function codeCells(cells: readonly TrialCell[]): CellCodes {
  requireSound(cells);
  const index = new EnvironmentIndex();
  const found: { key: string; site: string; year: string; sum: number; count: number; first: number }[] = [];
  const environmentOf = new Int32Array(cells.length);
  cells.forEach((cell, row) => {
    const at = index.find(cell, (key) =>
      // the first mean stands in while summing, so that a large level does not cost digits
      found.push({ key, site: cell.site, year: String(cell.year), sum: 0, count: 0, first: cell.mean }),
    );
    const environment = found[at]!;
    if (
      cell.trial !== undefined &&
      (environment.site !== cell.site || environment.year !== String(cell.year))
    )
      throw new AnalysisError('bad-option', 'one trial is given with two sites or two years', [row + 1]);
    environment.sum += cell.mean - environment.first;
    environment.count++;
    environmentOf[row] = at;
  });
  const environments = found.map(({ key, site, year, sum, count, first }) => ({
    key,
    site,
    year,
    offset: first + sum / count,
  }));
  return { ...numberEntries(cells), environments, environmentOf };
}
