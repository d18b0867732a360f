import type { NetworkFrame } from './network-frame.ts';

/** θ: variances of entry × site, entry × year and rest, in that order. */
export type Theta = Float64Array;

/**
 * What is left of each entry's cells once its own effect is taken out as fixed: Q = B − X S X', never formed, with
 *   D = diag(1 / (θ_r + v)),
 *   B = (D⁻¹ + θ_outer Z_o Z_o')⁻¹, which joins cells of one block only: D − f D 11'D in a block, f = θ_outer / (1 + θ_outer 1'D1),
 *   X = B Z_i, one column for each inner level, N = Z_i'B Z_i,
 *   S = θ_inner (I + θ_inner N)⁻¹ + aa'/c, where a = (I + θ_inner N)⁻¹1 gives V⁻¹1 = X a and c = 1'V⁻¹1.
 * With q inner levels of entry i, S and N lie at squareStart[i] (q × q), X at projectedStart[i] (q rows as long as its cells).
 */
export interface EntryAbsorption {
  readonly squareStart: Int32Array;
  readonly projectedStart: Int32Array;
  /** 1 / (θ_r + v) of each cell */
  readonly d: Float64Array;
  /** 1'D1, 1 / (1 + θ_outer 1'D1) and f of each block */
  readonly blockSum: Float64Array;
  readonly blockShrink: Float64Array;
  readonly blockFactor: Float64Array;
  readonly n: Float64Array;
  readonly s: Float64Array;
  /** X', so that the cells of an inner level lie side by side */
  readonly x: Float64Array;
  /** V⁻¹1 of each cell over its own entry */
  readonly w: Float64Array;
  /** c of each entry */
  readonly c: Float64Array;
  /** Σ log|V| + Σ log c; set by absorbEntries */
  logDeterminant: number;
}

export function prepareAbsorption(frame: NetworkFrame): EntryAbsorption {
  const entries = frame.entries.length;
  const squareStart = new Int32Array(entries + 1);
  const projectedStart = new Int32Array(entries + 1);
  for (let i = 0; i < entries; i++) {
    const q = frame.levelCount[i]!;
    squareStart[i + 1] = squareStart[i]! + q * q;
    projectedStart[i + 1] = projectedStart[i]! + q * (frame.start[i + 1]! - frame.start[i]!);
  }
  const blocks = frame.blockStart.length - 1;
  return {
    squareStart,
    projectedStart,
    d: new Float64Array(frame.cellCount),
    blockSum: new Float64Array(blocks),
    blockShrink: new Float64Array(blocks),
    blockFactor: new Float64Array(blocks),
    n: new Float64Array(squareStart[entries]!),
    s: new Float64Array(squareStart[entries]!),
    x: new Float64Array(projectedStart[entries]!),
    w: new Float64Array(frame.cellCount),
    c: new Float64Array(entries),
    logDeterminant: 0,
  };
}

/** Inverts the positive definite t (size × size, row-major) in place; returns log|t|. */
function invertInPlace(t: Float64Array, size: number): number {
  let logDeterminant = 0;
  for (let p = 0; p < size; p++) {
    const pivot = t[p * size + p]!;
    logDeterminant += Math.log(pivot);
    const inverse = 1 / pivot;
    t[p * size + p] = 1;
    for (let j = 0; j < size; j++) t[p * size + j]! *= inverse;
    for (let i = 0; i < size; i++) {
      if (i === p) continue;
      const factor = t[i * size + p]!;
      if (factor === 0) continue;
      t[i * size + p] = 0;
      for (let j = 0; j < size; j++) t[i * size + j]! -= factor * t[p * size + j]!;
    }
  }
  return logDeterminant;
}

/** B of entry i's blocks. @returns log|B⁻¹| less log|D⁻¹| */
function measureBlocks(
  frame: NetworkFrame,
  absorption: EntryAbsorption,
  i: number,
  thetaOuter: number,
): number {
  const { d, blockSum, blockShrink, blockFactor } = absorption;
  let logDeterminant = 0;
  for (let b = frame.firstBlock[i]!; b < frame.firstBlock[i + 1]!; b++) {
    let sum = 0;
    for (let j = frame.blockStart[b]!; j < frame.blockStart[b + 1]!; j++) sum += d[j]!;
    blockSum[b] = sum;
    blockShrink[b] = 1 / (1 + thetaOuter * sum);
    blockFactor[b] = thetaOuter * blockShrink[b]!;
    logDeterminant += Math.log1p(thetaOuter * sum);
  }
  return logDeterminant;
}

