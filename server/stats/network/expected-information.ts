import { applyQ, prepareProjection, projectRows } from './entry-projection.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';

/** Above this many cells the average information stands in for the expected one. */
export const MANY_CELLS = 1000;

/** Σ (Z_k'P Z_l)² over pairs of cells of one entry, and over pairs of two entries, the first before the second; 3 × 3. */
interface SquaredSums {
  readonly within: Float64Array;
  readonly between: Float64Array;
}

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

/**
 * Adds Σ (row Z_l)² for the terms l to row `k` of the sums: `count` rows over the cells from entry i on.
 * @param k term that the rows were summed over
 */
function addSquares(
  frame: NetworkFrame,
  i: number,
  rows: Float64Array,
  count: number,
  k: number,
  levels: Float64Array,
  sums: SquaredSums,
): void {
  const { level, blockStart, firstBlock, start } = frame;
  const first = start[i]!;
  const width = frame.cellCount - first;
  for (let row = 0; row < count; row++) {
    const at = row * width - first;
    for (let other = i; other < frame.entries.length; other++) {
      const q = frame.levelCount[other]!;
      levels.fill(0, 0, q);
      let outer = 0;
      let rest = 0;
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
      let inner = 0;
      for (let r = 0; r < q; r++) inner += levels[r]! * levels[r]!;
      const target = other === i ? sums.within : sums.between;
      target[k * 3 + frame.outerTerm]! += outer;
      target[k * 3 + frame.innerTerm]! += inner;
      target[k * 3 + 2]! += rest;
    }
  }
}

/**
 * Expected information ½ tr(P V_k P V_l) = ½ Σ (Z_k'P Z_l)² of θ, exactly, 3 × 3, row-major: squares are summed, so
 * nothing is lost by taking differences. Cost: the cells squared.
 */
export function computeExpectedInformation(frame: NetworkFrame, point: NetworkPoint): Float64Array {
  const n = frame.cellCount;
  const projected = projectInverseRows(frame, point);
  const scratch = prepareProjection(frame, n);
  const rows = new Float64Array(frame.maxCells * n);
  const byBlock = new Float64Array(frame.maxCells * n);
  const byLevel = new Float64Array(frame.maxLevels * n);
  const levels = new Float64Array(frame.maxLevels);
  const sums: SquaredSums = { within: new Float64Array(9), between: new Float64Array(9) };
  for (let i = 0; i < frame.entries.length; i++) {
    const first = frame.start[i]!;
    const length = frame.start[i + 1]! - first;
    const width = n - first;
    // rows of P, from this entry's own cells on: Q (I − E C⁻¹E'Q)
    for (let j = 0; j < length; j++) {
      const column = frame.column[first + j]!;
      const at = j * width;
      if (column < 0) rows.fill(0, at, at + width);
      else for (let l = 0; l < width; l++) rows[at + l] = -projected[column]![first + l]!;
      rows[at + j]! += 1;
    }
    projectRows(frame, point.absorption, i, rows, width, scratch);
    const blocks = frame.firstBlock[i + 1]! - frame.firstBlock[i]!;
    byBlock.fill(0, 0, blocks * width);
    byLevel.fill(0, 0, frame.levelCount[i]! * width);
    for (let b = 0; b < blocks; b++) {
      const block = frame.firstBlock[i]! + b;
      for (let j = frame.blockStart[block]!; j < frame.blockStart[block + 1]!; j++) {
        const source = (j - first) * width;
        const toLevel = frame.level[j]! * width;
        for (let l = 0; l < width; l++) {
          byBlock[b * width + l]! += rows[source + l]!;
          byLevel[toLevel + l]! += rows[source + l]!;
        }
      }
    }
    addSquares(frame, i, rows, length, 2, levels, sums);
    addSquares(frame, i, byBlock, blocks, frame.outerTerm, levels, sums);
    addSquares(frame, i, byLevel, frame.levelCount[i]!, frame.innerTerm, levels, sums);
  }
  const { within, between } = sums;
  const information = new Float64Array(9);
  for (let k = 0; k < 3; k++)
    for (let l = 0; l < 3; l++)
      information[k * 3 + l] = 0.5 * (within[k * 3 + l]! + between[k * 3 + l]! + between[l * 3 + k]!);
  return information;
}
