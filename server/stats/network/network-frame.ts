import { AnalysisError } from '#server/stats/analysis-error.ts';
import { codeCells, type NetworkEnvironment } from './cell-codes.ts';
import { findParts } from './connected-parts.ts';
import type { TrialCell } from './network-cell.ts';

/**
 * Cells indexed for the kernels. Of the two terms entry:site and entry:year the one with more levels is the outer one:
 * the cells that share an entry and a level of it are a block, and lie side by side. The other one is the inner term.
 */
export interface NetworkFrame {
  /** sorted: by number where all names are numbers, else by code point */
  readonly entries: readonly string[];
  readonly environments: readonly NetworkEnvironment[];
  readonly siteCount: number;
  readonly yearCount: number;
  readonly cellCount: number;
  /** cells of entry i are start[i] … start[i + 1] − 1, in the order of their columns, the dropped one first */
  readonly start: Int32Array;
  /** environment of each cell */
  readonly environment: Int32Array;
  /** column of the environment among those kept in the model, −1 for the one dropped in each connected part */
  readonly column: Int32Array;
  readonly columnCount: number;
  /** positions in θ of the outer and of the inner term: 0 is entry:site, 1 entry:year */
  readonly outerTerm: 0 | 1;
  readonly innerTerm: 0 | 1;
  /** blocks of entry i are firstBlock[i] … firstBlock[i + 1] − 1, cells of block b blockStart[b] … blockStart[b + 1] − 1 */
  readonly firstBlock: Int32Array;
  readonly blockStart: Int32Array;
  /** block of each cell */
  readonly block: Int32Array;
  /** inner level of each cell, numbered from 0 within its entry */
  readonly level: Int32Array;
  /** inner levels of each entry, and the largest number of them */
  readonly levelCount: Int32Array;
  readonly maxLevels: number;
  /** the largest number of cells that an entry has */
  readonly maxCells: number;
  /** means less the offset of their environment */
  readonly y: Float64Array;
  readonly v: Float64Array;
  /** row of the input behind each cell, from 0 */
  readonly source: Int32Array;
  readonly entryPart: Int32Array;
  readonly environmentPart: Int32Array;
  readonly partCount: number;
}

/** Numbers labels from 0 in the order in which they are met. */
function numberLabels(labels: readonly string[]): { codes: Int32Array; count: number } {
  const known = new Map<string, number>();
  const codes = Int32Array.from(labels, (label) => {
    const code = known.get(label) ?? known.size;
    known.set(label, code);
    return code;
  });
  return { codes, count: known.size };
}

/** `order` rearranged by ascending key, equal keys left as they lie. @param keyOf below `count` */
function sortStably(order: Int32Array, keyOf: Int32Array, count: number): Int32Array {
  const next = new Int32Array(count + 1);
  for (const item of order) next[keyOf[item]! + 1]!++;
  for (let key = 0; key < count; key++) next[key + 1]! += next[key]!;
  const out = new Int32Array(order.length);
  for (const item of order) out[next[keyOf[item]!]!++] = item;
  return out;
}

const countUp = (length: number): Int32Array => Int32Array.from({ length }, (_, index) => index);

/** Columns of the environments in the order given; the first of each part has none. */
function chooseColumns(
  order: Int32Array,
  environmentPart: Int32Array,
): { kept: Int32Array; columnCount: number; partCount: number } {
  const kept = new Int32Array(order.length);
  const isDropped = new Set<number>();
  let columnCount = 0;
  for (const environment of order) {
    const part = environmentPart[environment]!;
    kept[environment] = isDropped.has(part) ? columnCount++ : -1;
    isDropped.add(part);
  }
  return { kept, columnCount, partCount: isDropped.size };
}

type Blocks = Pick<NetworkFrame, 'firstBlock' | 'blockStart' | 'block' | 'level' | 'levelCount'>;

