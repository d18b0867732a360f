import { AnalysisError } from '#server/stats/analysis-error.ts';

/** A classification of the used plots. */
export interface Factor {
  readonly name: string;
  /** labels in table order */
  readonly levels: readonly string[];
  /** level of each used plot */
  readonly codes: Int32Array;
}

/** A fixed term: a product of factors under sum-to-zero contrasts; no factors is the intercept. */
export interface FixedTerm {
  readonly name: string;
  readonly factors: readonly Factor[];
  /** number of levels of each factor */
  readonly dims: readonly number[];
  /** product of dims: cells, observed or not; the last factor varies fastest */
  readonly size: number;
  /** product of (dims − 1): columns of the model matrix */
  readonly width: number;
  /** first column in the model matrix */
  readonly offset: number;
  /** cell of each used plot */
  readonly cells: Int32Array;
}

/** A random term: observed level combinations only. */
export interface RandomTerm {
  readonly name: string;
  readonly size: number;
  readonly levels: readonly string[];
  readonly cells: Int32Array;
}

const collator = { compare: (a: string, b: string) => (a < b ? -1 : a > b ? 1 : 0) };
const plainNumber = /^[+-]?(\d+\.?\d*|\.\d+)([eE][+-]?\d+)?$/;

/** Orders labels: by value where all are numbers, else by code point. */
export function sortLabels(labels: Iterable<string>): string[] {
  const list = [...labels];
  if (list.every((label) => plainNumber.test(label)))
    return list.sort((a, b) => Number(a) - Number(b) || collator.compare(a, b));
  return list.sort(collator.compare);
}

/**
 * @param label level of one used plot
 * @throws AnalysisError missing-level with the rows where the label is absent
 */
export function buildFactor(
  name: string,
  count: number,
  label: (plot: number) => string | number | null | undefined,
  rowOf: (plot: number) => number,
): Factor {
  const labels: string[] = [];
  const missing: number[] = [];
  for (let i = 0; i < count; i++) {
    const value = label(i);
    if (value === null || value === undefined || value === '') missing.push(rowOf(i));
    else labels.push(String(value));
  }
  if (missing.length > 0)
    throw new AnalysisError('missing-level', `plots without a level of ${name}`, missing);
  const levels = sortLabels(new Set(labels));
  const place = new Map(levels.map((level, i) => [level, i]));
  return { name, levels, codes: Int32Array.from(labels, (value) => place.get(value)!) };
}

export function buildFixedTerm(factors: readonly Factor[], count: number, offset: number): FixedTerm {
  const dims = factors.map((factor) => factor.levels.length);
  const cells = new Int32Array(count);
  for (const factor of factors) {
    const levels = factor.levels.length;
    for (let i = 0; i < count; i++) cells[i] = cells[i]! * levels + factor.codes[i]!;
  }
  return {
    name: factors.map((factor) => factor.name).join(':'),
    factors,
    dims,
    size: dims.reduce((product, dim) => product * dim, 1),
    width: dims.reduce((product, dim) => product * (dim - 1), 1),
    offset,
    cells,
  };
}

export function buildRandomTerm(factors: readonly Factor[], count: number): RandomTerm {
  const place = new Map<string, number>();
  const cells = new Int32Array(count);
  for (let i = 0; i < count; i++) {
    const key = factors.map((factor) => factor.levels[factor.codes[i]!]!).join(':');
    let cell = place.get(key);
    if (cell === undefined) {
      cell = place.size;
      place.set(key, cell);
    }
    cells[i] = cell;
  }
  return {
    name: factors.map((factor) => factor.name).join(':'),
    size: place.size,
    levels: [...place.keys()],
    cells,
  };
}
