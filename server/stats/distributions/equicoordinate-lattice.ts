import { chiSquareUpper } from './chi-square.ts';
import { findUpperQuantile } from './find-root.ts';
import { averageOverLattice } from './lattice-rule.ts';
import { normalCdf, normalQuantile } from './normal.ts';
import type { Correlation, OneFactor } from './one-factor.ts';

const SMALLEST_PIVOT = 1e-6;
const NODE_STEP = 0.25;
const NODE_REACH = 8.5;

/** Lower triangle of the Cholesky factor, m × m by rows; tiny pivots are held up, since exact ties may occur. */
function choleskyRows(entry: (i: number, j: number) => number, m: number): Float64Array {
  const factor = new Float64Array(m * m);
  for (let i = 0; i < m; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      let rest = entry(i, j);
      for (let k = 0; k < j; k += 1) rest -= (factor[i * m + k] as number) * (factor[j * m + k] as number);
      factor[i * m + j] =
        i === j ? Math.sqrt(Math.max(rest, SMALLEST_PIVOT ** 2)) : rest / (factor[j * m + j] as number);
    }
  }
  return factor;
}

/** P(some |Z_i| > w) given the leading coordinates of a point: one variable after the other. */
function outsideAlong(
  point: Float64Array,
  start: number,
  w: number,
  factor: Float64Array,
  drawn: Float64Array,
): number {
  const m = drawn.length;
  let logInside = 0;
  for (let i = 0; i < m; i += 1) {
    let shift = 0;
    for (let j = 0; j < i; j += 1) shift += (factor[i * m + j] as number) * (drawn[j] as number);
    const pivot = factor[i * m + i] as number;
    const below = normalCdf((-w - shift) / pivot);
    const above = normalCdf((shift - w) / pivot);
    logInside += Math.log1p(-Math.min(below + above, 1));
    if (logInside === -Infinity) return 1;
    if (i === m - 1) break;
    const share = point[start + i] as number;
    // Drawn from the nearer side, where the normal integral is small and exact.
    const fromBelow = below * (1 - share) + (1 - above) * share;
    const fromAbove = above * share + (1 - below) * (1 - share);
    drawn[i] = fromBelow < 0.5 ? normalQuantile(fromBelow) : -normalQuantile(fromAbove);
  }
  return -Math.expm1(logInside);
}

/** Quantile of √(χ²/df) as a function of u, from a table over normal deviates. */
function scaleQuantile(df: number): (u: number) => number {
  if (df === Infinity) return () => 1;
  const count = (2 * NODE_REACH) / NODE_STEP + 1;
  const logs = Float64Array.from({ length: count }, (_, i) => {
    const upper = normalCdf(NODE_REACH - i * NODE_STEP);
    return (
      0.5 * Math.log(findUpperQuantile((x) => chiSquareUpper(x, df), Math.min(upper, 1 - 1e-15), df) / df)
    );
  });
  return (u) => {
    const at = Math.min(count - 1.001, Math.max(0, (normalQuantile(u) + NODE_REACH) / NODE_STEP));
    const index = Math.floor(at);
    const low = logs[index] as number;
    return Math.exp(low + (at - index) * ((logs[index + 1] as number) - low));
  };
}

/**
 * What a correlation matrix adds to P(max |T_i| > t) over its one-factor approximation.
 * Both are followed along the same points, so that the error is that of their small difference.
 * @param correlation m × m
 * @param factor its approximation, whose own probability is known by quadrature
 * @param t at least 0
 * @param df fractional or Infinity
 * @param target error at which to stop
 * Source: Genz (1992), J. Comput. Graph. Statist. 1:141–149, with a control variate.
 */
export function latticeDifference(
  correlation: Correlation,
  factor: OneFactor,
  t: number,
  df: number,
  target: number,
): { readonly mean: number; readonly error: number } {
  const m = correlation.length;
  const { loadings } = factor;
  const full = choleskyRows((i, j) => correlation[i]?.[j] ?? 0, m);
  const approximate = choleskyRows((i, j) => (i === j ? 1 : (loadings[i] ?? 0) * (loadings[j] ?? 0)), m);
  const scale = scaleQuantile(df);
  const drawn = new Float64Array(m);
  return averageOverLattice(
    (point) => {
      const w = t * scale(point[0] as number);
      return outsideAlong(point, 1, w, full, drawn) - outsideAlong(point, 1, w, approximate, drawn);
    },
    m,
    target,
  );
}