/** Cuts each entry's cells into blocks of one outer level, and numbers its inner levels. */
function cutBlocks(start: Int32Array, outer: Int32Array, inner: Int32Array, innerCount: number): Blocks {
  const entries = start.length - 1;
  const firstBlock = new Int32Array(entries + 1);
  const blockStart: number[] = [];
  const block = new Int32Array(inner.length);
  const level = new Int32Array(inner.length);
  const levelCount = new Int32Array(entries);
  const codeOf = new Int32Array(innerCount);
  for (let i = 0; i < entries; i++) {
    codeOf.fill(-1);
    for (let j = start[i]!; j < start[i + 1]!; j++) {
      if (j === start[i]! || outer[j] !== outer[j - 1]) blockStart.push(j);
      block[j] = blockStart.length - 1;
      if (codeOf[inner[j]!] === -1) codeOf[inner[j]!] = levelCount[i]!++;
      level[j] = codeOf[inner[j]!]!;
    }
    firstBlock[i + 1] = blockStart.length;
  }
  blockStart.push(inner.length);
  return { firstBlock, blockStart: Int32Array.from(blockStart), block, level, levelCount };
}

function requireDistinct(order: Int32Array, entryOf: Int32Array, environmentOf: Int32Array): void {
  const duplicates: number[] = [];
  for (let k = 1; k < order.length; k++) {
    const row = order[k]!;
    const previous = order[k - 1]!;
    if (entryOf[row] === entryOf[previous] && environmentOf[row] === environmentOf[previous])
      duplicates.push(row + 1);
  }
  if (duplicates.length > 0)
    throw new AnalysisError(
      'duplicate-cell',
      'an entry stands twice in one trial',
      duplicates.sort((a, b) => a - b),
    );
}

const largest = (values: Int32Array): number => values.reduce((max, value) => Math.max(max, value), 0);

/**
 * Indexes cells for fitting. Entries without cells are not in it by construction.
 * @throws AnalysisError no-values, not-finite, bad-variance, duplicate-cell (an entry twice in one trial), bad-option
 */
export function frameNetwork(cells: readonly TrialCell[]): NetworkFrame {
  const { entries, environments, entryOf, environmentOf } = codeCells(cells);
  const n = cells.length;
  const sites = numberLabels(environments.map(({ site }) => site));
  const years = numberLabels(environments.map(({ year }) => year));
  const [outer, inner] = sites.count >= years.count ? [sites, years] : [years, sites];
  const environmentOrder = sortStably(countUp(environments.length), outer.codes, outer.count);
  const rank = new Int32Array(environments.length);
  environmentOrder.forEach((environment, place) => (rank[environment] = place));
  const rankOf = environmentOf.map((environment) => rank[environment]!);
  const order = sortStably(sortStably(countUp(n), rankOf, environments.length), entryOf, entries.length);
  requireDistinct(order, entryOf, environmentOf);

  const parts = findParts(entryOf, environmentOf, entries.length, environments.length);
  const environmentPart = parts.slice(entries.length);
  const { kept, columnCount, partCount } = chooseColumns(environmentOrder, environmentPart);
  const start = new Int32Array(entries.length + 1);
  for (const entry of entryOf) start[entry + 1]!++;
  for (let i = 0; i < entries.length; i++) start[i + 1]! += start[i]!;
  const environment = order.map((row) => environmentOf[row]!);
  const blocks = cutBlocks(
    start,
    environment.map((e) => outer.codes[e]!),
    environment.map((e) => inner.codes[e]!),
    inner.count,
  );
  const isSiteOuter = outer === sites;
  return {
    entries,
    environments,
    siteCount: sites.count,
    yearCount: years.count,
    cellCount: n,
    start,
    environment,
    column: environment.map((e) => kept[e]!),
    columnCount,
    outerTerm: isSiteOuter ? 0 : 1,
    innerTerm: isSiteOuter ? 1 : 0,
    ...blocks,
    maxLevels: largest(blocks.levelCount),
    maxCells: largest(start.subarray(1).map((end, i) => end - start[i]!)),
    y: Float64Array.from(order, (row) => cells[row]!.mean - environments[environmentOf[row]!]!.offset),
    v: Float64Array.from(order, (row) => cells[row]!.variance),
    source: order,
    entryPart: parts.slice(0, entries.length),
    environmentPart,
    partCount,
  };
}
