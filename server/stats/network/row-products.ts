// Dense products, row-major, four rows at a time: what they are added to is then read and written a quarter as often.

/** Adds Σ_k weights[k] · row k of `rows` to `length` numbers of out; `count` rows, `stride` apart. */
export function addCombination(
  out: Float64Array,
  outAt: number,
  length: number,
  rows: Float64Array,
  rowsAt: number,
  stride: number,
  weights: Float64Array,
  weightsAt: number,
  count: number,
): void {
  let k = 0;
  for (; k + 4 <= count; k += 4) {
    const w0 = weights[weightsAt + k]!;
    const w1 = weights[weightsAt + k + 1]!;
    const w2 = weights[weightsAt + k + 2]!;
    const w3 = weights[weightsAt + k + 3]!;
    const r0 = rowsAt + k * stride;
    const r1 = r0 + stride;
    const r2 = r1 + stride;
    const r3 = r2 + stride;
    for (let l = 0; l < length; l++)
      out[outAt + l]! += w0 * rows[r0 + l]! + w1 * rows[r1 + l]! + w2 * rows[r2 + l]! + w3 * rows[r3 + l]!;
  }
  for (; k < count; k++) {
    const weight = weights[weightsAt + k]!;
    const row = rowsAt + k * stride;
    for (let l = 0; l < length; l++) out[outAt + l]! += weight * rows[row + l]!;
  }
}

/** out = A B for A n × k at offset aAt and B k × m at offset bAt. */
export function multiplyRows(
  out: Float64Array,
  a: Float64Array,
  aAt: number,
  b: Float64Array,
  bAt: number,
  n: number,
  k: number,
  m: number,
): void {
  out.fill(0, 0, n * m);
  for (let r = 0; r < n; r++) addCombination(out, r * m, m, b, bAt, m, a, aAt + r * k, k);
}

/** Adds A'B to the upper triangle of out, m × m, for A and B with `count` rows of m. */
export function addCross(
  out: Float64Array,
  m: number,
  a: Float64Array,
  b: Float64Array,
  count: number,
): void {
  let row = 0;
  for (; row + 4 <= count; row += 4) {
    const r0 = row * m;
    const r1 = r0 + m;
    const r2 = r1 + m;
    const r3 = r2 + m;
    for (let t = 0; t < m; t++) {
      const a0 = a[r0 + t]!;
      const a1 = a[r1 + t]!;
      const a2 = a[r2 + t]!;
      const a3 = a[r3 + t]!;
      const target = t * m;
      for (let u = t; u < m; u++)
        out[target + u]! += a0 * b[r0 + u]! + a1 * b[r1 + u]! + a2 * b[r2 + u]! + a3 * b[r3 + u]!;
    }
  }
  for (; row < count; row++) {
    const at = row * m;
    for (let t = 0; t < m; t++) {
      const value = a[at + t]!;
      for (let u = t; u < m; u++) out[t * m + u]! += value * b[at + u]!;
    }
  }
}

/** out[outAt + k] = row k of `rows` times `vector`, both `length` long; `count` rows, four sums side by side. */
export function multiplyRow(
  out: Float64Array,
  outAt: number,
  rows: Float64Array,
  rowsAt: number,
  length: number,
  count: number,
  vector: Float64Array,
): void {
  let k = 0;
  for (; k + 4 <= count; k += 4) {
    const r0 = rowsAt + k * length;
    const r1 = r0 + length;
    const r2 = r1 + length;
    const r3 = r2 + length;
    let s0 = 0;
    let s1 = 0;
    let s2 = 0;
    let s3 = 0;
    for (let l = 0; l < length; l++) {
      const value = vector[l]!;
      s0 += value * rows[r0 + l]!;
      s1 += value * rows[r1 + l]!;
      s2 += value * rows[r2 + l]!;
      s3 += value * rows[r3 + l]!;
    }
    out[outAt + k] = s0;
    out[outAt + k + 1] = s1;
    out[outAt + k + 2] = s2;
    out[outAt + k + 3] = s3;
  }
  for (; k < count; k++) out[outAt + k] = multiplyOne(rows, rowsAt + k * length, length, vector);
}

/** One row times a vector. One sum alone would wait for each addition to end. */
function multiplyOne(rows: Float64Array, at: number, length: number, vector: Float64Array): number {
  const whole = length - (length % 4);
  let s0 = 0;
  let s1 = 0;
  let s2 = 0;
  let s3 = 0;
  for (let l = 0; l < whole; l += 4) {
    s0 += vector[l]! * rows[at + l]!;
    s1 += vector[l + 1]! * rows[at + l + 1]!;
    s2 += vector[l + 2]! * rows[at + l + 2]!;
    s3 += vector[l + 3]! * rows[at + l + 3]!;
  }
  for (let l = whole; l < length; l++) s0 += vector[l]! * rows[at + l]!;
  return s0 + s1 + (s2 + s3);
}

/** Copies the upper triangle of a, m × m, to the lower one. */
export function mirrorUpper(a: Float64Array, m: number): void {
  for (let t = 0; t < m; t++) for (let u = t + 1; u < m; u++) a[u * m + t] = a[t * m + u]!;
}
