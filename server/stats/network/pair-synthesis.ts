import { AnalysisError } from '#server/stats/analysis-error.ts';
import { chiSquareUpper } from '#server/stats/distributions/chi-square.ts';
import { tQuantileUpper } from '#server/stats/distributions/student-t.ts';
import { intervalAround } from './network-gap.ts';

/** Gap of one pair in one trial; variance of the gap, unit squared. */
export interface PairEffect {
  readonly estimate: number;
  readonly variance: number;
}

export interface PairFit {
  readonly estimate: number;
  /** √(1/Σw), τ² taken as known */
  readonly se: number;
  /** variance of the true gap between trials */
  readonly tau2: number;
  /** 95 %, normal */
  readonly ci: readonly [number, number];
  /** 95 %, Hartung and Knapp with a factor of at least 1; null for one trial */
  readonly ciHk: readonly [number, number] | null;
  /** 95 % for the gap of a further trial: t(k − 2)·√(τ² + se²); null below three trials */
  readonly prediction: readonly [number, number] | null;
  /** Cochran's Q, its df and p */
  readonly q: number;
  readonly qDf: number;
  readonly qP: number;
  /** share of variation between trials, % */
  readonly i2: number;
}

export interface PairSynthesis {
  readonly k: number;
  readonly reml: PairFit;
  readonly dl: PairFit;
}

interface WeightedMean {
  readonly estimate: number;
  readonly total: number;
  /** Σ w (y − estimate)² */
  readonly quadratic: number;
}

function average(effects: readonly PairEffect[], tau2: number): WeightedMean {
  const level = effects[0]!.estimate;
  let total = 0;
  let sum = 0;
  for (const { estimate, variance } of effects) {
    const w = 1 / (variance + tau2);
    total += w;
    sum += w * (estimate - level);
  }
  const mean = level + sum / total;
  let quadratic = 0;
  for (const { estimate, variance } of effects) quadratic += (estimate - mean) ** 2 / (variance + tau2);
  return { estimate: mean, total, quadratic };
}

/** DerSimonian & Laird (1986), Control. Clin. Trials 7:177–188. */
function findDerSimonianLaird(effects: readonly PairEffect[]): number {
  const { total, quadratic } = average(effects, 0);
  const squares = effects.reduce((sum, { variance }) => sum + 1 / (variance * variance), 0);
  const scale = total - squares / total;
  return scale > 0 ? Math.max(0, (quadratic - (effects.length - 1)) / scale) : 0;
}

/** Slope and average information of the restricted log-likelihood in τ². */
function slopeAt(
  effects: readonly PairEffect[],
  tau2: number,
): { slope: number; information: number; logLik: number } {
  const { estimate, total, quadratic } = average(effects, tau2);
  let squares = 0;
  let residual = 0;
  let logVariances = 0;
  for (const effect of effects) {
    const w = 1 / (effect.variance + tau2);
    squares += w * w;
    residual += (w * (effect.estimate - estimate)) ** 2;
    logVariances -= Math.log(w);
  }
  let cubes = 0;
  for (const { variance } of effects) cubes += 1 / (variance + tau2) ** 3;
  const trace = total - squares / total;
  const traceSquared = squares - (2 * cubes) / total + (squares / total) ** 2;
  return {
    slope: 0.5 * (residual - trace),
    information: 0.5 * traceSquared,
    logLik: -0.5 * (logVariances + Math.log(total) + quadratic),
  };
}

/** REML by Fisher scoring with step halving, held at 0 while the slope there is negative. */
function findReml(effects: readonly PairEffect[]): number {
  let tau2 = findDerSimonianLaird(effects);
  let here = slopeAt(effects, tau2);
  for (let iteration = 0; iteration < 200; iteration++) {
    if (tau2 === 0 && here.slope <= 0) return 0;
    let step = here.slope / here.information;
    let next = Math.max(0, tau2 + step);
    let there = slopeAt(effects, next);
    while (there.logLik < here.logLik - 1e-13 * (1 + Math.abs(here.logLik)) && Math.abs(step) > 1e-300) {
      step /= 2;
      next = Math.max(0, tau2 + step);
      there = slopeAt(effects, next);
    }
    const change = Math.abs(next - tau2);
    tau2 = next;
    here = there;
    if (change <= 1e-13 * tau2) break;
  }
  return tau2;
}

function describe(effects: readonly PairEffect[], tau2: number): PairFit {
  const k = effects.length;
  const { estimate, total, quadratic } = average(effects, tau2);
  const se = 1 / Math.sqrt(total);
  const q = average(effects, 0).quadratic;
  const inflation = k > 1 ? Math.sqrt(Math.max(1, quadratic / (k - 1))) : 1;
  const half = k > 2 ? tQuantileUpper(0.025, k - 2) * Math.sqrt(tau2 + se * se) : 0;
  const squares = effects.reduce((sum, { variance }) => sum + 1 / (variance * variance), 0);
  const fixedTotal = effects.reduce((sum, { variance }) => sum + 1 / variance, 0);
  // Higgins & Thompson (2002), Stat. Med. 21:1539–1558, eq. 9: the typical variance of a trial
  const typical = k > 1 ? ((k - 1) * fixedTotal) / (fixedTotal * fixedTotal - squares) : 0;
  return {
    estimate,
    se,
    tau2,
    ci: intervalAround(estimate, se, Infinity),
    ciHk: k > 1 ? intervalAround(estimate, se * inflation, k - 1) : null,
    prediction: k > 2 ? [estimate - half, estimate + half] : null,
    q,
    qDf: k - 1,
    qP: k > 1 ? chiSquareUpper(q, k - 1) : 1,
    i2: tau2 > 0 ? (100 * tau2) / (tau2 + typical) : 0,
  };
}

/**
 * Random-effects synthesis of one pair's gaps over trials: a cross-check of the network, which borrows from no other entry.
 * @throws AnalysisError no-values, not-finite, bad-variance
 * Sources: Viechtbauer (2005), J. Educ. Behav. Stat. 30:261–293; Hartung & Knapp (2001), Stat. Med. 20:3875–3889, with
 * the factor kept at 1 or above (Röver, Knapp & Friede 2015, BMC Med. Res. Methodol. 15:99); prediction Higgins,
 * Thompson & Spiegelhalter (2009), J. R. Stat. Soc. A 172:137–159.
 */
export function synthesisePair(effects: readonly PairEffect[]): PairSynthesis {
  if (effects.length === 0) throw new AnalysisError('no-values', 'there are no gaps');
  const rowsWhere = (isWrong: (effect: PairEffect) => boolean): number[] =>
    effects.flatMap((effect, row) => (isWrong(effect) ? [row + 1] : []));
  const endless = rowsWhere(({ estimate }) => !Number.isFinite(estimate));
  if (endless.length > 0)
    throw new AnalysisError('not-finite', 'an estimate is not a finite number', endless);
  const bad = rowsWhere(({ variance }) => !(variance > 0 && Number.isFinite(variance)));
  if (bad.length > 0) throw new AnalysisError('bad-variance', 'a variance is not a positive number', bad);
  return {
    k: effects.length,
    reml: describe(effects, findReml(effects)),
    dl: describe(effects, findDerSimonianLaird(effects)),
  };
}
