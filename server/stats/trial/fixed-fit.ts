import {
  factorSkipping,
  keptTriangle,
  nullVectors,
  solveTransposed,
  solveUpper,
  type SkippingFactor,
} from '#server/stats/linear/skipping-factor.ts';
import { invertFromTriangle } from '#server/stats/linear/triangle-inverse.ts';
import { crossFixed, predictFixed, projectFixed } from './cross-products.ts';
import type { TrialModel } from './trial-model.ts';

/** The least-squares fit of the fixed part, and what every later stage needs of it. */
export interface FixedFit {
  readonly model: TrialModel;
  readonly xtx: Float64Array;
  readonly factor: SkippingFactor;
  /** upper triangle of the kept columns, rank × rank */
  readonly triangle: Float64Array;
  /** (X'X)⁻¹ of the kept columns, rank × rank */
  readonly inverse: Float64Array;
  /** vectors v with Xv = 0; a linear function l of the coefficients is estimable when l'v = 0 for all */
  readonly nullSpace: readonly Float64Array[];
  /** subtracted from every value before computing: one of the values, so that the differences are exact */
  readonly center: number;
  /** y − center */
  readonly y: Float64Array;
  /** coefficients for y − center, width long, 0 where skipped */
  readonly beta: Float64Array;
  readonly residuals: Float64Array;
  readonly residualSs: number;
  readonly residualDf: number;
  /** whether all residuals are within rounding of 0 although there are residual df */
  readonly isExact: boolean;
  /** sequential sums of squares and df, one for each fixed term, the intercept included */
  readonly sequential: readonly { readonly df: number; readonly ss: number }[];
}

/** Residuals below this many units of rounding of the largest value are rounding. */
const roundingUnits = 16;

/**
 * Ordinary least squares on the normal equations, whose matrix is exact, with one step of iterative refinement.
 * @param values in the order of the model's plots
 */
export function fitFixed(model: TrialModel, values: Float64Array): FixedFit {
  const xtx = crossFixed(model);
  const factor = factorSkipping(xtx, model.width);
  const triangle = keptTriangle(factor);
  const center = centralValue(values);
  const y = values.map((value) => value - center);
  const whole = new Float64Array(model.width);
  let residuals = y;
  let sequential: FixedFit['sequential'] = [];
  for (let step = 0; step < 3; step++) {
    const rhs = gather(projectFixed(model, residuals), factor);
    solveTransposed(triangle, factor.rank, rhs);
    if (step === 0) sequential = sumSequential(model, factor, rhs);
    solveUpper(triangle, factor.rank, rhs);
    for (let i = 0; i < factor.rank; i++) whole[factor.kept[i]!]! += rhs[i]!;
    const fitted = predictFixed(model, whole);
    residuals = y.map((value, i) => value - fitted[i]!);
  }
  const largest = values.reduce((max, value) => Math.max(max, Math.abs(value)), 0);
  const residualDf = model.count - factor.rank;
  const noise = roundingUnits * Number.EPSILON * largest;
  const isExact = residuals.every((r) => Math.abs(r) <= noise);
  if (isExact || residualDf === 0) residuals = new Float64Array(model.count);
  return {
    model,
    xtx,
    factor,
    triangle,
    inverse: invertFromTriangle(triangle, factor.rank),
    nullSpace: nullVectors(factor),
    center,
    y,
    beta: whole,
    residuals,
    residualSs: sumOfSquares(residuals),
    residualDf,
    isExact: isExact && residualDf > 0,
    sequential,
  };
}

/** (I − H) v: what least squares on the fixed part leaves of a vector. */
export function residualise({ model, factor, triangle }: FixedFit, v: Float64Array): Float64Array {
  const rhs = gather(projectFixed(model, v), factor);
  solveTransposed(triangle, factor.rank, rhs);
  solveUpper(triangle, factor.rank, rhs);
  const beta = new Float64Array(model.width);
  for (let i = 0; i < factor.rank; i++) beta[factor.kept[i]!] = rhs[i]!;
  const fitted = predictFixed(model, beta);
  return v.map((value, i) => value - fitted[i]!);
}

export function sumOfSquares(values: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]! * values[i]!;
  return sum;
}

/** The kept elements of a vector of model width. */
export function gather(vector: Float64Array, factor: SkippingFactor): Float64Array {
  return Float64Array.from(factor.kept, (column) => vector[column]!);
}

/** Sum of squares (and df) of each term after the ones before it, from R⁻ᵀX'y. */
function sumSequential(
  model: TrialModel,
  factor: SkippingFactor,
  rotated: Float64Array,
): FixedFit['sequential'] {
  return model.fixed.map((term) => {
    let df = 0;
    let ss = 0;
    for (let i = 0; i < factor.rank; i++) {
      const column = factor.kept[i]!;
      if (column < term.offset || column >= term.offset + term.width) continue;
      df++;
      ss += rotated[i]! * rotated[i]!;
    }
    return { df, ss };
  });
}

/** The value closest to the mean: subtracting it leaves no rounding where all values are of a size. */
function centralValue(values: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < values.length; i++) sum += values[i]! / values.length;
  let best = values[0]!;
  for (let i = 1; i < values.length; i++)
    if (Math.abs(values[i]! - sum) < Math.abs(best - sum)) best = values[i]!;
  return best;
}
