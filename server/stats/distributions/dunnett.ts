import { findUpperQuantile } from './find-root.ts';
import { normalUpper } from './normal.ts';
import { averageOverScale } from './scale-average.ts';
import { tabulateTail, type ScaledTail } from './scaled-tail.ts';

/** Correlations of m comparisons with one check: m rows of length m. */
export type Correlation = readonly ArrayLike<number>[];

/**
 * Adjusted two-sided p values of a single-step comparison of several entries with one check.
 * @param family.ts estimates divided by their standard errors, length m; signs are ignored
 * @param family.df degrees of freedom, fractional or Infinity: one for all, or one for each comparison
 * @param family.correlation of the estimates
 * @returns p in the order of ts, the method, and the largest error to expect of a p
 */
export function dunnettAdjust(family: {
  readonly ts: ArrayLike<number>;
  readonly df: number | ArrayLike<number>;
  readonly correlation: Correlation;
}): { readonly p: Float64Array; readonly method: 'product-form' | 'lattice'; readonly maxError: number } {
  const { ts, df, correlation } = family;
  const tail = productTail(factorLoadings(correlation));
  const p = Float64Array.from(ts, (t, i) =>
    averageOverScale(tail, Math.abs(t), typeof df === 'number' ? df : (df[i] ?? Number.NaN)),
  );
  return { p, method: 'product-form', maxError: 1e-10 };
}

/**
 * The d with P(max |T| > d) = alpha.
 * @param family.alpha in (0, 1)
 * @param family.df degrees of freedom, fractional or Infinity
 */
export function dunnettQuantile(family: {
  readonly alpha: number;
  readonly df: number;
  readonly correlation: Correlation;
}): number {
  const { alpha, df, correlation } = family;
  const tail = productTail(factorLoadings(correlation));
  return findUpperQuantile((d) => averageOverScale(tail, d, df), alpha, 2);
}

/** Loadings λ with ρ_ij = λ_i λ_j. */
function factorLoadings(correlation: Correlation): Float64Array {
  const m = correlation.length;
  const at = (i: number, j: number): number => correlation[i]?.[j] ?? 0;
  if (m === 1) return Float64Array.of(0);
  if (m === 2) {
    const rho = at(0, 1);
    const size = Math.sqrt(Math.abs(rho));
    return Float64Array.of(size, size * Math.sign(rho));
  }
  return Float64Array.from({ length: m }, (_, i) => {
    const j = (i + 1) % m;
    const k = (i + 2) % m;
    return Math.sqrt(Math.abs((at(i, j) * at(i, k)) / at(j, k)));
  });
}

/** P(max |Z_i| > w) for correlations λ_i λ_j: independent given the shared factor z. */
function productTail(loadings: Float64Array): ScaledTail {
  const largest = loadings.reduce((max, l) => Math.max(max, Math.abs(l)), 0);
  const step = 0.25 * Math.min(1, Math.sqrt(1 - largest * largest) / Math.max(largest, 1e-9));
  const upper = (w: number): number => {
    const last = Math.ceil((largest * w + 8.6) / step);
    let sum = 0;
    for (let j = 0; j <= last; j += 1) {
      const z = j * step;
      let inside = 0;
      for (const l of loadings) {
        const spread = Math.sqrt(1 - l * l);
        inside += Math.log1p(-normalUpper((w - l * z) / spread) - normalUpper((w + l * z) / spread));
      }
      sum += (j === 0 ? 0.5 : 1) * Math.exp(-0.5 * z * z) * -Math.expm1(inside);
    }
    return Math.min(1, 2 * sum * step * 0.3989422804014327);
  };
  return tabulateTail(upper, 0.5);
}
