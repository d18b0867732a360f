import { climb, type Ascent, type Search, type Summit } from './climb-likelihood.ts';
import { differentiateCriterion } from './criterion-derivatives.ts';
import type { Theta } from './entry-absorption.ts';
import { computeExpectedInformation, MANY_CELLS } from './expected-information.ts';
import { interactionTerms, type InteractionTerm } from './network-cell.ts';
import type { NetworkFrame } from './network-frame.ts';
import { evaluateLikelihood, measureDesign, residualDf, type NetworkPoint } from './restricted-likelihood.ts';
import { solveSmall } from './small-symmetric.ts';
import { startVariances } from './start-variances.ts';
import { penaltyAt, type VariancePenalty } from './variance-penalty.ts';

export interface NetworkFit {
  readonly outcome: 'fitted';
  readonly frame: NetworkFrame;
  readonly point: NetworkPoint;
  /** null for plain REML */
  readonly penalty: VariancePenalty | null;
  /** terms that the layout cannot tell from others: held at 0 (plain REML only) */
  readonly dropped: readonly InteractionTerm[];
  /** largest slope left: in ln θ with the penalty, else in θ times the variance of a cell, zeros at the boundary apart */
  readonly gradientNorm: number;
  readonly iterations: number;
  /** average information at the optimum, 3 × 3 */
  readonly averageInformation: Float64Array;
}

export interface NetworkNotFitted {
  readonly outcome: 'not-fitted';
  /** no-residual: as many effects as cells; no-variation: nothing left over to estimate; not-converged */
  readonly reason: 'no-residual' | 'no-variation' | 'not-converged';
}

/** A climb that stopped short of this slope has found no top. */
const SLOPE_ACCEPTED = 1e-4;

/** Terms whose information is nothing but a repeat of another's, in the order rest, site, year. */
function findConfounded(information: Float64Array): number[] {
  const kept: number[] = [];
  const confounded: number[] = [];
  for (const k of [2, 0, 1]) {
    const m = kept.length;
    const own = information[k * 4]!;
    const block = new Float64Array(m * m);
    kept.forEach((r, a) => kept.forEach((c, b) => (block[a * m + b] = information[r * 3 + c]!)));
    const cross = Float64Array.from(kept, (r) => information[r * 3 + k]!);
    const solved = solveSmall(block, cross);
    const left = solved === null ? 0 : own - cross.reduce((sum, x, a) => sum + x * solved[a]!, 0);
    const reference = information[8]!;
    if (left > 1e-8 * Math.max(own, 1e-6 * reference)) kept.push(k);
    else confounded.push(k);
  }
  return confounded;
}

/** Terms that the layout cannot tell apart, by the expected information or, in large networks, the average one. */
function findDropped(frame: NetworkFrame, { point, derivatives }: Ascent): number[] {
  return findConfounded(
    frame.cellCount > MANY_CELLS ? derivatives.averageInformation : computeExpectedInformation(frame, point),
  );
}

const isTop = ({ norm }: Summit): boolean => norm < SLOPE_ACCEPTED;

/** Whether the second of two climbs found a top, and the first none or a lower one. */
function isHigher(second: Summit, first: Summit): boolean {
  return isTop(second) && (!isTop(first) || second.ascent.objective > first.ascent.objective);
}

/** The start that takes all three variances for equally large. */
function startEqual(scale: number, residual: number, meanVariance: number): Theta {
  return new Float64Array(3).fill(Math.max((residual - meanVariance) / 3, 0.05 * scale));
}

/**
 * Penalised or plain REML of the three interaction variances, entries and environments fixed.
 * @param penalty null for plain REML; its usual variances must be positive
 * @param watch is told the objective after each step
 * @param near variances to start from, where a fit of the same cells is at hand; all of them positive
 */
export function fitNetwork(
  frame: NetworkFrame,
  penalty: VariancePenalty | null,
  watch?: (objective: number) => void,
  near?: Theta,
): NetworkFit | NetworkNotFitted {
  const design = measureDesign(frame);
  const df = residualDf(frame);
  if (penalty === null && df === 0) return { outcome: 'not-fitted', reason: 'no-residual' };
  const meanVariance = frame.v.reduce((sum, v) => sum + v, 0) / frame.cellCount;
  const residual = df > 0 ? design.residualSumOfSquares / df : 0;
  const hasExactCells = frame.v.some((v) => v === 0);
  if (penalty === null && hasExactCells && !(residual > 1e-24 * design.largestSquare))
    return { outcome: 'not-fitted', reason: 'no-variation' };

  const scale = Math.max(meanVariance, residual, Number.MIN_VALUE);
  const floor = new Float64Array(3);
  if (hasExactCells) floor[2] = 1e-12 * scale;

  const evaluate = (theta: Theta): Ascent | null => {
    const point = evaluateLikelihood(frame, theta, design.logDeterminant);
    if (point === null) return null;
    const objective = point.logLik + (penalty === null ? 0 : penaltyAt(penalty, theta));
    return { point, objective, derivatives: differentiateCriterion(frame, point) };
  };
  const bottom = evaluate(near ?? startVariances(frame, design.residuals, penalty, scale));
  if (bottom === null) return { outcome: 'not-fitted', reason: 'not-converged' };
  const dropped = penalty === null ? findDropped(frame, bottom) : [];
  const active = [0, 1, 2].filter((k) => !dropped.includes(k));
  const search: Search = { frame, penalty, scale, floor, active, evaluate };
  const without = (theta: Theta): Theta => theta.map((value, k) => (dropped.includes(k) ? 0 : value));
  const first = climb(search, dropped.length > 0 ? evaluate(without(bottom.point.theta)) : bottom, watch);
  // Plain likelihoods of small networks may have two tops, one of them with a variance of 0.
  const mayHaveTwo =
    penalty === null &&
    frame.cellCount <= MANY_CELLS &&
    (first === null || active.some((k) => first.ascent.point.theta[k]! <= floor[k]!));
  const second = mayHaveTwo
    ? climb(search, evaluate(without(startEqual(scale, residual, meanVariance))))
    : null;
  const found = first === null || (second !== null && isHigher(second, first)) ? second : first;
  if (found === null || !isTop(found)) return { outcome: 'not-fitted', reason: 'not-converged' };
  return {
    outcome: 'fitted',
    frame,
    point: found.ascent.point,
    penalty,
    dropped: dropped.map((k) => interactionTerms[k]!),
    gradientNorm: found.norm,
    iterations: found.iterations,
    averageInformation: found.ascent.derivatives.averageInformation,
  };
}
