import { crossEntry } from './entry-absorption.ts';
import { applyP } from './environment-system.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';

/** First derivatives of the restricted log-likelihood in θ, and the average information (3 × 3, row-major). */
export interface CriterionDerivatives {
  readonly gradient: Float64Array;
  readonly averageInformation: Float64Array;
}

/** Working space of one entry; q × q blocks, row-major. */
interface TraceScratch {
  readonly dSquared: Float64Array;
  readonly t: Float64Array;
  readonly h: Float64Array;
  readonly h2: Float64Array;
  readonly n2: Float64Array;
  readonly kn1: Float64Array;
  readonly kn2: Float64Array;
  readonly kh: Float64Array;
  readonly hk: Float64Array;
  readonly hl: Float64Array;
  readonly own: Float64Array;
}

function makeScratch(frame: NetworkFrame, q: number): TraceScratch {
  let cells = 0;
  for (let i = 0; i < frame.entries.length; i++)
    cells = Math.max(cells, frame.start[i + 1]! - frame.start[i]!);
  const block = () => new Float64Array(q * q);
  return {
    dSquared: new Float64Array(frame.cellCount),
    t: new Float64Array(cells * q),
    h: block(),
    h2: block(),
    n2: block(),
    kn1: block(),
    kn2: block(),
    kh: block(),
    hk: block(),
    hl: block(),
    own: new Float64Array(q),
  };
}

/** out = K N for N = Z'·Z of one entry, whose sites (and years) never meet each other. */
export function multiplyByCross(
  k: Float64Array,
  ka: number,
  n: Float64Array,
  na: number,
  q: number,
  sites: number,
  out: Float64Array,
): void {
  const firstYear = sites + 1;
  for (let r = 0; r < q; r++) {
    const row = ka + r * q;
    const target = r * q;
    const own = k[row]!;
    let first = own * n[na]!;
    for (let s = 1; s < q; s++) {
      const value = k[row + s]!;
      first += value * n[na + s]!;
      out[target + s] = own * n[na + s]! + value * n[na + s * q + s]!;
    }
    out[target] = first;
    for (let y = firstYear; y < q; y++) {
      const value = k[row + y]!;
      const source = na + y * q;
      for (let s = 1; s < firstYear; s++) out[target + s]! += value * n[source + s]!;
    }
    for (let s = 1; s < firstYear; s++) {
      const value = k[row + s]!;
      const source = na + s * q;
      for (let y = firstYear; y < q; y++) out[target + y]! += value * n[source + y]!;
    }
  }
}

/** out = A B, q × q, A at offset aa. Four rows of B at a time: the row of out is then read and written a quarter as often. */
export function multiplyBlock(
  a: Float64Array,
  aa: number,
  b: Float64Array,
  q: number,
  out: Float64Array,
): void {
  const whole = q - (q % 4);
  for (let r = 0; r < q; r++) {
    const target = r * q;
    const row = aa + target;
    out.fill(0, target, target + q);
    for (let s = 0; s < whole; s += 4) {
      const f0 = a[row + s]!;
      const f1 = a[row + s + 1]!;
      const f2 = a[row + s + 2]!;
      const f3 = a[row + s + 3]!;
      const b0 = s * q;
      const b1 = b0 + q;
      const b2 = b1 + q;
      const b3 = b2 + q;
      for (let c = 0; c < q; c++)
        out[target + c]! += f0 * b[b0 + c]! + f1 * b[b1 + c]! + f2 * b[b2 + c]! + f3 * b[b3 + c]!;
    }
    for (let s = whole; s < q; s++) {
      const factor = a[row + s]!;
      for (let c = 0; c < q; c++) out[target + c]! += factor * b[s * q + c]!;
    }
  }
}

/** tr(A'B), q × q, A at offset aa: tr(A B) where A is symmetric. */
export function traceOfProduct(a: Float64Array, aa: number, b: Float64Array, q: number): number {
  let sum = 0;
  for (let r = 0; r < q * q; r++) sum += a[aa + r]! * b[r]!;
  return sum;
}

