import type { CriterionDerivatives } from './criterion-derivatives.ts';
import type { Theta } from './entry-absorption.ts';
import { computeExpectedInformation, MANY_CELLS } from './expected-information.ts';
import type { NetworkFrame } from './network-frame.ts';
import type { NetworkPoint } from './restricted-likelihood.ts';
import { solveSmall } from './small-symmetric.ts';
import { holdsAt, loosening, type VariancePenalty } from './variance-penalty.ts';

const MAX_ITERATIONS = 200;
const GRADIENT_TOLERANCE = 1e-9;
/** In large networks rounding ends the climb before that. */
const GRADIENT_TOLERANCE_LARGE = 5e-7;
/** Slopes below this are near enough to the top for the objective to bend as it does there. */
const PARABOLIC = 1;
/** What one step works with: point, derivatives and the objective's own gradient and curvature. */
export interface Ascent {
  readonly point: NetworkPoint;
  readonly derivatives: CriterionDerivatives;
  readonly objective: number;
}

export interface Search {
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

/** Where θ stands on the axes that the search moves along: ln θ with the penalty, else θ. */
function positionOf(search: Search, { point }: Ascent): Float64Array {
  return search.penalty === null ? point.theta : point.theta.map((value) => Math.log(value));
}

/** Slope of the objective along those axes; at the best κ the slope in κ is 0 and adds nothing. */
function slopeOf({ penalty }: Search, { point, derivatives }: Ascent): Float64Array {
  if (penalty === null) return derivatives.gradient;
  const { theta } = point;
  const holds = holdsAt(penalty, theta);
  return theta.map((value, k) => value * derivatives.gradient[k]! - 0.5 * penalty.nu + holds[k]!);
}

/** Curvature along those axes from an information on θ, 3 × 3: with the penalty θθ' times it, plus the penalty's own. */
function curvatureOf(
  { penalty }: Search,
  { point, derivatives }: Ascent,
  information: Float64Array,
): Float64Array {
  if (penalty === null) return information.slice();
  const { theta } = point;
  const holds = holdsAt(penalty, theta);
  const loosened = loosening(penalty, theta, holds);
  const curvature = new Float64Array(9);
  for (let k = 0; k < 3; k++) {
    for (let l = 0; l < 3; l++)
      curvature[k * 3 + l] =
        theta[k]! * theta[l]! * information[k * 3 + l]! - loosened * holds[k]! * holds[l]!;
    curvature[k * 4]! += holds[k]! + Math.max(0, -theta[k]! * derivatives.gradient[k]!);
  }
  return curvature;
}

/** Terms free to move: all with the penalty, else those above their floor, or pushed up from it. */
function freeTerms(search: Search, ascent: Ascent): number[] {
  if (search.penalty !== null) return [...search.active];
  return search.active.filter(
    (k) => ascent.point.theta[k]! > search.floor[k]! || ascent.derivatives.gradient[k]! > 0,
  );
}

/** Newton step over the free terms; a term at its floor that the step would push below it stays there. */
function stepBy(search: Search, ascent: Ascent, curvature: Float64Array): Float64Array | null {
  const slope = slopeOf(search, ascent);
  let free = freeTerms(search, ascent);
  for (;;) {
    const m = free.length;
    const block = new Float64Array(m * m);
    free.forEach((k, r) => free.forEach((l, c) => (block[r * m + c] = curvature[k * 3 + l]!)));
    const solution = solveSmall(
      block,
      Float64Array.from(free, (k) => slope[k]!),
    );
    if (solution === null) return null;
    const isBlocked = (k: number, r: number): boolean =>
      search.penalty === null && ascent.point.theta[k]! <= search.floor[k]! && solution[r]! < 0;
    if (free.some(isBlocked)) {
      free = free.filter((k, r) => !isBlocked(k, r));
      continue;
    }
    const step = new Float64Array(3);
    free.forEach((k, r) => (step[k] = solution[r]!));
    return step;
  }
}

/** The way uphill where no curvature is to be had. */
function climbStraight(search: Search, ascent: Ascent): Float64Array {
  const length = search.penalty === null ? search.scale * search.scale : 1;
  const slope = slopeOf(search, ascent);
  const free = freeTerms(search, ascent);
  return slope.map((value, k) => (free.includes(k) ? length * value : 0));
}

function slopeNorm(search: Search, ascent: Ascent): number {
  const unit = search.penalty === null ? search.scale : 1;
  const slope = slopeOf(search, ascent);
  return freeTerms(search, ascent).reduce((max, k) => Math.max(max, Math.abs(slope[k]!) * unit), 0);
}

function moveAlong(search: Search, theta: Theta, step: Float64Array, length: number): Theta {
  if (search.penalty !== null)
    return theta.map((value, k) => value * Math.exp(Math.max(-3, Math.min(3, length * step[k]!))));
  return theta.map((value, k) => Math.max(search.floor[k]!, value + length * step[k]!));
}

/** Halves the step until the objective does not fall; null where it never stops falling within so many halvings. */
function searchAlong(
  search: Search,
  ascent: Ascent,
  step: Float64Array | null,
  halvings = 20,
): Ascent | null {
  for (let n = 0, length = 1; step !== null && n < halvings; n++, length /= 2) {
    const trial = search.evaluate(moveAlong(search, ascent.point.theta, step, length));
    // rounding of the objective must not stop the last, tiny steps
    if (trial !== null && trial.objective >= ascent.objective - 1e-12 * (1 + Math.abs(ascent.objective)))
      return trial;
  }
  return null;
}

/**
 * What the slopes at both ends of the last step say of the curvature that the average information leaves out: the
 * symmetric correction of rank one that makes up for it, 3 × 3, on top of what is known from the steps before.
 * Source: Dennis, Gay & Welsch (1981), ACM TOMS 7:348–368, with SR1 (Conn, Gould & Toint 1991) in the place of DFP.
 */
function correctCurvature(search: Search, from: Ascent, to: Ascent, known: Float64Array): Float64Array {
  const [start, end] = [positionOf(search, from), positionOf(search, to)];
  const move = end.map((value, k) => value - start[k]!);
  const [before, after] = [slopeOf(search, from), slopeOf(search, to)];
  const curvature = curvatureOf(search, to, to.derivatives.averageInformation);
  const missing = move.map((_, k) => {
    let sum = before[k]! - after[k]!;
    for (let l = 0; l < 3; l++) sum -= (curvature[k * 3 + l]! + known[k * 3 + l]!) * move[l]!;
    return sum;
  });
  const along = missing.reduce((sum, value, k) => sum + value * move[k]!, 0);
  if (!(Math.abs(along) > 1e-8 * Math.hypot(...missing) * Math.hypot(...move))) return known;
  return known.map((value, at) => value + (missing[Math.floor(at / 3)]! * missing[at % 3]!) / along);
}

/** One step by the average information with what the last steps taught, else without, else by the expected one, else uphill. */
function advance(search: Search, ascent: Ascent, taught: Float64Array): Ascent | null {
  const curvature = curvatureOf(search, ascent, ascent.derivatives.averageInformation);
  const corrected = curvature.map((value, at) => value + taught[at]!);
  return (
    searchAlong(search, ascent, stepBy(search, ascent, corrected), 1) ??
    searchAlong(search, ascent, stepBy(search, ascent, curvature)) ??
    searchAlong(
      search,
      ascent,
      stepBy(
        search,
        ascent,
        curvatureOf(search, ascent, computeExpectedInformation(search.frame, ascent.point)),
      ),
    ) ??
    searchAlong(search, ascent, climbStraight(search, ascent))
  );
}

/** Where a climb ended: the slope left, in ln θ or in θ times the scale, and how many steps it took. */
export interface Summit {
  readonly ascent: Ascent;
  readonly norm: number;
  readonly iterations: number;
}

/**
 * Climbs until the slope is gone; the objective never falls.
 * @param watch is told the objective after each step
 */
export function climb(
  search: Search,
  bottom: Ascent | null,
  watch: (objective: number) => void = () => undefined,
): Summit | null {
  const tolerance = search.frame.cellCount > MANY_CELLS ? GRADIENT_TOLERANCE_LARGE : GRADIENT_TOLERANCE;
  let ascent = bottom;
  let taught: Float64Array = new Float64Array(9);
  for (let iterations = 0; ascent !== null; iterations++) {
    watch(ascent.objective);
    const norm = slopeNorm(search, ascent);
    if (norm < tolerance || iterations === MAX_ITERATIONS) return { ascent, norm, iterations };
    const next = advance(search, ascent, taught);
    if (next === null) return { ascent, norm, iterations };
    if (norm < PARABOLIC) taught = correctCurvature(search, ascent, next, taught);
    ascent = next;
  }
  return null;
}
