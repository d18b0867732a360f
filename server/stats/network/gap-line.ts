import { tTwoSided } from '#server/stats/distributions/student-t.ts';
import { intervalAround } from './network-gap.ts';

/** A gap in one trial, where the trial stood in yield. */
export interface GapPoint {
  readonly trialMean: number;
  readonly estimate: number;
  readonly se: number;
}

/** The gap as a line over the trials' mean yield: gap = at the centre + slope · (mean yield − centre). */
export interface GapLine {
  readonly outcome: 'fitted';
  readonly trials: number;
  /** weighted mean of the trials' yields: gap there and slope are uncorrelated */
  readonly centre: number;
  readonly gapAtCentre: number;
  readonly gapSe: number;
  readonly slope: number;
  readonly slopeSe: number;
  readonly df: number;
  /** of "the gap is the same on low- and high-yielding fields" */
  readonly slopeP: number;
  /** variance of the true gaps about the line */
  readonly tau2: number;
  /** yields that the trials cover */
  readonly from: number;
  readonly to: number;
}

export interface NoGapLine {
  readonly outcome: 'not-fitted';
  readonly reason: 'too-few-trials' | 'no-spread';
}

const FEWEST_TRIALS = 4;

interface LineFit {
  readonly centre: number;
  readonly level: number;
  readonly slope: number;
  readonly total: number;
  readonly sxx: number;
  readonly quadratic: number;
}

function weighLine(points: readonly GapPoint[], tau2: number): LineFit {
  let total = 0;
  let sumX = 0;
  let sumY = 0;
  for (const { trialMean, estimate, se } of points) {
    const w = 1 / (se * se + tau2);
    total += w;
    sumX += w * trialMean;
    sumY += w * estimate;
  }
  const centre = sumX / total;
  const level = sumY / total;
  let sxx = 0;
  let sxy = 0;
  for (const { trialMean, estimate, se } of points) {
    const w = 1 / (se * se + tau2);
    sxx += w * (trialMean - centre) ** 2;
    sxy += w * (trialMean - centre) * (estimate - level);
  }
  const slope = sxy / sxx;
  let quadratic = 0;
  for (const { trialMean, estimate, se } of points)
    quadratic += (estimate - level - slope * (trialMean - centre)) ** 2 / (se * se + tau2);
  return { centre, level, slope, total, sxx, quadratic };
}

/** −2 × restricted log-likelihood in τ², slope and expected information, for two fixed effects. */
function measureRestricted(
  points: readonly GapPoint[],
  tau2: number,
): { deviance: number; slope: number; information: number } {
  const line = weighLine(points, tau2);
  let logVariances = 0;
  let residual = 0;
  let trace = 0;
  const leverage: number[] = [];
  const weights: number[] = [];
  for (const { trialMean, estimate, se } of points) {
    const w = 1 / (se * se + tau2);
    const x = trialMean - line.centre;
    const h = w * (1 / line.total + (x * x) / line.sxx);
    logVariances -= Math.log(w);
    residual += (w * (estimate - line.level - line.slope * x)) ** 2;
    trace += w * (1 - h);
    weights.push(w);
    leverage.push(h);
  }
  let squared = 0;
  points.forEach((a, i) =>
    points.forEach((b, j) => {
      const hat =
        weights[i]! *
        weights[j]! *
        (1 / line.total + ((a.trialMean - line.centre) * (b.trialMean - line.centre)) / line.sxx);
      squared += ((i === j ? weights[i]! : 0) - hat) ** 2;
    }),
  );
  return {
    deviance: logVariances + Math.log(line.total * line.sxx) + line.quadratic,
    slope: 0.5 * (residual - trace),
    information: 0.5 * squared,
  };
}

/** REML by Fisher scoring with step halving, held at 0 while the slope there is negative. */
function findTau2(points: readonly GapPoint[]): number {
  let tau2 = 0;
  let here = measureRestricted(points, tau2);
  for (let iteration = 0; iteration < 200; iteration++) {
    if (tau2 === 0 && here.slope <= 0) return 0;
    let step = here.slope / here.information;
    let next = Math.max(0, tau2 + step);
    let there = measureRestricted(points, next);
    while (
      there.deviance > here.deviance + 1e-13 * (1 + Math.abs(here.deviance)) &&
      Math.abs(step) > 1e-300
    ) {
      step /= 2;
      next = Math.max(0, tau2 + step);
      there = measureRestricted(points, next);
    }
    const change = Math.abs(next - tau2);
    tau2 = next;
    here = there;
    if (change <= 1e-13 * tau2) break;
  }
  return tau2;
}

/**
 * Mixed-effects regression of a pair's gaps on the trials' mean yields, REML, Knapp–Hartung factor of at least 1.
 * Trials need an error of their own (se > 0).
 * Source: Thompson & Higgins (2002), Stat. Med. 21:1559–1573; Knapp & Hartung (2003), Stat. Med. 22:2693–2710.
 */
export function fitGapLine(points: readonly GapPoint[]): GapLine | NoGapLine {
  const usable = points.filter(({ se }) => se > 0);
  if (usable.length < FEWEST_TRIALS) return { outcome: 'not-fitted', reason: 'too-few-trials' };
  const yields = usable.map(({ trialMean }) => trialMean);
  const from = Math.min(...yields);
  const to = Math.max(...yields);
  if (!(to - from > 1e-9 * Math.max(Math.abs(from), Math.abs(to))))
    return { outcome: 'not-fitted', reason: 'no-spread' };
  const tau2 = findTau2(usable);
  const line = weighLine(usable, tau2);
  const df = usable.length - 2;
  const inflation = Math.sqrt(Math.max(1, line.quadratic / df));
  const slopeSe = inflation / Math.sqrt(line.sxx);
  return {
    outcome: 'fitted',
    trials: usable.length,
    centre: line.centre,
    gapAtCentre: line.level,
    gapSe: inflation / Math.sqrt(line.total),
    slope: line.slope,
    slopeSe,
    df,
    slopeP: tTwoSided(line.slope / slopeSe, df),
    tau2,
    from,
    to,
  };
}

/** The gap that the line gives at a yield, and whether the trials reach that far. */
export interface GapAtYield {
  readonly estimate: number;
  readonly se: number;
  readonly df: number;
  readonly interval95: readonly [number, number];
  readonly isCovered: boolean;
}

export function readGapAt(line: GapLine, fieldYield: number): GapAtYield {
  const distance = fieldYield - line.centre;
  const estimate = line.gapAtCentre + line.slope * distance;
  const se = Math.hypot(line.gapSe, line.slopeSe * distance);
  return {
    estimate,
    se,
    df: line.df,
    interval95: intervalAround(estimate, se, line.df),
    isCovered: fieldYield >= line.from && fieldYield <= line.to,
  };
}
