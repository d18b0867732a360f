import type { Theta } from './entry-absorption.ts';
import { interactionTerms, type InteractionVariances } from './network-cell.ts';

/**
 * ν and s²: the penalty −(ν/2) Σ(ln θ_k + s_k²/θ_k), which holds each interaction variance to the crop's usual one.
 * With a spread the usual variances are taken as right up to one common factor κ, fitted along with θ:
 * −(ν/2) Σ(ln(θ_k/κ) + κ s_k²/θ_k) − (ln κ)²/(2·spread²). Regions and years in which varieties move more than is usual
 * do so in all three terms, and what the many cells tell about one of them is then told about the others. κ never
 * falls under ¼: trials that happen to agree must not make the next ones look sure.
 */
export interface VariancePenalty {
  readonly nu: number;
  readonly usual: InteractionVariances;
  /** standard deviation of ln κ; left out: κ = 1 */
  readonly spread?: number;
}

/** ln of the smallest κ. */
const LEAST = -2 * Math.LN2;

function usualOf(penalty: VariancePenalty, k: number): number {
  return penalty.usual[interactionTerms[k]!];
}

/**
 * κ at θ: the root of (ν/2)(3 − κ Σ s_k²/θ_k) = ln κ / spread², or ¼ where that is less; 1 without a spread.
 * @param theta all three above 0
 */
export function commonFactor(penalty: VariancePenalty, theta: Theta): number {
  return Math.exp(logCommonFactor(penalty, theta));
}

function logCommonFactor(penalty: VariancePenalty, theta: Theta): number {
  const { nu, spread } = penalty;
  if (spread === undefined) return 0;
  const ratio = theta.reduce((sum, value, k) => sum + usualOf(penalty, k) / value, 0);
  const precision = 1 / (spread * spread);
  const slopeAtLeast = 0.5 * nu * (3 - ratio * Math.exp(LEAST)) - precision * LEAST;
  if (slopeAtLeast <= 0) return LEAST;
  // What is to be 0 falls, ever more steeply, in ln κ: from the right of its root Newton's steps do not pass it.
  let x = Math.max(0, Math.log(3 / ratio));
  for (let step = 0; step < 100; step++) {
    const pull = 0.5 * nu * ratio * Math.exp(x);
    const next = x + (1.5 * nu - pull - precision * x) / (pull + precision);
    if (Math.abs(next - x) < 1e-14 * (1 + Math.abs(x))) return next;
    x = next;
  }
  return x;
}

/** The penalty at θ, at the κ that suits it best; 0 or less up to a constant. */
export function penaltyAt(penalty: VariancePenalty, theta: Theta): number {
  const { nu, spread } = penalty;
  const x = logCommonFactor(penalty, theta);
  const factor = Math.exp(x);
  let sum = 0;
  for (let k = 0; k < 3; k++) sum += Math.log(theta[k]!) - x + (factor * usualOf(penalty, k)) / theta[k]!;
  return -0.5 * nu * sum - (spread === undefined ? 0 : (x * x) / (2 * spread * spread));
}

/** κ ν s_k²/(2θ_k). The penalty's slope in ln θ_k is this less ν/2: at the best κ its own slope is 0 and adds nothing. */
export function holdsAt(penalty: VariancePenalty, theta: Theta): Float64Array {
  const factor = commonFactor(penalty, theta);
  return theta.map((value, k) => (0.5 * penalty.nu * factor * usualOf(penalty, k)) / value);
}

/** The penalty's curvature in ln θ is the holds h on the diagonal less this times hh': what the common factor leaves open. */
export function loosening(penalty: VariancePenalty, theta: Theta, holds: Float64Array): number {
  const { spread } = penalty;
  if (spread === undefined || logCommonFactor(penalty, theta) === LEAST) return 0;
  return 1 / (holds[0]! + holds[1]! + holds[2]! + 1 / (spread * spread));
}

/** Expected information of the penalty about ln θ, 3 × 3: its curvature with every hold at ν/2. */
export function penaltyInformation(penalty: VariancePenalty, theta: Theta): Float64Array {
  const half = penalty.nu / 2;
  const open = half * half * loosening(penalty, theta, new Float64Array(3).fill(half));
  const information = new Float64Array(9).fill(0 - open);
  for (let k = 0; k < 3; k++) information[k * 4]! += half;
  return information;
}
