import { differentiateCriterion, type CriterionDerivatives } from './criterion-derivatives.ts';
import { computeExpectedInformation } from './expected-information.ts';
import type { Theta } from './entry-absorption.ts';
import { interactionTerms, type InteractionTerm } from './network-cell.ts';
import type { NetworkFrame } from './network-frame.ts';
import { evaluateLikelihood, measureDesign, residualDf, type NetworkPoint } from './restricted-likelihood.ts';
import { solveSmall } from './small-symmetric.ts';
import { holdsAt, loosening, penaltyAt, type VariancePenalty } from './variance-penalty.ts';

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

const MAX_ITERATIONS = 200;
const GRADIENT_TOLERANCE = 1e-9;
/** In large networks rounding ends the climb before that. */
const GRADIENT_TOLERANCE_LARGE = 5e-7;
/** Above this many cells the average information stands in for the expected one. */
export const MANY_CELLS = 1000;

/** What one step works with: point, derivatives and the objective's own gradient and curvature. */
interface Ascent {
  readonly point: NetworkPoint;
  readonly derivatives: CriterionDerivatives;
  readonly objective: number;
}

interface Search {
  readonly frame: NetworkFrame;
  readonly evaluate: (theta: Theta) => Ascent | null;
  readonly penalty: VariancePenalty | null;
  /** terms that take part */
  readonly active: readonly number[];
  /** variance of a typical cell, which makes slopes in θ unitless */
  readonly scale: number;
  /** lower bounds of θ: 0, or a whisker above where some v are 0 */
  readonly floor: Float64Array;
}

/** Objective's slope in ln θ, and its size; at the best κ the slope in κ is 0 and adds nothing. */
function slopePenalised(ascent: Ascent, penalty: VariancePenalty): Float64Array {
  const { theta } = ascent.point;
  const holds = holdsAt(penalty, theta);
  return theta.map((value, k) => value * ascent.derivatives.gradient[k]! - 0.5 * penalty.nu + holds[k]!);
}

/** Newton step in ln θ: θθ' times the information, plus the penalty's own curvature. */
function stepPenalised(ascent: Ascent, penalty: VariancePenalty, information: Float64Array): Float64Array {
  const { theta } = ascent.point;
  const slope = slopePenalised(ascent, penalty);
  const holds = holdsAt(penalty, theta);
  const loosened = loosening(penalty, theta, holds);
  const curvature = new Float64Array(9);
  for (let k = 0; k < 3; k++) {
    for (let l = 0; l < 3; l++)
      curvature[k * 3 + l] =
        theta[k]! * theta[l]! * information[k * 3 + l]! - loosened * holds[k]! * holds[l]!;
    curvature[k * 4]! += holds[k]! + Math.max(0, -theta[k]! * ascent.derivatives.gradient[k]!);
  }
  return solveSmall(curvature, slope) ?? slope;
}

/** Terms free to move: those above their floor, or pushed up from it. */
function freeTerms(search: Search, ascent: Ascent): number[] {
  return search.active.filter(
    (k) => ascent.point.theta[k]! > search.floor[k]! || ascent.derivatives.gradient[k]! > 0,
  );
}

/** Newton step in θ over the free terms; a term at its floor that the step would push below it stays there. */
function stepPlain(search: Search, ascent: Ascent, information: Float64Array): Float64Array {
  const { gradient } = ascent.derivatives;
  let free = freeTerms(search, ascent);
  for (;;) {
    const m = free.length;
    const curvature = new Float64Array(m * m);
    free.forEach((k, r) => free.forEach((l, c) => (curvature[r * m + c] = information[k * 3 + l]!)));
    const slope = Float64Array.from(free, (k) => gradient[k]!);
    const solution = solveSmall(curvature, slope) ?? slope.map((g) => g * search.scale * search.scale);
    const isBlocked = (k: number, r: number): boolean =>
      ascent.point.theta[k]! <= search.floor[k]! && solution[r]! < 0;
    if (free.some(isBlocked)) {
      free = free.filter((k, r) => !isBlocked(k, r));
      continue;
    }
    const step = new Float64Array(3);
    free.forEach((k, r) => (step[k] = solution[r]!));
    return step;
  }
}

