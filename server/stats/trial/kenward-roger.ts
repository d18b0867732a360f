import { fUpper } from '#server/stats/distributions/f-distribution.ts';
import { choleskyUpper, crossProduct, multiply, solveTransposedRows } from '#server/stats/linear/dense.ts';
import { solveTransposed } from '#server/stats/linear/skipping-factor.ts';
import type { MeanEstimates } from './gap-table.ts';
import { covarianceOfMeans, predictMeans, type MeanFamily } from './mean-family.ts';
import { reorderBasis, type MixedBasis, type MixedFit } from './mixed-fit.ts';
import type { NamedTerm } from './random-part.ts';
import type { FixedTerm } from './model-terms.ts';
import type { VarianceRow } from './trial-result.ts';
import { confoundedTerms, orderLast } from './variance-table.ts';

/**
 * Means of a family under REML with Kenward–Roger covariance and df.
 * Source: Kenward & Roger (1997), Biometrics 53:983–997.
 */
export function estimateMixedMeans(fit: MixedFit<NamedTerm>, family: MeanFamily): MeanEstimates {
  const { fixed, basis, theta, random, w } = fit;
  const { width } = fixed.model;
  const size = family.labels.length;
  const q = fit.root.length;
  const rank = basis.kept.length;
  const plain = covarianceOfMeans(family, fixed, basis.phi);
  // F = TΦL', q × e
  const f = new Float64Array(q * size);
  const row = new Float64Array(width);
  for (let k = 0; k < q; k++) {
    for (let j = 0; j < rank; j++) row[basis.kept[j]!] = basis.tPhi[k * rank + j]!;
    f.set(predictMeans(family, row), k * size);
  }
  const covariance = adjustCovariance(plain, f, fit.correction, q, size);
  const terms = random.terms.length;
  const gradients = random.terms.map((_, k) => {
    const [from, to] = [random.starts[k]!, random.starts[k + 1]!];
    return crossProduct(f.subarray(from * size, to * size), to - from, size);
  });
  const sigma2 = theta[terms]!;
  const count = terms + 1;
  const g = new Float64Array(count);
  const difference = (m: Float64Array, a: number, b: number | null) =>
    b === null ? m[a * size + a]! : m[a * size + a]! + m[b * size + b]! - 2 * m[a * size + b]!;
  const dfOf = (a: number, b: number | null): number => {
    const variance = difference(plain, a, b);
    let rest = variance;
    for (let k = 0; k < terms; k++) {
      g[k] = difference(gradients[k]!, a, b);
      rest -= theta[k]! * g[k]!;
    }
    g[terms] = rest / sigma2;
    let spread = 0;
    for (let k = 0; k < count; k++)
      for (let l = 0; l < count; l++) spread += g[k]! * w[k * count + l]! * g[l]!;
    return (2 * variance * variance) / spread;
  };
  const beta = new Float64Array(width);
  for (let j = 0; j < rank; j++) beta[basis.kept[j]!] = basis.beta[j]!;
  return {
    family,
    values: predictMeans(family, beta),
    center: fixed.center,
    covariance,
    dfOf,
    hasSharedDf: false,
    isExact: false,
  };
}

/** Φ_A = Φ + 2 F' K F, size × size. */
function adjustCovariance(
  plain: Float64Array,
  f: Float64Array,
  correction: Float64Array,
  q: number,
  size: number,
): Float64Array {
  const kf = multiply(correction, f, q, q, size);
  const out = plain.slice();
  for (let k = 0; k < q; k++)
    for (let i = 0; i < size; i++) {
      const factor = 2 * f[k * size + i]!;
      if (factor === 0) continue;
      for (let j = 0; j < size; j++) out[i * size + j]! += factor * kf[k * size + j]!;
    }
  return out;
}

/** Kenward–Roger F tests of the fixed terms, each after all others. */
export function testMixedTerms(fit: MixedFit<NamedTerm>): VarianceRow[] {
  const confounded = new Set(confoundedTerms(fit.fixed));
  return fit.fixed.model.fixed.slice(1).map((term) => {
    const empty = { term: term.name, df: 0, denDf: null, ss: null, ms: null, f: null, p: null };
    if (confounded.has(term)) return empty;
    const isFull = fit.fixed.factor.dropped.length === 0;
    const basis = isFull ? fit.basis : reorderBasis(fit, orderLast(fit.fixed, term));
    const columns = columnsOf(basis, term);
    return columns.length === 0 ? empty : { ...empty, ...testColumns(fit, basis, columns) };
  });
}

function columnsOf(basis: MixedBasis, term: FixedTerm): number[] {
  return Array.from(basis.kept.keys()).filter(
    (j) => basis.kept[j]! >= term.offset && basis.kept[j]! < term.offset + term.width,
  );
}

