/**
 * Cholesky factor of a symmetric non-negative definite matrix, columns taken in the order given;
 * a column that depends on earlier ones is skipped, not moved. So the leading columns keep their
 * meaning (sequential sums of squares) and the skipped ones tell what is not estimable.
 */
export interface SkippingFactor {
  /** order of the matrix */
  readonly size: number;
  /** number of independent columns */
  readonly rank: number;
  /** indices of the independent columns, ascending */
  readonly kept: Int32Array;
  /** indices of the skipped columns, ascending */
  readonly dropped: Int32Array;
  /** rank × size, row-major; row k belongs to kept[k]; zero left of it */
  readonly r: Float64Array;
}

/**
 * @param a size × size symmetric, row-major; only the upper triangle is read
 * @param tolerance a pivot below tolerance × its original diagonal counts as zero
 */
export function factorSkipping(a: Float64Array, size: number, tolerance = 1e-9): SkippingFactor {
  const work = a.slice();
  const keptList: number[] = [];
  const droppedList: number[] = [];
  const rows = new Float64Array(size * size);
  let rank = 0;
  for (let j = 0; j < size; j++) {
    const pivot = work[j * size + j]!;
    const original = a[j * size + j]!;
    if (!(pivot > tolerance * original) || original <= 0) {
      droppedList.push(j);
      continue;
    }
    const root = Math.sqrt(pivot);
    const base = rank * size;
    for (let k = j; k < size; k++) rows[base + k] = work[j * size + k]! / root;
    for (let k = j + 1; k < size; k++) {
      const factor = rows[base + k]!;
      if (factor === 0) continue;
      const target = k * size;
      for (let l = k; l < size; l++) work[target + l]! -= factor * rows[base + l]!;
    }
    keptList.push(j);
    rank++;
  }
  return {
    size,
    rank,
    kept: Int32Array.from(keptList),
    dropped: Int32Array.from(droppedList),
    r: rows.subarray(0, rank * size),
  };
}

/** The square upper triangle of the kept columns, rank × rank, row-major. */
export function keptTriangle(factor: SkippingFactor): Float64Array {
  const { rank, size, kept, r } = factor;
  const triangle = new Float64Array(rank * rank);
  for (let i = 0; i < rank; i++)
    for (let j = i; j < rank; j++) triangle[i * rank + j] = r[i * size + kept[j]!]!;
  return triangle;
}

/** Solves R'z = b in place; R upper, n × n, row-major. */
export function solveTransposed(r: Float64Array, n: number, b: Float64Array): void {
  for (let i = 0; i < n; i++) {
    const z = b[i]! / r[i * n + i]!;
    b[i] = z;
    if (z === 0) continue;
    for (let j = i + 1; j < n; j++) b[j]! -= r[i * n + j]! * z;
  }
}

/** Solves Rx = z in place; R upper, n × n, row-major. */
export function solveUpper(r: Float64Array, n: number, z: Float64Array): void {
  for (let i = n - 1; i >= 0; i--) {
    let sum = z[i]!;
    for (let j = i + 1; j < n; j++) sum -= r[i * n + j]! * z[j]!;
    z[i] = sum / r[i * n + i]!;
  }
}

/** The vectors v (each of length size) with A v = 0, one for each skipped column. */
export function nullVectors(factor: SkippingFactor): Float64Array[] {
  const { rank, size, kept, dropped, r } = factor;
  if (dropped.length === 0) return [];
  const triangle = keptTriangle(factor);
  return Array.from(dropped, (column) => {
    const coefficients = new Float64Array(rank);
    for (let i = 0; i < rank; i++) coefficients[i] = kept[i]! < column ? r[i * size + column]! : 0;
    solveUpper(triangle, rank, coefficients);
    const vector = new Float64Array(size);
    vector[column] = 1;
    for (let i = 0; i < rank; i++)
      vector[kept[i]!] = Math.abs(coefficients[i]!) < 1e-9 ? 0 : -coefficients[i]!;
    return vector;
  });
}
