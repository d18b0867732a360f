import type { NetworkFrame } from './network-frame.ts';

/** θ: variances of entry × site, entry × year and rest, in that order. */
export type Theta = Float64Array;

/**
 * What is left of each entry's cells once its own effect is taken out as fixed:
 * Q_i = D − D Z K Z' D with D = diag(1 / (θ_r + v)), never formed.
 * Blocks of entry i lie at blockStart[i] (q_i × q_i) and vectorStart[i] (q_i).
 */
export interface EntryAbsorption {
  readonly blockStart: Int32Array;
  readonly vectorStart: Int32Array;
  readonly maxWidth: number;
  /** 1 / (θ_r + v) of each cell */
  readonly d: Float64Array;
  /** N1_i = Z' D Z */
  readonly n1: Float64Array;
  /** K_i, the entry's own effect included */
  readonly k: Float64Array;
  /** a_i, so that w = D Z a is V⁻¹1 */
  readonly a: Float64Array;
  /** c_i = 1'V⁻¹1 */
  readonly c: Float64Array;
  /** Σ log(θ_r + v) + Σ log|M| + Σ log c; set by absorbEntries */
  logDeterminant: number;
}

export function prepareAbsorption(frame: NetworkFrame): EntryAbsorption {
  const entries = frame.entries.length;
  const blockStart = new Int32Array(entries + 1);
  const vectorStart = new Int32Array(entries + 1);
  let maxWidth = 0;
  for (let i = 0; i < entries; i++) {
    const q = frame.width[i]!;
    blockStart[i + 1] = blockStart[i]! + q * q;
    vectorStart[i + 1] = vectorStart[i]! + q;
    if (q > maxWidth) maxWidth = q;
  }
  return {
    blockStart,
    vectorStart,
    maxWidth,
    d: new Float64Array(frame.cellCount),
    n1: new Float64Array(blockStart[entries]!),
    k: new Float64Array(blockStart[entries]!),
    a: new Float64Array(vectorStart[entries]!),
    c: new Float64Array(entries),
    logDeterminant: 0,
  };
}