/** F test that the coefficients in the given places are all 0; Kenward & Roger (1997), section 3. */
function testColumns(
  fit: MixedFit<NamedTerm>,
  basis: MixedBasis,
  columns: readonly number[],
): Pick<VarianceRow, 'df' | 'denDf' | 'f' | 'p'> {
  const { theta, random, w } = fit;
  const rank = basis.kept.length;
  const q = fit.root.length;
  const df = columns.length;
  const plain = new Float64Array(df * df);
  for (let i = 0; i < df; i++)
    for (let j = 0; j < df; j++) plain[i * df + j] = basis.phi[columns[i]! * rank + columns[j]!]!;
  const f = new Float64Array(q * df);
  for (let k = 0; k < q; k++)
    for (let j = 0; j < df; j++) f[k * df + j] = basis.tPhi[k * rank + columns[j]!]!;
  const adjusted = choleskyUpper(adjustCovariance(plain, f, fit.correction, q, df), df)!;
  const estimate = Float64Array.from(columns, (column) => basis.beta[column]!);
  solveTransposed(adjusted, df, estimate);
  const wald = estimate.reduce((sum, value) => sum + value * value, 0) / df;
  // J_k = R⁻ᵀ M_k R⁻¹ with R'R = Φ_L and M_k = F_k'F_k = ∂Φ_L/∂θ_k; the residual's follows from Σ θ_k J_k + σ² J = I
  const triangle = choleskyUpper(plain, df)!;
  const rotated = transpose(f, q, df);
  solveTransposedRows(triangle, df, rotated, q);
  const derivatives = random.terms.map((_, k) =>
    outerOver(rotated, df, q, random.starts[k]!, random.starts[k + 1]!),
  );
  const last = new Float64Array(df * df);
  for (let i = 0; i < df * df; i++) {
    let rest = i % (df + 1) === 0 ? 1 : 0;
    derivatives.forEach((derivative, k) => (rest -= theta[k]! * derivative[i]!));
    last[i] = rest / theta[theta.length - 1]!;
  }
  derivatives.push(last);
  let [a1, a2] = [0, 0];
  const count = theta.length;
  const traces = derivatives.map((m) => {
    let sum = 0;
    for (let i = 0; i < df; i++) sum += m[i * df + i]!;
    return sum;
  });
  for (let k = 0; k < count; k++)
    for (let l = 0; l < count; l++) {
      const weight = w[k * count + l]!;
      let product = 0;
      for (let i = 0; i < df * df; i++) product += derivatives[k]![i]! * derivatives[l]![i]!;
      a1 += weight * traces[k]! * traces[l]!;
      a2 += weight * product;
    }
  const { scale, denDf } = matchMoments(df, a1, a2);
  const statistic = scale * wald;
  // with hardly any replication the two moments are not those of an F: no test then
  if (!(denDf > 0 && denDf < Infinity && scale > 0)) return { df, denDf: null, f: null, p: null };
  return { df, denDf, f: statistic, p: fUpper(statistic, df, denDf) };
}

/** Scale and denominator df that make the two first moments of the statistic those of an F. */
function matchMoments(q: number, a1: number, a2: number): { scale: number; denDf: number } {
  const b = (a1 + 6 * a2) / (2 * q);
  const g = ((q + 1) * a1 - (q + 4) * a2) / ((q + 2) * a2);
  const divisor = 3 * q + 2 * (1 - g);
  const v0 = 1 + (g / divisor) * b;
  const v1 = 1 - ((q - g) / divisor) * b;
  const v2 = 1 - ((q + 2 - g) / divisor) * b;
  const rest = 1 - a2 / q;
  // where both vanish (an exact F with few df) their ratio is 1
  const ratio = Math.abs(rest) < 1e-12 && Math.abs(v1) < 1e-12 ? 1 : rest / v1;
  const rho = (ratio * ratio * (Math.abs(v0) < 1e-10 ? 0 : v0)) / v2 / q;
  const denDf = 4 + (q + 2) / (q * rho - 1);
  const scale = Math.abs(denDf - 2) < 1e-2 ? 1 : (denDf * rest) / (denDf - 2);
  return { scale, denDf };
}

function transpose(a: Float64Array, rows: number, columns: number): Float64Array {
  const out = new Float64Array(a.length);
  for (let i = 0; i < rows; i++) for (let j = 0; j < columns; j++) out[j * rows + i] = a[i * columns + j]!;
  return out;
}

/** Σ over columns from … to − 1 of a_i a_j, for a n × m. */
function outerOver(a: Float64Array, n: number, m: number, from: number, to: number): Float64Array {
  const out = new Float64Array(n * n);
  for (let i = 0; i < n; i++)
    for (let j = i; j < n; j++) {
      let sum = 0;
      for (let k = from; k < to; k++) sum += a[i * m + k]! * a[j * m + k]!;
      out[i * n + j] = sum;
      out[j * n + i] = sum;
    }
  return out;
}
