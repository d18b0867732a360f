import { multiply } from '#server/stats/linear/dense.ts';
import { crossEntry } from './entry-absorption.ts';
import { multiplyBlock } from './criterion-derivatives.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';

/** Powers of D over all cells: d, d², d³. */
type Powers = readonly [Float64Array, Float64Array, Float64Array];

/** Products of one entry, q × q blocks, row-major; H_ab = Z'D^a C⁻¹ D^b Z, N_a = Z'D^a Z, L = I − K N1, G = D Z L = Q Z. */
interface EntryProducts {
  readonly q: number;
  readonly k: Float64Array;
  readonly n2: Float64Array;
  readonly n3: Float64Array;
  readonly l: Float64Array;
  readonly g: Float64Array;
  readonly h11: Float64Array;
  readonly h21: Float64Array;
  readonly h31: Float64Array;
  readonly h22: Float64Array;
}

function takeProducts(frame: NetworkFrame, point: NetworkPoint, i: number, powers: Powers): EntryProducts {
  const { absorption } = point;
  const q = frame.width[i]!;
  const at = absorption.blockStart[i]!;
  const k = absorption.k.slice(at, at + q * q);
  const n1 = absorption.n1.subarray(at, at + q * q);
  const n2 = new Float64Array(q * q);
  const n3 = new Float64Array(q * q);
  crossEntry(frame, i, powers[1], n2, 0);
  crossEntry(frame, i, powers[2], n3, 0);
  const l = multiply(k, n1, q, q, q);
  for (let r = 0; r < q; r++) for (let s = 0; s < q; s++) l[r * q + s] = (r === s ? 1 : 0) - l[r * q + s]!;

  const first = frame.start[i]!;
  const cells = frame.start[i + 1]! - first;
  const g = new Float64Array(cells * q);
  const t1 = new Float64Array(cells * q);
  const t2 = new Float64Array(cells * q);
  const size = frame.columnCount;
  const blocks = [
    new Float64Array(q * q),
    new Float64Array(q * q),
    new Float64Array(q * q),
    new Float64Array(q * q),
  ] as const;
  for (let j = 0; j < cells; j++) {
    const cell = first + j;
    const ej = frame.column[cell]!;
    const columns = [0, frame.siteColumn[cell]!, frame.yearColumn[cell]!];
    for (const r of columns) for (let s = 0; s < q; s++) g[j * q + s]! += powers[0][cell]! * l[r * q + s]!;
    if (ej < 0) continue;
    for (let m = first; m < first + cells; m++) {
      const em = frame.column[m]!;
      if (em < 0) continue;
      const c = point.system.inverse[ej * size + em]!;
      const once = c * powers[0][m]!;
      const twice = c * powers[1][m]!;
      for (const r of [0, frame.siteColumn[m]!, frame.yearColumn[m]!]) {
        t1[j * q + r]! += once;
        t2[j * q + r]! += twice;
      }
    }
    for (const r of columns)
      for (let s = 0; s < q; s++) {
        const target = r * q + s;
        blocks[0][target]! += powers[0][cell]! * t1[j * q + s]!;
        blocks[1][target]! += powers[1][cell]! * t1[j * q + s]!;
        blocks[2][target]! += powers[2][cell]! * t1[j * q + s]!;
        blocks[3][target]! += powers[1][cell]! * t2[j * q + s]!;
      }
  }
  return { q, k, n2, n3, l, g, h11: blocks[0], h21: blocks[1], h31: blocks[2], h22: blocks[3] };
}

/** tr(A B), square. */
function trace(a: Float64Array, b: Float64Array, size: number): number {
  let sum = 0;
  for (let r = 0; r < size; r++) for (let s = 0; s < size; s++) sum += a[r * size + s]! * b[s * size + r]!;
  return sum;
}

/** L'XL, q × q. */
function sandwich(l: Float64Array, x: Float64Array, q: number): Float64Array {
  const xl = multiply(x, l, q, q, q);
  const out = new Float64Array(q * q);
  for (let c = 0; c < q; c++)
    for (let r = 0; r < q; r++) {
      let sum = 0;
      for (let s = 0; s < q; s++) sum += l[s * q + r]! * xl[s * q + c]!;
      out[r * q + c] = sum;
    }
  return out;
}