/** Z' diag(weight) Z of entry i into out at offset at; symmetric, row-major, q wide. */
export function crossEntry(
  frame: NetworkFrame,
  i: number,
  weight: Float64Array,
  out: Float64Array,
  at: number,
): void {
  const q = frame.width[i]!;
  out.fill(0, at, at + q * q);
  let total = 0;
  for (let c = frame.start[i]!, end = frame.start[i + 1]!; c < end; c++) {
    const w = weight[c]!;
    const s = frame.siteColumn[c]!;
    const y = frame.yearColumn[c]!;
    total += w;
    out[at + s]! += w;
    out[at + y]! += w;
    out[at + s * q + y]! += w;
  }
  out[at] = total;
  for (let s = 1; s < q; s++) {
    out[at + s * q] = out[at + s]!;
    out[at + s * q + s] = out[at + s]!;
  }
  for (let s = 1; s <= frame.siteWidth[i]!; s++)
    for (let y = frame.siteWidth[i]! + 1; y < q; y++) out[at + y * q + s] = out[at + s * q + y]!;
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

interface BlockScratch {
  readonly schur: Float64Array;
  readonly coupling: Float64Array;
  readonly solved: Float64Array;
}

/**
 * K0 = Λ M⁻¹ Λ with M = I + Λ N1 Λ, Λ = diag(0, √θ_site …, √θ_year …).
 * M is an arrow: sites are diagonal, so only years × years is inverted.
 * @returns log|M|
 */
function invertArrow(
  n1: Float64Array,
  k: Float64Array,
  at: number,
  q: number,
  sites: number,
  theta: Theta,
  scratch: BlockScratch,
): number {
  const years = q - 1 - sites;
  const thetaSite = theta[0]!;
  const thetaYear = theta[1]!;
  const cross = Math.sqrt(thetaSite * thetaYear);
  const { schur, coupling, solved } = scratch;
  let logDeterminant = 0;
  for (let y = 0; y < years; y++)
    for (let z = 0; z < years; z++)
      schur[y * years + z] = y === z ? 1 + thetaYear * n1[at + (1 + sites + y) * (q + 1)]! : 0;
  for (let s = 0; s < sites; s++) {
    const pivot = 1 + thetaSite * n1[at + (1 + s) * (q + 1)]!;
    logDeterminant += Math.log(pivot);
    const row = at + (1 + s) * q + 1 + sites;
    for (let y = 0; y < years; y++) coupling[s * years + y] = (cross * n1[row + y]!) / pivot;
    for (let y = 0; y < years; y++) {
      const b = cross * n1[row + y]!;
      if (b === 0) continue;
      for (let z = 0; z < years; z++) schur[y * years + z]! -= b * coupling[s * years + z]!;
    }
  }
  logDeterminant += invertInPlace(schur, years);
  k.fill(0, at, at + q * q);
  for (let y = 0; y < years; y++)
    for (let z = 0; z < years; z++)
      k[at + (1 + sites + y) * q + 1 + sites + z] = thetaYear * schur[y * years + z]!;
  for (let s = 0; s < sites; s++) {
    for (let y = 0; y < years; y++) {
      let sum = 0;
      for (let z = 0; z < years; z++) sum += coupling[s * years + z]! * schur[z * years + y]!;
      solved[s * years + y] = sum;
      k[at + (1 + s) * q + 1 + sites + y] = -cross * sum;
      k[at + (1 + sites + y) * q + 1 + s] = -cross * sum;
    }
    for (let r = 0; r <= s; r++) {
      let sum = r === s ? 1 / (1 + thetaSite * n1[at + (1 + s) * (q + 1)]!) : 0;
      for (let y = 0; y < years; y++) sum += solved[s * years + y]! * coupling[r * years + y]!;
      k[at + (1 + s) * q + 1 + r] = thetaSite * sum;
      k[at + (1 + r) * q + 1 + s] = thetaSite * sum;
    }
  }
  return logDeterminant;
}

/** a = e1 − K0 N1 e1, c = (N1 a)[1], K = K0 + aa'/c. */
function absorbOwnEffect(absorption: EntryAbsorption, i: number, q: number): void {
  const { n1, k, a, c } = absorption;
  const at = absorption.blockStart[i]!;
  const va = absorption.vectorStart[i]!;
  for (let r = 0; r < q; r++) {
    let sum = r === 0 ? 1 : 0;
    for (let s = 0; s < q; s++) sum -= k[at + r * q + s]! * n1[at + s]!;
    a[va + r] = sum;
  }
  let precision = 0;
  for (let r = 0; r < q; r++) precision += n1[at + r]! * a[va + r]!;
  c[i] = precision;
  for (let r = 0; r < q; r++) {
    const factor = a[va + r]! / precision;
    for (let s = 0; s < q; s++) k[at + r * q + s]! += factor * a[va + s]!;
  }
}

/** Fills the absorption for θ; θ_r + v must be positive everywhere. */
export function absorbEntries(frame: NetworkFrame, theta: Theta, absorption: EntryAbsorption): void {
  const rest = theta[2]!;
  let logDeterminant = 0;
  for (let c = 0; c < frame.cellCount; c++) {
    const variance = rest + frame.v[c]!;
    absorption.d[c] = 1 / variance;
    logDeterminant += Math.log(variance);
  }
  const size = absorption.maxWidth;
  const scratch = {
    schur: new Float64Array(size * size),
    coupling: new Float64Array(size * size),
    solved: new Float64Array(size * size),
  };
  for (let i = 0; i < frame.entries.length; i++) {
    const at = absorption.blockStart[i]!;
    const q = frame.width[i]!;
    crossEntry(frame, i, absorption.d, absorption.n1, at);
    logDeterminant += invertArrow(absorption.n1, absorption.k, at, q, frame.siteWidth[i]!, theta, scratch);
    absorbOwnEffect(absorption, i, q);
    logDeterminant += Math.log(absorption.c[i]!);
  }
  absorption.logDeterminant = logDeterminant;
}
