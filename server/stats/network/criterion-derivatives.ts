import { applyP } from './environment-system.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';
import { multiplyRow, multiplyRows } from './row-products.ts';

/** First derivatives of the restricted log-likelihood in θ, and the average information (3 × 3, row-major). */
export interface CriterionDerivatives {
  readonly gradient: Float64Array;
  readonly averageInformation: Float64Array;
}

/** Working space of one entry with q inner levels and n cells: rows of q, then q × q. */
interface TraceScratch {
  /** a row of C⁻¹ over the entry's cells */
  readonly inverseRow: Float64Array;
  /** U = C⁻¹X over the entry's environments, and B X, both with a row for each cell */
  readonly u: Float64Array;
  readonly bx: Float64Array;
  readonly blockSums: Float64Array;
  /** X'U, X'X, PP' with P = X'Z_o, Σ P_b (U'B1_b)', U'BX */
  readonly xu: Float64Array;
  readonly xx: Float64Array;
  readonly pp: Float64Array;
  readonly pu: Float64Array;
  readonly ubx: Float64Array;
  readonly product: Float64Array;
  readonly sandwich: Float64Array;
}

function makeScratch({ maxLevels, maxCells }: NetworkFrame): TraceScratch {
  const square = () => new Float64Array(maxLevels * maxLevels);
  const rows = () => new Float64Array(maxLevels * maxCells);
  return {
    inverseRow: new Float64Array(maxCells),
    u: rows(),
    bx: rows(),
    blockSums: new Float64Array(2 * maxLevels),
    xu: square(),
    xx: square(),
    pp: square(),
    pu: square(),
    ubx: square(),
    product: square(),
    sandwich: square(),
  };
}

/** Σ A_rs B_rs, q × q, A at offset aa: tr(A B) where one of them is symmetric. */
function traceOfProduct(a: Float64Array, aa: number, b: Float64Array, q: number): number {
  let sum = 0;
  for (let r = 0; r < q * q; r++) sum += a[aa + r]! * b[r]!;
  return sum;
}

/**
 * U = C⁻¹X of entry i, and what of tr(C⁻¹ E'B V_k B E) lies within blocks.
 * @returns the parts of V_outer and V_rest
 */
function projectInverse(
  frame: NetworkFrame,
  point: NetworkPoint,
  i: number,
  { inverseRow, u }: TraceScratch,
): [number, number] {
  const { inverse } = point.system;
  const { d, x, blockFactor, blockShrink, projectedStart } = point.absorption;
  const { column, blockStart } = frame;
  const size = frame.columnCount;
  const q = frame.levelCount[i]!;
  const first = frame.start[i]!;
  const length = frame.start[i + 1]! - first;
  let outer = 0;
  let rest = 0;
  for (let b = frame.firstBlock[i]!; b < frame.firstBlock[i + 1]!; b++) {
    const begin = blockStart[b]!;
    const end = blockStart[b + 1]!;
    const f = blockFactor[b]!;
    let squares = 0;
    for (let j = begin; j < end; j++) squares += d[j]! * d[j]!;
    for (let j = begin; j < end; j++) {
      const ej = column[j]!;
      if (ej < 0) {
        u.fill(0, (j - first) * q, (j - first + 1) * q);
        continue;
      }
      const row = ej * size;
      // a cell without a column can only be the first
      inverseRow[0] = column[first]! < 0 ? 0 : inverse[row + column[first]!]!;
      for (let l = 1; l < length; l++) inverseRow[l] = inverse[row + column[first + l]!]!;
      multiplyRow(u, (j - first) * q, x, projectedStart[i]!, length, q, inverseRow);
      const dj = d[j]!;
      rest += dj * dj * inverseRow[j - first]!;
      let sum = 0;
      for (let l = begin; l < end; l++) {
        const joint = dj * d[l]! * inverseRow[l - first]!;
        sum += joint;
        rest += f * joint * (f * squares - dj - d[l]!);
      }
      outer += blockShrink[b]! * blockShrink[b]! * sum;
    }
  }
  return [outer, rest];
}

