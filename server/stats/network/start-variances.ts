import type { Theta } from './entry-absorption.ts';
import { interactionTerms } from './network-cell.ts';
import type { NetworkFrame } from './network-frame.ts';
import { solveSmall } from './small-symmetric.ts';
import type { VariancePenalty } from './variance-penalty.ts';

/** Sums that one entry adds to the moment equations; terms in the order outer, inner, rest. */
interface MomentSums {
  /** ‖Z_k'H Z_l‖² with H taking the entry's mean away, 3 × 3 */
  readonly coefficients: Float64Array;
  /** ‖Z_k'r‖² of the residuals r */
  readonly squares: Float64Array;
  /** levels of each term that are free once the mean is gone */
  readonly degrees: Float64Array;
}

function addEntry(
  frame: NetworkFrame,
  i: number,
  residuals: Float64Array,
  { coefficients, squares, degrees }: MomentSums,
): void {
  const first = frame.start[i]!;
  const end = frame.start[i + 1]!;
  const n = end - first;
  const q = frame.levelCount[i]!;
  const inLevel = new Float64Array(q);
  const sums = new Float64Array(q);
  for (let j = first; j < end; j++) {
    inLevel[frame.level[j]!]! += 1;
    sums[frame.level[j]!]! += residuals[j]!;
    squares[2]! += residuals[j]! * residuals[j]!;
  }
  let [outer2, outer3, inner2, inner3, joint] = [0, 0, 0, 0, 0];
  for (let b = frame.firstBlock[i]!; b < frame.firstBlock[i + 1]!; b++) {
    const size = frame.blockStart[b + 1]! - frame.blockStart[b]!;
    let sum = 0;
    for (let j = frame.blockStart[b]!; j < frame.blockStart[b + 1]!; j++) {
      sum += residuals[j]!;
      joint += 1 - (2 * size * inLevel[frame.level[j]!]!) / n;
    }
    squares[0]! += sum * sum;
    outer2 += size ** 2;
    outer3 += size ** 3;
  }
  for (let r = 0; r < q; r++) {
    squares[1]! += sums[r]! * sums[r]!;
    inner2 += inLevel[r]! ** 2;
    inner3 += inLevel[r]! ** 3;
  }
  const crossed = joint + (outer2 * inner2) / n ** 2;
  const own = [
    outer2 - (2 * outer3) / n + (outer2 / n) ** 2,
    crossed,
    n - outer2 / n,
    crossed,
    inner2 - (2 * inner3) / n + (inner2 / n) ** 2,
    n - inner2 / n,
    n - outer2 / n,
    n - inner2 / n,
    n - 1,
  ];
  own.forEach((value, at) => (coefficients[at]! += value));
  const blocks = frame.firstBlock[i + 1]! - frame.firstBlock[i]!;
  [blocks - 1, q - 1, n - 1].forEach((value, at) => (degrees[at]! += value));
}

/**
 * Where the climb starts: variances whose expected sums of squares of the least-squares residuals are the observed ones,
 * what the environments take away reckoned as in a full table; with a penalty, weighed against the usual variances.
 * Only a start: it need not be exact. All of them positive.
 * @param residuals by least squares on entries and environments
 * @param scale variance of a typical cell
 */
export function startVariances(
  frame: NetworkFrame,
  residuals: Float64Array,
  penalty: VariancePenalty | null,
  scale: number,
): Theta {
  const sums: MomentSums = {
    coefficients: new Float64Array(9),
    squares: new Float64Array(3),
    degrees: new Float64Array(3),
  };
  for (let i = 0; i < frame.entries.length; i++) addEntry(frame, i, residuals, sums);
  const left = 1 - frame.environments.length / frame.cellCount;
  const solved =
    left > 0
      ? solveSmall(
          sums.coefficients,
          sums.squares.map((square) => square / left),
        )
      : null;
  const meanVariance = frame.v.reduce((sum, v) => sum + v, 0) / frame.cellCount;
  const theta = new Float64Array(3);
  [frame.outerTerm, frame.innerTerm, 2].forEach((k, at) => {
    const moment = (solved?.[at] ?? scale / 3) - (k === 2 ? meanVariance : 0);
    const found = Math.max(moment, 0.1 * scale);
    const usual = penalty?.usual[interactionTerms[k]!];
    // residuals of one term's levels tell of the other terms as well: a quarter of what counting them says
    const degrees = (left * sums.degrees[at]!) / 4;
    theta[k] =
      penalty === null || usual === undefined
        ? found
        : (degrees * found + penalty.nu * usual) / (degrees + penalty.nu);
  });
  return theta;
}
