import { applyQ, prepareProjection, projectRows, type ProjectionScratch } from './entry-projection.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';

/** Above this many cells the average information stands in for the expected one. */
export const MANY_CELLS = 1000;

/** C⁻¹E'Q: a row of all cells for each kept environment. */
function projectInverseRows(frame: NetworkFrame, { absorption, system }: NetworkPoint): Float64Array[] {
  const size = frame.columnCount;
  const x = new Float64Array(frame.cellCount);
  return Array.from({ length: size }, (_, e) => {
    for (let j = 0; j < x.length; j++) {
      const column = frame.column[j]!;
      x[j] = column < 0 ? 0 : system.inverse[e * size + column]!;
    }
    const out = new Float64Array(x.length);
    applyQ(frame, absorption, x, out);
    return out;
  });
}

/** Working space for the cells of one entry against those of another. */
interface TileScratch {
  readonly projection: ProjectionScratch;
  /** P, Z_o'P and Z_i'P: a row for each cell, block or level of the one, as long as the other has cells */
  readonly rows: Float64Array;
  readonly byBlock: Float64Array;
  readonly byLevel: Float64Array;
  readonly levels: Float64Array;
}

/**
 * Adds Σ (row Z_l)² for the terms l to row `k` of the sums: `count` rows over the cells of entry `other`.
 * @param k term that the rows were summed over
 */
function addSquares(
  frame: NetworkFrame,
  other: number,
  rows: Float64Array,
  count: number,
  k: number,
  levels: Float64Array,
  sums: Float64Array,
): void {
  const { level, blockStart, firstBlock, start } = frame;
  const width = start[other + 1]! - start[other]!;
  const q = frame.levelCount[other]!;
  let outer = 0;
  let inner = 0;
  let rest = 0;
  for (let row = 0; row < count; row++) {
    const at = row * width - start[other]!;
    levels.fill(0, 0, q);
    for (let b = firstBlock[other]!; b < firstBlock[other + 1]!; b++) {
      let sum = 0;
      for (let j = blockStart[b]!; j < blockStart[b + 1]!; j++) {
        const value = rows[at + j]!;
        rest += value * value;
        sum += value;
        levels[level[j]!]! += value;
      }
      outer += sum * sum;
    }
    for (let r = 0; r < q; r++) inner += levels[r]! * levels[r]!;
  }
  sums[k * 3 + frame.outerTerm]! += outer;
  sums[k * 3 + frame.innerTerm]! += inner;
  sums[k * 3 + 2]! += rest;
}

/** P between the cells of entry i, its rows, and those of entry `other`: Q(I − E C⁻¹E'Q). */
function fillTile(
  frame: NetworkFrame,
  { absorption }: NetworkPoint,
  i: number,
  other: number,
  projected: readonly Float64Array[],
  { rows, projection }: TileScratch,
): void {
  const first = frame.start[i]!;
  const from = frame.start[other]!;
  const width = frame.start[other + 1]! - from;
  for (let j = first; j < frame.start[i + 1]!; j++) {
    const column = frame.column[j]!;
    const at = (j - first) * width;
    if (column < 0) rows.fill(0, at, at + width);
    else for (let l = 0; l < width; l++) rows[at + l] = -projected[column]![from + l]!;
    if (i === other) rows[at + j - first]! += 1;
  }
  projectRows(frame, absorption, i, rows, width, projection);
}

/** Sums the rows of entry i over its blocks and over its inner levels. */
function sumTile(
  frame: NetworkFrame,
  i: number,
  width: number,
  { rows, byBlock, byLevel }: TileScratch,
): void {
  const first = frame.start[i]!;
  const firstBlock = frame.firstBlock[i]!;
  byBlock.fill(0, 0, (frame.firstBlock[i + 1]! - firstBlock) * width);
  byLevel.fill(0, 0, frame.levelCount[i]! * width);
  for (let j = first; j < frame.start[i + 1]!; j++) {
    const source = (j - first) * width;
    const toBlock = (frame.block[j]! - firstBlock) * width;
    const toLevel = frame.level[j]! * width;
    for (let l = 0; l < width; l++) {
      byBlock[toBlock + l]! += rows[source + l]!;
      byLevel[toLevel + l]! += rows[source + l]!;
    }
  }
}

/**
 * Expected information ½ tr(P V_k P V_l) = ½ Σ (Z_k'P Z_l)² of θ, exactly, 3 × 3, row-major: squares are summed, so
 * nothing is lost by taking differences. Cost: the cells squared.
 */
export function computeExpectedInformation(frame: NetworkFrame, point: NetworkPoint): Float64Array {
  const { maxCells, maxLevels, start, firstBlock, levelCount } = frame;
  const projected = projectInverseRows(frame, point);
  const scratch: TileScratch = {
    projection: prepareProjection(frame, maxCells),
    rows: new Float64Array(maxCells * maxCells),
    byBlock: new Float64Array(maxCells * maxCells),
    byLevel: new Float64Array(maxLevels * maxCells),
    levels: new Float64Array(maxLevels),
  };
  const { rows, byBlock, byLevel, levels } = scratch;
  const within = new Float64Array(9);
  const between = new Float64Array(9);
  for (let i = 0; i < frame.entries.length; i++)
    for (let other = i; other < frame.entries.length; other++) {
      const sums = other === i ? within : between;
      fillTile(frame, point, i, other, projected, scratch);
      sumTile(frame, i, start[other + 1]! - start[other]!, scratch);
      addSquares(frame, other, rows, start[i + 1]! - start[i]!, 2, levels, sums);
      addSquares(frame, other, byBlock, firstBlock[i + 1]! - firstBlock[i]!, frame.outerTerm, levels, sums);
      addSquares(frame, other, byLevel, levelCount[i]!, frame.innerTerm, levels, sums);
    }
  const information = new Float64Array(9);
  // pairs of two entries were met once, with the first before the second
  for (let k = 0; k < 3; k++)
    for (let l = 0; l < 3; l++)
      information[k * 3 + l] = 0.5 * (within[k * 3 + l]! + between[k * 3 + l]! + between[l * 3 + k]!);
  return information;
}
