import { choleskyUpper } from '#server/stats/linear/dense.ts';
import { solveTransposed, solveUpper } from '#server/stats/linear/skipping-factor.ts';
import { invertFromTriangle } from '#server/stats/linear/triangle-inverse.ts';

/** x with a x = b for a small positive definite a, row-major; null where it is not. */
export function solveSmall(a: Float64Array, b: Float64Array): Float64Array | null {
  const n = b.length;
  const triangle = choleskyUpper(a, n);
  if (triangle === null) return null;
  const x = b.slice();
  solveTransposed(triangle, n, x);
  solveUpper(triangle, n, x);
  return x;
}

/** Inverse of a positive definite n × n matrix, or null. */
export function invertSmall(a: Float64Array, n: number): Float64Array | null {
  const triangle = choleskyUpper(a, n);
  return triangle === null ? null : invertFromTriangle(triangle, n);
}