/** Adds tr(Q V_k Q V_l) − 2 tr(C⁻¹E'Q V_k Q V_l Q E) of entry i to information. */
function addEntryTerms(
  frame: NetworkFrame,
  point: NetworkPoint,
  i: number,
  products: EntryProducts,
  powers: Powers,
  information: Float64Array,
): void {
  const { q, k, n2, n3, l, h11, h21, h31, h22 } = products;
  const sites = frame.siteWidth[i]!;
  const at = point.absorption.blockStart[i]!;
  const termOf = (c: number): number => (c <= sites ? 0 : 1);

  const projected = multiply(point.absorption.n1.subarray(at, at + q * q), l, q, q, q);
  const squared = sandwich(l, n2, q);
  const environments = sandwich(l, h11, q);
  const kh = multiply(k, h11, q, q, q);
  const mixed = multiply(n2, kh, q, q, q);
  for (let r = 0; r < q * q; r++) mixed[r] = h21[r]! - mixed[r]!;
  const environmentsSquared = sandwich(l, mixed, q);
  for (let c = 1; c < q; c++) {
    for (let d = 1; d < q; d++) {
      const value = projected[c * q + d]!;
      information[termOf(c) * 3 + termOf(d)]! += value * value - 2 * environments[d * q + c]! * value;
    }
    const withRest = squared[c * q + c]! - 2 * environmentsSquared[c * q + c]!;
    information[termOf(c) * 3 + 2]! += withRest;
    information[6 + termOf(c)]! += withRest;
  }

  const kn2 = multiply(k, n2, q, q, q);
  const kn3 = multiply(k, n3, q, q, q);
  const kn2k = multiply(kn2, k, q, q, q);
  const kn2kh = new Float64Array(q * q);
  multiplyBlock(kn2, 0, kh, q, kn2kh);
  let rest = trace(kn2, kn2, q) - 2 * trace(k, n3, q);
  let cubed =
    -2 * trace(k, h31, q) -
    trace(k, h22, q) +
    2 * trace(kn2k, h21, q) +
    trace(kn3, kh, q) -
    trace(kn2, kn2kh, q);
  for (let j = frame.start[i]!; j < frame.start[i + 1]!; j++) {
    rest += powers[1][j]!;
    const e = frame.column[j]!;
    if (e >= 0) cubed += powers[2][j]! * point.system.inverse[e * frame.columnCount + e]!;
  }
  information[8]! += rest - 2 * cubed;
}

/** Adds E'Q V_k Q E of entry i to the three environment × environment matrices. */
function addEnvironmentBlocks(
  frame: NetworkFrame,
  i: number,
  products: EntryProducts,
  powers: Powers,
  blocks: readonly Float64Array[],
): void {
  const { q, k, n2, g } = products;
  const [site, year, rest] = blocks as readonly [Float64Array, Float64Array, Float64Array];
  const kn2k = multiply(multiply(k, n2, q, q, q), k, q, q, q);
  const first = frame.start[i]!;
  const end = frame.start[i + 1]!;
  const size = frame.columnCount;
  const d = powers[0];
  for (let j = first; j < end; j++) {
    const ej = frame.column[j]!;
    if (ej < 0) continue;
    const rows = [0, frame.siteColumn[j]! * q, frame.yearColumn[j]! * q];
    for (let m = first; m < end; m++) {
      const em = frame.column[m]!;
      if (em < 0) continue;
      let bySite = 0;
      let byYear = 0;
      for (let c = 1; c < q; c++) {
        const product = g[(j - first) * q + c]! * g[(m - first) * q + c]!;
        if (c <= frame.siteWidth[i]!) bySite += product;
        else byYear += product;
      }
      let hat = 0;
      let hatSquared = 0;
      for (const r of rows)
        for (const s of [0, frame.siteColumn[m]!, frame.yearColumn[m]!]) {
          hat += k[r + s]!;
          hatSquared += kn2k[r + s]!;
        }
      const target = ej * size + em;
      site[target]! += bySite;
      year[target]! += byYear;
      rest[target]! += d[j]! * d[m]! * (hatSquared - (d[j]! + d[m]!) * hat) + (j === m ? powers[1][j]! : 0);
    }
  }
}

/**
 * Expected information ½ tr(P V_k P V_l) of θ, exactly, 3 × 3, row-major.
 * Cost: for each entry its cells squared times its sites, and three products of environments cubed.
 */
export function computeExpectedInformation(frame: NetworkFrame, point: NetworkPoint): Float64Array {
  const { d } = point.absorption;
  const powers: Powers = [d, d.map((x) => x * x), d.map((x) => x * x * x)];
  const size = frame.columnCount;
  const information = new Float64Array(9);
  const blocks = [0, 1, 2].map(() => new Float64Array(size * size));
  for (let i = 0; i < frame.entries.length; i++) {
    const products = takeProducts(frame, point, i, powers);
    addEntryTerms(frame, point, i, products, powers, information);
    addEnvironmentBlocks(frame, i, products, powers, blocks);
  }
  const solved = blocks.map((block) => multiply(point.system.inverse, block, size, size, size));
  solved.forEach((left, kk) =>
    solved.forEach((right, ll) => {
      information[kk * 3 + ll]! += trace(left, right, size);
    }),
  );
  return information.map((value) => value / 2);
}