function slopeNorm(search: Search, ascent: Ascent): number {
  const slopes =
    search.penalty === null
      ? freeTerms(search, ascent).map((k) => ascent.derivatives.gradient[k]! * search.scale)
      : [...slopePenalised(ascent, search.penalty)];
  return slopes.reduce((max, slope) => Math.max(max, Math.abs(slope)), 0);
}

function moveAlong(search: Search, theta: Theta, step: Float64Array, length: number): Theta {
  if (search.penalty !== null)
    return theta.map((value, k) => value * Math.exp(Math.max(-3, Math.min(3, length * step[k]!))));
  return theta.map((value, k) => Math.max(search.floor[k]!, value + length * step[k]!));
}

/** Halves the step until the objective does not fall; null where it never stops falling. */
function searchAlong(search: Search, ascent: Ascent, step: Float64Array): Ascent | null {
  for (let length = 1; length > 1e-6; length /= 2) {
    const trial = search.evaluate(moveAlong(search, ascent.point.theta, step, length));
    // rounding of the objective must not stop the last, tiny steps
    if (trial !== null && trial.objective >= ascent.objective - 1e-12 * (1 + Math.abs(ascent.objective)))
      return trial;
  }
  return null;
}

/** One step by the average information, else by the expected one, else uphill. */
function advance(search: Search, ascent: Ascent): Ascent | null {
  const { penalty } = search;
  const stepBy = (information: Float64Array): Float64Array =>
    penalty === null ? stepPlain(search, ascent, information) : stepPenalised(ascent, penalty, information);
  return (
    searchAlong(search, ascent, stepBy(ascent.derivatives.averageInformation)) ??
    searchAlong(search, ascent, stepBy(computeExpectedInformation(search.frame, ascent.point))) ??
    searchAlong(search, ascent, stepBy(new Float64Array(9)))
  );
}

/** Climbs until the slope is gone; the objective never falls. */
function climb(
  search: Search,
  bottom: Ascent | null,
  watch: (objective: number) => void,
): { ascent: Ascent; norm: number; iterations: number } | null {
  const tolerance = search.frame.cellCount > MANY_CELLS ? GRADIENT_TOLERANCE_LARGE : GRADIENT_TOLERANCE;
  let ascent = bottom;
  for (let iterations = 0; ascent !== null; iterations++) {
    watch(ascent.objective);
    const norm = slopeNorm(search, ascent);
    if (norm < tolerance || iterations === MAX_ITERATIONS) return { ascent, norm, iterations };
    const next = advance(search, ascent);
    if (next === null) return { ascent, norm, iterations };
    ascent = next;
  }
  return null;
}

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

/**
 * Penalised or plain REML of the three interaction variances, entries and environments fixed.
 * @param penalty null for plain REML; its usual variances must be positive
 * @param watch is told the objective after each step
 */
export function fitNetwork(
  frame: NetworkFrame,
  penalty: VariancePenalty | null,
  watch: (objective: number) => void = () => undefined,
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
  const first = Math.max((residual - meanVariance) / 3, 0.05 * scale);
  const start =
    penalty === null
      ? new Float64Array(3).fill(first)
      : Float64Array.from(interactionTerms, (term) => penalty.usual[term]);
  const floor = new Float64Array(3);
  if (hasExactCells) floor[2] = 1e-12 * scale;

  const evaluate = (theta: Theta): Ascent | null => {
    const point = evaluateLikelihood(frame, theta, design.logDeterminant);
    if (point === null) return null;
    const objective = point.logLik + (penalty === null ? 0 : penaltyAt(penalty, theta));
    return { point, objective, derivatives: differentiateCriterion(frame, point) };
  };
  const bottom = evaluate(start);
  if (bottom === null) return { outcome: 'not-fitted', reason: 'not-converged' };
  const dropped = penalty === null ? findDropped(frame, bottom) : [];
  const active = [0, 1, 2].filter((k) => !dropped.includes(k));
  const search: Search = { frame, penalty, scale, floor, active, evaluate };
  const reduced = start.map((value, k) => (dropped.includes(k) ? 0 : value));
  const found = climb(search, dropped.length > 0 ? evaluate(reduced) : bottom, watch);
  if (found === null || !(found.norm < 1e-4)) return { outcome: 'not-fitted', reason: 'not-converged' };
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
