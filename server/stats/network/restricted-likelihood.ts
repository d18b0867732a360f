import { absorbEntries, prepareAbsorption, type EntryAbsorption, type Theta } from './entry-absorption.ts';
import { invertEnvironments, solveEnvironments, type EnvironmentSystem } from './environment-system.ts';
import type { NetworkFrame } from './network-frame.ts';

/** Everything about the fit that depends on θ. */
export interface NetworkPoint {
  readonly theta: Theta;
  readonly absorption: EntryAbsorption;
  readonly system: EnvironmentSystem;
  /** restricted log-likelihood with its constant and ½ log|X'X|, as metafor prints it */
  readonly logLik: number;
}

/** n − rank(X): cells less entries less kept environments. */
export function residualDf(frame: NetworkFrame): number {
  return frame.cellCount - frame.entries.length - frame.columnCount;
}

/** The same equations with unit variances and no interactions: least squares on entries and environments. */
export interface DesignMeasure {
  /** log|X'X| for X = [entries | kept environments] */
  readonly logDeterminant: number;
  readonly residualSumOfSquares: number;
  /** of each cell */
  readonly residuals: Float64Array;
  readonly largestSquare: number;
}

export function measureDesign(frame: NetworkFrame): DesignMeasure {
  const absorption = prepareAbsorption(frame);
  const unit: NetworkFrame = { ...frame, v: new Float64Array(frame.cellCount).fill(1) };
  absorbEntries(unit, new Float64Array(3), absorption);
  const system = solveEnvironments(unit, absorption);
  return {
    logDeterminant: absorption.logDeterminant + (system?.logDeterminant ?? 0),
    residualSumOfSquares: system?.quadratic ?? 0,
    residuals: system?.py ?? new Float64Array(frame.cellCount),
    largestSquare: frame.y.reduce((max, y) => Math.max(max, y * y), 0),
  };
}

/**
 * ll = −½[(n − p) log 2π + Σ log|V| + Σ log c + log|C| + y'Py] + ½ log|X'X|
 * @returns null where the equations have lost their rank
 */
export function evaluateLikelihood(
  frame: NetworkFrame,
  theta: Theta,
  designLogDeterminant: number,
): NetworkPoint | null {
  const absorption = prepareAbsorption(frame);
  absorbEntries(frame, theta, absorption);
  const solution = solveEnvironments(frame, absorption);
  if (solution === null) return null;
  const logLik =
    -0.5 *
    (residualDf(frame) * Math.log(2 * Math.PI) +
      absorption.logDeterminant +
      solution.logDeterminant +
      solution.quadratic -
      designLogDeterminant);
  if (!Number.isFinite(logLik)) return null;
  return { theta, absorption, system: invertEnvironments(frame, solution), logLik };
}