/** T = C⁻¹ D Z over the entry's environments, then H = Z'D T and H2 = Z'D² T. */
function projectInverse(
  frame: NetworkFrame,
  point: NetworkPoint,
  i: number,
  q: number,
  scratch: TraceScratch,
): void {
  const { inverse } = point.system;
  const { d } = point.absorption;
  const { t, h, h2 } = scratch;
  const { column, siteColumn, yearColumn } = frame;
  const size = frame.columnCount;
  const first = frame.start[i]!;
  const end = frame.start[i + 1]!;
  h.fill(0, 0, q * q);
  h2.fill(0, 0, q * q);
  for (let j = first; j < end; j++) {
    const ej = column[j]!;
    if (ej < 0) continue;
    const row = (j - first) * q;
    t.fill(0, row, row + q);
    for (let l = first; l < end; l++) {
      const el = column[l]!;
      if (el < 0) continue;
      const value = inverse[ej * size + el]! * d[l]!;
      t[row]! += value;
      t[row + siteColumn[l]!]! += value;
      t[row + yearColumn[l]!]! += value;
    }
    const dj = d[j]!;
    const site = siteColumn[j]! * q;
    const year = yearColumn[j]! * q;
    for (let s = 0; s < q; s++) {
      const once = dj * t[row + s]!;
      const twice = dj * once;
      h[s]! += once;
      h[site + s]! += once;
      h[year + s]! += once;
      h2[s]! += twice;
      h2[site + s]! += twice;
      h2[year + s]! += twice;
    }
  }
}

/** Adds entry i's part of tr(PV_site), tr(PV_year), tr(PV_rest) to traces. */
function addTraces(
  frame: NetworkFrame,
  point: NetworkPoint,
  i: number,
  scratch: TraceScratch,
  traces: Float64Array,
): void {
  const { absorption, system } = point;
  const { d, k, n1, blockStart } = absorption;
  const q = frame.width[i]!;
  const sites = frame.siteWidth[i]!;
  const at = blockStart[i]!;
  projectInverse(frame, point, i, q, scratch);
  const { dSquared, h, h2, n2, kn1, kn2, kh, hk, hl, own } = scratch;
  crossEntry(frame, i, dSquared, n2, 0);
  multiplyByCross(k, at, n1, at, q, sites, kn1);
  multiplyByCross(k, at, n2, 0, q, sites, kn2);
  multiplyBlock(k, at, h, q, kh);

  // H L = H − H K N1, with H K = (K H)'
  for (let r = 0; r < q; r++) for (let s = 0; s < q; s++) hk[s * q + r] = kh[r * q + s]!;
  multiplyByCross(hk, 0, n1, at, q, sites, hl);
  for (let r = 0; r < q * q; r++) hl[r] = h[r]! - hl[r]!;

  own.fill(0, 0, q);
  for (let r = 0; r < q; r++)
    for (let c = 0; c < q; c++) {
      const rc = r * q + c;
      const product = kn1[rc]!;
      own[c]! -= product * (n1[at + rc]! - hl[rc]!);
    }
  for (let c = 1; c < q; c++) traces[c <= sites ? 0 : 1]! += n1[at + c * q + c]! - hl[c * q + c]! + own[c]!;

  const size = frame.columnCount;
  let rest = 2 * traceOfProduct(k, at, h2, q) - traceOfProduct(kn2, 0, hk, q);
  for (let j = frame.start[i]!; j < frame.start[i + 1]!; j++) {
    const dj = d[j]!;
    const s = frame.siteColumn[j]!;
    const y = frame.yearColumn[j]!;
    const hat =
      k[at]! + k[at + s * q + s]! + k[at + y * q + y]! + 2 * (k[at + s]! + k[at + y]! + k[at + s * q + y]!);
    const e = frame.column[j]!;
    rest += dj - dj * dj * (hat + (e < 0 ? 0 : system.inverse[e * size + e]!));
  }
  traces[2]! += rest;
}

/** V_k x for all three terms: site and year sums within an entry spread back over its cells, and x itself. */
export function spreadByTerm(
  frame: NetworkFrame,
  x: Float64Array,
): [Float64Array, Float64Array, Float64Array] {
  const site = new Float64Array(frame.cellCount);
  const year = new Float64Array(frame.cellCount);
  const sums = new Float64Array(frame.width.reduce((max, q) => Math.max(max, q), 0));
  for (let i = 0; i < frame.entries.length; i++) {
    sums.fill(0, 0, frame.width[i]!);
    for (let j = frame.start[i]!; j < frame.start[i + 1]!; j++) {
      sums[frame.siteColumn[j]!]! += x[j]!;
      sums[frame.yearColumn[j]!]! += x[j]!;
    }
    for (let j = frame.start[i]!; j < frame.start[i + 1]!; j++) {
      site[j] = sums[frame.siteColumn[j]!]!;
      year[j] = sums[frame.yearColumn[j]!]!;
    }
  }
  return [site, year, x];
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
  const scratch = makeScratch(frame, absorption.maxWidth);
  for (let j = 0; j < frame.cellCount; j++) scratch.dSquared[j] = absorption.d[j]! * absorption.d[j]!;
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
