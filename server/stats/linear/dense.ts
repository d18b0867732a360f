/** Upper triangle R with R'R = A, or null where A is not positive definite. A: n × n, row-major, upper triangle read. */
export function choleskyUpper(
  a: Float64Array,
  n: number,
  out: Float64Array = new Float64Array(n * n),
): Float64Array | null {
  for (let i = 0; i < n; i++) for (let j = i; j < n; j++) out[i * n + j] = a[i * n + j]!;
  // four rows at a time, so that the rows below are read and written a quarter as often
  for (let first = 0; first < n; first += 4) {
    const end = Math.min(first + 4, n);
    for (let i = first; i < end; i++) if (!takeRow(out, n, i, end)) return null;
    if (end - first === 4) subtractFourRows(out, n, first);
  }
  return out;
}

/** Scales row i to its place in the triangle and takes it off the rows below it up to `end`; false where it has no pivot. */
function takeRow(out: Float64Array, n: number, i: number, end: number): boolean {
  const row = i * n;
  const pivot = out[row + i]!;
  if (!(pivot > 0)) return false;
  const root = Math.sqrt(pivot);
  for (let j = i; j < n; j++) out[row + j]! /= root;
  for (let k = i + 1; k < end; k++) {
    const factor = out[row + k]!;
    const target = k * n;
    for (let j = k; j < n; j++) out[target + j]! -= factor * out[row + j]!;
  }
  return true;
}

/** Takes rows first … first + 3 of the triangle off all rows below them. */
function subtractFourRows(out: Float64Array, n: number, first: number): void {
  const r0 = first * n;
  const r1 = r0 + n;
  const r2 = r1 + n;
  const r3 = r2 + n;
  for (let k = first + 4; k < n; k++) {
    const f0 = out[r0 + k]!;
    const f1 = out[r1 + k]!;
    const f2 = out[r2 + k]!;
    const f3 = out[r3 + k]!;
    const target = k * n;
    for (let j = k; j < n; j++)
      out[target + j]! -= f0 * out[r0 + j]! + f1 * out[r1 + j]! + f2 * out[r2 + j]! + f3 * out[r3 + j]!;
  }
}

/** Solves R'Z = B in place for many right-hand sides; R n × n upper, B n × m, row-major. */
export function solveTransposedRows(r: Float64Array, n: number, b: Float64Array, m: number): void {
  for (let i = 0; i < n; i++) {
    const row = i * m;
    const diagonal = 1 / r[i * n + i]!;
    for (let c = 0; c < m; c++) b[row + c]! *= diagonal;
    for (let k = i + 1; k < n; k++) {
      const factor = r[i * n + k]!;
      if (factor === 0) continue;
      const target = k * m;
      for (let c = 0; c < m; c++) b[target + c]! -= factor * b[row + c]!;
    }
  }
}

/** C = A'A for A n × m: m × m symmetric, row-major. */
export function crossProduct(
  a: Float64Array,
  n: number,
  m: number,
  out: Float64Array = new Float64Array(m * m),
): Float64Array {
  out.fill(0);
  for (let k = 0; k < n; k++) {
    const row = k * m;
    for (let i = 0; i < m; i++) {
      const factor = a[row + i]!;
      if (factor === 0) continue;
      const target = i * m;
      for (let j = i; j < m; j++) out[target + j]! += factor * a[row + j]!;
    }
  }
  for (let i = 0; i < m; i++) for (let j = 0; j < i; j++) out[i * m + j] = out[j * m + i]!;
  return out;
}

/** C = A B for A n × k and B k × m, row-major. */
export function multiply(a: Float64Array, b: Float64Array, n: number, k: number, m: number): Float64Array {
  const out = new Float64Array(n * m);
  for (let i = 0; i < n; i++)
    for (let l = 0; l < k; l++) {
      const factor = a[i * k + l]!;
      if (factor === 0) continue;
      const source = l * m;
      const target = i * m;
      for (let j = 0; j < m; j++) out[target + j]! += factor * b[source + j]!;
    }
  return out;
}

/** C = A' B for A k × n and B k × m, row-major. */
export function multiplyTransposed(
  a: Float64Array,
  b: Float64Array,
  k: number,
  n: number,
  m: number,
): Float64Array {
  const out = new Float64Array(n * m);
  for (let l = 0; l < k; l++)
    for (let i = 0; i < n; i++) {
      const factor = a[l * n + i]!;
      if (factor === 0) continue;
      const source = l * m;
      const target = i * m;
      for (let j = 0; j < m; j++) out[target + j]! += factor * b[source + j]!;
    }
  return out;
}