/** X and N of entry i; sums without a difference in them, so that a large θ costs N no digits. `rowSums` becomes N 1. */
function projectLevels(
  frame: NetworkFrame,
  absorption: EntryAbsorption,
  i: number,
  rowSums: Float64Array,
): void {
  const { d, blockShrink, blockFactor, n, x } = absorption;
  const { level, blockStart } = frame;
  const q = frame.levelCount[i]!;
  const at = absorption.squareStart[i]!;
  const first = frame.start[i]!;
  const length = frame.start[i + 1]! - first;
  const xAt = absorption.projectedStart[i]! - first;
  n.fill(0, at, at + q * q);
  rowSums.fill(0, 0, q);
  x.fill(0, absorption.projectedStart[i], absorption.projectedStart[i + 1]);
  for (let b = frame.firstBlock[i]!; b < frame.firstBlock[i + 1]!; b++) {
    const shrink = blockShrink[b]!;
    const factor = blockFactor[b]!;
    for (let j = blockStart[b]!; j < blockStart[b + 1]!; j++) {
      const dj = d[j]!;
      const own = level[j]!;
      rowSums[own]! += dj * shrink;
      n[at + own * q + own]! += dj * shrink;
      x[xAt + own * length + j]! += dj;
      for (let l = blockStart[b]!; l < blockStart[b + 1]!; l++) {
        const other = level[l]!;
        const joint = factor * dj * d[l]!;
        x[xAt + other * length + j]! -= joint;
        if (other === own) continue;
        n[at + own * q + other]! -= joint;
        n[at + own * q + own]! += joint;
      }
    }
  }
}

/** S, V⁻¹1 and c of entry i. @returns log|I + θ_inner N| + log c */
function absorbLevels(
  frame: NetworkFrame,
  absorption: EntryAbsorption,
  i: number,
  thetaInner: number,
  rowSums: Float64Array,
  a: Float64Array,
  work: Float64Array,
): number {
  const { n, s, x, w, c } = absorption;
  const q = frame.levelCount[i]!;
  const at = absorption.squareStart[i]!;
  for (let r = 0; r < q * q; r++) work[r] = thetaInner * n[at + r]!;
  for (let r = 0; r < q; r++) work[r * q + r]! += 1;
  const logDeterminant = invertInPlace(work, q);
  let precision = 0;
  for (let r = 0; r < q; r++) {
    let sum = 0;
    for (let t = 0; t < q; t++) sum += work[r * q + t]!;
    a[r] = sum;
    precision += sum * rowSums[r]!;
  }
  c[i] = precision;
  for (let r = 0; r < q; r++)
    for (let t = 0; t < q; t++)
      s[at + r * q + t] = thetaInner * work[r * q + t]! + (a[r]! * a[t]!) / precision;
  const first = frame.start[i]!;
  const end = frame.start[i + 1]!;
  w.fill(0, first, end);
  for (let r = 0, row = absorption.projectedStart[i]! - first; r < q; r++, row += end - first)
    for (let j = first; j < end; j++) w[j]! += a[r]! * x[row + j]!;
  return logDeterminant + Math.log(precision);
}

/** Fills the absorption for θ; θ_r + v must be positive everywhere. */
export function absorbEntries(frame: NetworkFrame, theta: Theta, absorption: EntryAbsorption): void {
  const rest = theta[2]!;
  let logDeterminant = 0;
  for (let j = 0; j < frame.cellCount; j++) {
    const variance = rest + frame.v[j]!;
    absorption.d[j] = 1 / variance;
    logDeterminant += Math.log(variance);
  }
  const rowSums = new Float64Array(frame.maxLevels);
  const a = new Float64Array(frame.maxLevels);
  const work = new Float64Array(frame.maxLevels ** 2);
  for (let i = 0; i < frame.entries.length; i++) {
    logDeterminant += measureBlocks(frame, absorption, i, theta[frame.outerTerm]!);
    projectLevels(frame, absorption, i, rowSums);
    logDeterminant += absorbLevels(frame, absorption, i, theta[frame.innerTerm]!, rowSums, a, work);
  }
  absorption.logDeterminant = logDeterminant;
}
