import { findRoot } from '#server/stats/distributions/find-root.ts';

/** Residual mean square of one trial and its df. */
export interface TrialError {
  readonly ms: number;
  readonly df: number;
}

/** Error variances of trials, each pulled towards what they have in common. */
export interface PooledErrors {
  /** d₀: how many df the common value is worth; Infinity where the trials differ no more than chance has it */
  readonly priorDf: number;
  /** s₀², the common value */
  readonly priorMs: number;
  /** (d₀ s₀² + d_j s_j²)/(d₀ + d_j) and its df, in the order of the trials */
  readonly trials: readonly TrialError[];
}

/** Below this many trials there is nothing to learn a common value from. */
const FEWEST_TRIALS = 3;
/** Argument from which the asymptotic series hold to double precision. */
const SERIES_FROM = 12;

/** ψ(x), x > 0. Source: Abramowitz & Stegun (1964) 6.3.5, 6.3.18. */
export function digamma(x: number): number {
  let shift = 0;
  let z = x;
  for (; z < SERIES_FROM; z++) shift -= 1 / z;
  const w = 1 / (z * z);
  return (
    shift +
    Math.log(z) -
    0.5 / z -
    w * (1 / 12 - w * (1 / 120 - w * (1 / 252 - w * (1 / 240 - w * (1 / 132 - (w * 691) / 32760)))))
  );
}

/** ψ′(x), x > 0. Source: Abramowitz & Stegun (1964) 6.4.6, 6.4.12. */
export function trigamma(x: number): number {
  let shift = 0;
  let z = x;
  for (; z < SERIES_FROM; z++) shift += 1 / (z * z);
  const w = 1 / (z * z);
  return (
    shift +
    1 / z +
    0.5 * w +
    (w / z) * (1 / 6 - w * (1 / 30 - w * (1 / 42 - w * (1 / 30 - w * (5 / 66 - (w * 691) / 2730)))))
  );
}

function invertTrigamma(value: number): number {
  const logRoot = findRoot((u) => Math.log(trigamma(Math.exp(u))) - Math.log(value), -40, 40, 1e-13);
  return Math.exp(logRoot);
}

/**
 * Shrinks the residual mean squares of trials towards a common value, the more the fewer df a trial has and the less the
 * trials differ beyond chance. With fewer than three trials each keeps its own.
 * @param errors ms > 0 in the unit of the trait squared, df > 0
 * Source: Smyth (2004), Stat. Appl. Genet. Mol. Biol. 3(1):3, section 6.2; where the trials do not differ beyond chance,
 * the common value is Σ d_j s_j² / Σ d_j, its maximum likelihood estimate.
 */
export function poolErrorVariances(errors: readonly TrialError[]): PooledErrors {
  const sumDf = errors.reduce((sum, { df }) => sum + df, 0);
  const pooledMs = errors.reduce((sum, { ms, df }) => sum + df * ms, 0) / sumDf;
  if (errors.length < FEWEST_TRIALS) return { priorDf: 0, priorMs: pooledMs, trials: errors };
  const e = errors.map(({ ms, df }) => Math.log(ms) - digamma(df / 2) + Math.log(df / 2));
  const mean = e.reduce((sum, value) => sum + value, 0) / e.length;
  const spread = e.reduce((sum, value) => sum + (value - mean) ** 2, 0) / (e.length - 1);
  const excess = spread - errors.reduce((sum, { df }) => sum + trigamma(df / 2), 0) / errors.length;
  if (!(excess > 0)) {
    return {
      priorDf: Infinity,
      priorMs: pooledMs,
      trials: errors.map(() => ({ ms: pooledMs, df: sumDf })),
    };
  }
  const half = invertTrigamma(excess);
  const priorDf = 2 * half;
  const priorMs = Math.exp(mean + digamma(half) - Math.log(half));
  return {
    priorDf,
    priorMs,
    trials: errors.map(({ ms, df }) => ({
      ms: (priorDf * priorMs + df * ms) / (priorDf + df),
      // Borrowed df are never more than all trials have together.
      df: Math.min(priorDf + df, sumDf),
    })),
  };
}