/** Small products of one entry: X'U, X'X, U'BX over its cells, PP' and Σ P_b (U'B1_b)' over its blocks. */
function gatherProducts(frame: NetworkFrame, point: NetworkPoint, i: number, scratch: TraceScratch): void {
  const { d, x, blockFactor, blockShrink, projectedStart } = point.absorption;
  const { u, bx, blockSums, xu, xx, pp, pu, ubx } = scratch;
  const q = frame.levelCount[i]!;
  const first = frame.start[i]!;
  const length = frame.start[i + 1]! - first;
  const xAt = projectedStart[i]! - first;
  for (const square of [xu, xx, pp, pu, ubx]) square.fill(0, 0, q * q);
  for (let b = frame.firstBlock[i]!; b < frame.firstBlock[i + 1]!; b++) {
    const begin = frame.blockStart[b]!;
    const end = frame.blockStart[b + 1]!;
    // 1_b'DX, 1_b'DU; P_b = X'1_b, U'B1_b
    for (let r = 0; r < q; r++) {
      let ofX = 0;
      let ofU = 0;
      let p = 0;
      for (let j = begin; j < end; j++) {
        ofX += d[j]! * x[xAt + r * length + j]!;
        ofU += d[j]! * u[(j - first) * q + r]!;
        p += x[xAt + r * length + j]!;
      }
      for (let j = begin; j < end; j++)
        bx[(j - first) * q + r] = d[j]! * (x[xAt + r * length + j]! - blockFactor[b]! * ofX);
      blockSums[r] = p;
      blockSums[q + r] = blockShrink[b]! * ofU;
    }
    for (let r = 0; r < q; r++) {
      const p = blockSums[r]!;
      for (let t = 0; t < q; t++) {
        pp[r * q + t]! += p * blockSums[t]!;
        pu[r * q + t]! += p * blockSums[q + t]!;
      }
    }
    // Z_i'BX = X'X
    for (let j = begin; j < end; j++) {
      const at = (j - first) * q;
      const own = frame.level[j]! * q;
      for (let t = 0; t < q; t++) xx[own + t]! += bx[at + t]!;
      for (let r = 0; r < q; r++) {
        const value = u[at + r]!;
        const xr = x[xAt + r * length + j]!;
        for (let t = 0; t < q; t++) {
          ubx[r * q + t]! += value * bx[at + t]!;
          xu[r * q + t]! += xr * u[at + t]!;
        }
      }
    }
  }
}

/**
 * Adds entry i's part of tr(PV_k) to traces, P = Q − Q E C⁻¹E'Q with Q = B − XSX':
 *   outer   Σ_b 1_b'B1_b − tr(S PP')   less   Σ_b 1_b'BC⁻¹B1_b − 2 tr(S Σ P_b (U'B1_b)') + tr(SX'US PP')
 *   inner   tr(N L)                    less   tr(LL'X'U),  L = I − SN
 *   rest    tr(B) − tr(S X'X)          less   tr(C⁻¹BB) − 2 tr(S U'BX) + tr(SX'US X'X)
 */
function addTraces(
  frame: NetworkFrame,
  point: NetworkPoint,
  i: number,
  scratch: TraceScratch,
  traces: Float64Array,
): void {
  const { d, n, s, blockSum, blockShrink, blockFactor, squareStart } = point.absorption;
  const q = frame.levelCount[i]!;
  const at = squareStart[i]!;
  const [blockOuter, blockRest] = projectInverse(frame, point, i, scratch);
  gatherProducts(frame, point, i, scratch);
  const { xu, xx, pp, pu, ubx, product, sandwich } = scratch;
  multiplyRows(product, xu, 0, s, at, q, q, q);
  multiplyRows(sandwich, s, at, product, 0, q, q, q);

  let outer = traceOfProduct(sandwich, 0, pp, q) - 2 * traceOfProduct(s, at, pu, q) + blockOuter;
  outer = -outer - traceOfProduct(s, at, pp, q);
  let rest = traceOfProduct(sandwich, 0, xx, q) - 2 * traceOfProduct(s, at, ubx, q) + blockRest;
  rest = -rest - traceOfProduct(s, at, xx, q);
  for (let b = frame.firstBlock[i]!; b < frame.firstBlock[i + 1]!; b++) {
    outer += blockSum[b]! * blockShrink[b]!;
    for (let j = frame.blockStart[b]!; j < frame.blockStart[b + 1]!; j++)
      rest += d[j]! * (1 - blockFactor[b]! * d[j]!);
  }

  // L, then LL'
  multiplyRows(product, s, at, n, at, q, q, q);
  for (let r = 0; r < q; r++)
    for (let t = 0; t < q; t++) product[r * q + t] = (r === t ? 1 : 0) - product[r * q + t]!;
  let inner = traceOfProduct(n, at, product, q);
  for (let r = 0; r < q; r++)
    for (let t = 0; t < q; t++) {
      let sum = 0;
      for (let k = 0; k < q; k++) sum += product[r * q + k]! * product[t * q + k]!;
      inner -= sum * xu[r * q + t]!;
    }
  traces[frame.outerTerm]! += outer;
  traces[frame.innerTerm]! += inner;
  traces[2]! += rest;
}

