import { choleskyUpper, crossProduct, solveTransposedRows } from '#server/stats/linear/dense.ts';
import {
  factorSkipping,
  keptTriangle,
  solveTransposed,
  solveUpper,
} from '#server/stats/linear/skipping-factor.ts';
import { invertFromTriangle } from '#server/stats/linear/triangle-inverse.ts';
import { logDetCorrelation, whiten, type FieldGrid } from './field-grid.ts';
import type { FixedFit } from './fixed-fit.ts';
import { writeModelMatrix } from './model-matrix.ts';

/** The design's fixed model with errors autoregressive along rows and columns. */
export interface AutoregressiveFit {
  readonly rhoRow: number;
  readonly rhoCol: number;
  /** restricted, ½ log|X'X| of the unweighted model added, so that it compares with the design's own */
  readonly logLik: number;
  /** in place of the least-squares fit: generalised least squares, residual variance that of one plot */
  readonly fit: FixedFit;
}

const gridValues = [-0.4, 0, 0.3, 0.6, 0.85];
const leastStep = 1e-6;
/** Correlations stay this far from ±1 on the scale of Fisher's z. */
const largestZ = 3.2;

/**
 * REML for AR1 × AR1 errors: over a grid of correlations, then by steps that halve. Absent places count as plots of
 * unknown value, each with a parameter of its own: that leaves the likelihood of the present ones as it is.
 * Source: Cullis & Gleeson (1991), Biometrics 47:1449–1460.
 */
export function fitAutoregressive(fixed: FixedFit, grid: FieldGrid): AutoregressiveFit | null {
  const columns = writeColumns(fixed, grid);
  const evaluate = (zRow: number, zCol: number) => {
    const [rhoRow, rhoCol] = [Math.tanh(zRow), Math.tanh(zCol)];
    return evaluateCorrelations(fixed, grid, columns, rhoRow, rhoCol);
  };
  let best: { zRow: number; zCol: number; point: AutoregressiveFit } | null = null;
  const consider = (zRow: number, zCol: number): boolean => {
    if (Math.abs(zRow) > largestZ || Math.abs(zCol) > largestZ) return false;
    const point = evaluate(zRow, zCol);
    if (!point || (best && point.logLik <= best.point.logLik)) return false;
    best = { zRow, zCol, point };
    return true;
  };
  const rowValues = grid.rows > 1 ? gridValues : [0];
  const colValues = grid.cols > 1 ? gridValues : [0];
  for (const row of rowValues) for (const col of colValues) consider(Math.atanh(row), Math.atanh(col));
  for (let step = 0.2; step > leastStep && best;) {
    const { zRow, zCol }: { zRow: number; zCol: number } = best;
    const hasMoved =
      (grid.rows > 1 && (consider(zRow + step, zCol) || consider(zRow - step, zCol))) ||
      (grid.cols > 1 && (consider(zRow, zCol + step) || consider(zRow, zCol - step)));
    if (!hasMoved) step /= 2;
  }
  const found = best as { point: AutoregressiveFit } | null;
  return found ? found.point : null;
}

/** [D X r] over the rectangle: D marks absent places, r are the least-squares residuals. */
interface WrittenColumns {
  readonly a: Float64Array;
  readonly count: number;
}

function writeColumns(fixed: FixedFit, grid: FieldGrid): WrittenColumns {
  const { model, residuals } = fixed;
  const x = writeModelMatrix(model);
  const m = grid.absent.length;
  const count = m + model.width + 1;
  const a = new Float64Array(grid.rows * grid.cols * count);
  grid.absent.forEach((place, j) => (a[place * count + j] = 1));
  grid.places.forEach((place, i) => {
    a.set(x.subarray(i * model.width, (i + 1) * model.width), place * count + m);
    a[place * count + count - 1] = residuals[i]!;
  });
  return { a, count };
}

function evaluateCorrelations(
  fixed: FixedFit,
  grid: FieldGrid,
  { a, count }: WrittenColumns,
  rhoRow: number,
  rhoCol: number,
): AutoregressiveFit | null {
  const white = a.slice();
  whiten(white, count, grid, rhoRow, rhoCol);
  const cross = absorbLeading(crossProduct(white, grid.rows * grid.cols, count), count, grid.absent.length);
  if (!cross) return null;
  const { width } = fixed.model;
  const size = width + 1;
  const xtx = new Float64Array(width * width);
  const xty = new Float64Array(width);
  for (let i = 0; i < width; i++) {
    for (let j = 0; j < width; j++) xtx[i * width + j] = cross.rest[i * size + j]!;
    xty[i] = cross.rest[i * size + width]!;
  }
  const factor = factorSkipping(xtx, width);
  if (factor.rank !== fixed.factor.rank) return null;
  const triangle = keptTriangle(factor);
  const change = Float64Array.from(factor.kept, (column) => xty[column]!);
  solveTransposed(triangle, factor.rank, change);
  const explained = change.reduce((sum, value) => sum + value * value, 0);
  solveUpper(triangle, factor.rank, change);
  const residualSs = cross.rest[size * size - 1]! - explained;
  if (!(residualSs > 0)) return null;
  const beta = fixed.beta.slice();
  factor.kept.forEach((column, i) => (beta[column]! += change[i]!));
  const df = fixed.residualDf;
  const logLik =
    -0.5 *
    (df * (Math.log((2 * Math.PI * residualSs) / df) + 1) +
      logDetCorrelation(grid, rhoRow, rhoCol) +
      cross.logDet +
      logDetTriangle(triangle, factor.rank) -
      logDetTriangle(fixed.triangle, fixed.factor.rank));
  const inverse = invertFromTriangle(triangle, factor.rank);
  return { rhoRow, rhoCol, logLik, fit: { ...fixed, xtx, factor, triangle, inverse, beta, residualSs } };
}

/** Cross products of the columns behind the first m, those projected out, and log| | of the block of the first m. */
function absorbLeading(
  cross: Float64Array,
  count: number,
  m: number,
): { rest: Float64Array; logDet: number } | null {
  const size = count - m;
  const own = new Float64Array(m * m);
  const side = new Float64Array(m * size);
  for (let i = 0; i < m; i++) {
    for (let j = 0; j < m; j++) own[i * m + j] = cross[i * count + j]!;
    for (let j = 0; j < size; j++) side[i * size + j] = cross[i * count + m + j]!;
  }
  const triangle = choleskyUpper(own, m);
  if (!triangle) return null;
  solveTransposedRows(triangle, m, side, size);
  const rest = crossProduct(side, m, size);
  for (let i = 0; i < size; i++)
    for (let j = 0; j < size; j++) rest[i * size + j] = cross[(m + i) * count + m + j]! - rest[i * size + j]!;
  return { rest, logDet: logDetTriangle(triangle, m) };
}

function logDetTriangle(triangle: Float64Array, size: number): number {
  let sum = 0;
  for (let i = 0; i < size; i++) sum += 2 * Math.log(triangle[i * size + i]!);
  return sum;
}
