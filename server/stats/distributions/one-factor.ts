/** m rows of length m, ones on the diagonal. */
export type Correlation = readonly ArrayLike<number>[];

/** A correlation matrix as λ λ' outside its diagonal, plus what is left. */
export interface OneFactor {
  /** λ, length m, each less than 1 in size. */
  readonly loadings: Float64Array;
  /** ρ_ij − λ_i λ_j, m × m by rows, zero on the diagonal. */
  readonly rest: Float64Array;
  /** Largest size in `rest`. */
  readonly largestRest: number;
}

/** Loadings nearer to 1 leave no variance of their own to integrate over. */
const LARGEST_LOADING = 0.998;
const CYCLES = 500;

/**
 * Best approximation of a correlation matrix by one shared factor, by least squares outside the diagonal.
 * Comparisons with one check share that check, so one factor holds exactly in balanced trials and nearly in others.
 * @param correlation m × m
 * @throws RangeError when a correlation is missing or outside [−1, 1]
 * Source: Harman & Jones (1966), Psychometrika 31:351–368 (minimum residuals), solved one loading at a time.
 */
export function fitOneFactor(correlation: Correlation): OneFactor {
  const m = correlation.length;
  const rho = new Float64Array(m * m);
  for (let i = 0; i < m; i += 1) {
    for (let j = 0; j < m; j += 1) {
      const value = i === j ? 0 : correlation[i]?.[j];
      if (value === undefined || !(Math.abs(value) <= 1 + 1e-9)) {
        throw new RangeError(`correlation ${i}, ${j} is ${value}`);
      }
      rho[i * m + j] = value;
    }
  }
  const loadings = startLoadings(rho, m);
  for (let cycle = 0; cycle < CYCLES; cycle += 1) {
    if (improveLoadings(loadings, rho) < 1e-15) break;
  }
  const rest = rho.map((value, at) => {
    const i = Math.floor(at / m);
    const j = at % m;
    return i === j ? 0 : value - (loadings[i] ?? 0) * (loadings[j] ?? 0);
  });
  return { loadings, rest, largestRest: rest.reduce((max, value) => Math.max(max, Math.abs(value)), 0) };
}

/** A few steps of the power method, for the signs and rough sizes. */
function startLoadings(rho: Float64Array, m: number): Float64Array {
  let vector = new Float64Array(m).fill(1 / Math.sqrt(m));
  let size = 0;
  for (let step = 0; step < 10; step += 1) {
    const next = vector.map((own, i) => vector.reduce((sum, v, j) => sum + (rho[i * m + j] ?? 0) * v, own));
    size = Math.hypot(...next);
    vector = next.map((v) => v / size);
  }
  const scale = Math.sqrt(Math.max(size - 1, 0) * (m > 1 ? m / (m - 1) : 1));
  return vector.map((v) => clampLoading(v * scale));
}

function clampLoading(value: number): number {
  return Math.max(-LARGEST_LOADING, Math.min(LARGEST_LOADING, value));
}

/** One pass over the loadings, each set to its least-squares value given the others; returns the largest change. */
function improveLoadings(loadings: Float64Array, rho: Float64Array): number {
  const m = loadings.length;
  let largest = 0;
  for (let i = 0; i < m; i += 1) {
    let cross = 0;
    let square = 0;
    for (let j = 0; j < m; j += 1) {
      const other = j === i ? 0 : (loadings[j] as number);
      cross += (rho[i * m + j] as number) * other;
      square += other * other;
    }
    const value = square > 0 ? clampLoading(cross / square) : 0;
    largest = Math.max(largest, Math.abs(value - (loadings[i] as number)));
    loadings[i] = value;
  }
  return largest;
}