/** V_k x for the terms in the order of θ: sums over an entry's sites and over its years spread back over its cells, and x itself. */
export function spreadByTerm(
  frame: NetworkFrame,
  x: Float64Array,
): [Float64Array, Float64Array, Float64Array] {
  const outer = new Float64Array(frame.cellCount);
  const inner = new Float64Array(frame.cellCount);
  const sums = new Float64Array(frame.maxLevels);
  for (let i = 0; i < frame.entries.length; i++) {
    sums.fill(0, 0, frame.levelCount[i]);
    for (let b = frame.firstBlock[i]!; b < frame.firstBlock[i + 1]!; b++) {
      let sum = 0;
      for (let j = frame.blockStart[b]!; j < frame.blockStart[b + 1]!; j++) {
        sum += x[j]!;
        sums[frame.level[j]!]! += x[j]!;
      }
      outer.fill(sum, frame.blockStart[b], frame.blockStart[b + 1]);
    }
    for (let j = frame.start[i]!; j < frame.start[i + 1]!; j++) inner[j] = sums[frame.level[j]!]!;
  }
  return frame.outerTerm === 0 ? [outer, inner, x] : [inner, outer, x];
}

/** Four sums side by side, since one alone waits for each addition to end. */
export function dot(a: Float64Array, b: Float64Array): number {
  const whole = a.length - (a.length % 4);
  let s0 = 0;
  let s1 = 0;
  let s2 = 0;
  let s3 = 0;
  for (let j = 0; j < whole; j += 4) {
    s0 += a[j]! * b[j]!;
    s1 += a[j + 1]! * b[j + 1]!;
    s2 += a[j + 2]! * b[j + 2]!;
    s3 += a[j + 3]! * b[j + 3]!;
  }
  for (let j = whole; j < a.length; j++) s0 += a[j]! * b[j]!;
  return s0 + s1 + (s2 + s3);
}

/**
 * g_k = −½(tr(PV_k) − Py'V_kPy), AI_kl = ½ (V_kPy)'P(V_lPy).
 * Source: Gilmour, Thompson & Cullis (1995), Biometrics 51:1440–1450, eq. 9.
 */
export function differentiateCriterion(frame: NetworkFrame, point: NetworkPoint): CriterionDerivatives {
  const { absorption, system } = point;
  const scratch = makeScratch(frame);
  const traces = new Float64Array(3);
  for (let i = 0; i < frame.entries.length; i++) addTraces(frame, point, i, scratch, traces);

  const working = spreadByTerm(frame, system.py);
  const gradient = Float64Array.from(working, (f, k) => 0.5 * (dot(system.py, f) - traces[k]!));
  const averageInformation = new Float64Array(9);
  const projected = new Float64Array(frame.cellCount);
  working.forEach((f, k) => {
    applyP(frame, absorption, system.inverse, f, projected);
    for (let l = 0; l <= k; l++) {
      const value = 0.5 * dot(working[l]!, projected);
      averageInformation[k * 3 + l] = value;
      averageInformation[l * 3 + k] = value;
    }
  });
  return { gradient, averageInformation };
}
