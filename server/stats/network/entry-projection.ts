import type { EntryAbsorption } from './entry-absorption.ts';
import type { NetworkFrame } from './network-frame.ts';
import { addCombination } from './row-products.ts';

/** out = Q x over all cells, Q x = B(x − Z_i S Z_i'B x) entry by entry, so the entries' own effects are gone from it. */
export function applyQ(
  frame: NetworkFrame,
  absorption: EntryAbsorption,
  x: Float64Array,
  out: Float64Array,
): void {
  const { d, s, blockFactor, squareStart } = absorption;
  const { level, blockStart, firstBlock } = frame;
  const u = new Float64Array(frame.maxLevels);
  const t = new Float64Array(frame.maxLevels);
  for (let i = 0; i < frame.entries.length; i++) {
    const q = frame.levelCount[i]!;
    u.fill(0, 0, q);
    for (let b = firstBlock[i]!; b < firstBlock[i + 1]!; b++) {
      const end = blockStart[b + 1]!;
      let sum = 0;
      for (let j = blockStart[b]!; j < end; j++) sum += d[j]! * x[j]!;
      const shift = blockFactor[b]! * sum;
      for (let j = blockStart[b]!; j < end; j++) u[level[j]!]! += d[j]! * (x[j]! - shift);
    }
    for (let r = 0, at = squareStart[i]!; r < q; r++, at += q) {
      let sum = 0;
      for (let k = 0; k < q; k++) sum += s[at + k]! * u[k]!;
      t[r] = sum;
    }
    for (let b = firstBlock[i]!; b < firstBlock[i + 1]!; b++) {
      const end = blockStart[b + 1]!;
      let sum = 0;
      for (let j = blockStart[b]!; j < end; j++) sum += d[j]! * (x[j]! - t[level[j]!]!);
      const shift = blockFactor[b]! * sum;
      for (let j = blockStart[b]!; j < end; j++) out[j] = d[j]! * (x[j]! - t[level[j]!]! - shift);
    }
  }
}

/** Working space of projectRows for rows up to `width` long. */
export interface ProjectionScratch {
  readonly sum: Float64Array;
  readonly u: Float64Array;
  readonly t: Float64Array;
}

export function prepareProjection(frame: NetworkFrame, width: number): ProjectionScratch {
  return {
    sum: new Float64Array(width),
    u: new Float64Array(frame.maxLevels * width),
    t: new Float64Array(frame.maxLevels * width),
  };
}

/** Rows of a block, B times what they were; adds them to those of their inner level in u. */
function shrinkBlock(
  frame: NetworkFrame,
  { d, blockFactor }: EntryAbsorption,
  b: number,
  rows: Float64Array,
  firstRow: number,
  width: number,
  { sum, u }: ProjectionScratch,
): void {
  const begin = frame.blockStart[b]!;
  const length = frame.blockStart[b + 1]! - begin;
  sum.fill(0, 0, width);
  addCombination(sum, 0, width, rows, firstRow * width, width, d, begin, length);
  for (let j = 0; j < length; j++) {
    const dj = d[begin + j]!;
    const pull = dj * blockFactor[b]!;
    const at = (firstRow + j) * width;
    const level = frame.level[begin + j]! * width;
    for (let l = 0; l < width; l++) {
      const value = dj * rows[at + l]! - pull * sum[l]!;
      rows[at + l] = value;
      u[level + l]! += value;
    }
  }
}

/** Takes B Z_i t off the rows of a block; t has a row for each inner level. */
function subtractLevels(
  frame: NetworkFrame,
  { d, blockFactor }: EntryAbsorption,
  b: number,
  rows: Float64Array,
  firstRow: number,
  width: number,
  { sum, t }: ProjectionScratch,
): void {
  const begin = frame.blockStart[b]!;
  const length = frame.blockStart[b + 1]! - begin;
  sum.fill(0, 0, width);
  for (let j = 0; j < length; j++) {
    const weight = d[begin + j]! * blockFactor[b]!;
    const source = frame.level[begin + j]! * width;
    for (let l = 0; l < width; l++) sum[l]! += weight * t[source + l]!;
  }
  for (let j = 0; j < length; j++) {
    const dj = d[begin + j]!;
    const source = frame.level[begin + j]! * width;
    const at = (firstRow + j) * width;
    for (let l = 0; l < width; l++) rows[at + l]! -= dj * (t[source + l]! - sum[l]!);
  }
}

/** rows ← Q rows for entry i, in place: a row for each of its cells, each `width` long. */
export function projectRows(
  frame: NetworkFrame,
  absorption: EntryAbsorption,
  i: number,
  rows: Float64Array,
  width: number,
  scratch: ProjectionScratch,
): void {
  const { u, t } = scratch;
  const first = frame.start[i]!;
  const q = frame.levelCount[i]!;
  const [firstBlock, endBlock] = [frame.firstBlock[i]!, frame.firstBlock[i + 1]!];
  u.fill(0, 0, q * width);
  for (let b = firstBlock; b < endBlock; b++)
    shrinkBlock(frame, absorption, b, rows, frame.blockStart[b]! - first, width, scratch);
  t.fill(0, 0, q * width);
  for (let r = 0, at = absorption.squareStart[i]!; r < q; r++, at += q)
    addCombination(t, r * width, width, u, 0, width, absorption.s, at, q);
  for (let b = firstBlock; b < endBlock; b++)
    subtractLevels(frame, absorption, b, rows, frame.blockStart[b]! - first, width, scratch);
}
