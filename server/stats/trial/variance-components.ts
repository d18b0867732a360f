import { choleskyUpper, crossProduct, solveTransposedRows } from '#server/stats/linear/dense.ts';
import { solveTransposed, solveUpper } from '#server/stats/linear/skipping-factor.ts';

/**
 * What a model with random effects is fitted from, fixed effects absorbed: M = I − X(X'X)⁻X'.
 * Columns of Z stand term by term; term k holds columns starts[k] … starts[k + 1] − 1.
 */
export interface AbsorbedModel {
  /** Z'MZ, q × q */
  readonly zmz: Float64Array;
  /** Z'My, q */
  readonly zmy: Float64Array;
  /** y'My */
  readonly ymy: number;
  /** plots − rank(X) */
  readonly residualDf: number;
  readonly starts: readonly number[];
}

/** The criterion and its derivatives at one point; parameters are θ_1 … θ_K and, last, σ². */
export interface RestrictedPoint {
  readonly theta: Float64Array;
  /** −½[(n−p) log 2π + (n−p) log σ² + log|I + Γ½ Z'MZ Γ½| + y'Py], Γ = D/σ²: the restricted one plus ½ log|X'X| */
  readonly logLik: number;
  readonly ypy: number;
  /** S = Z'PZ, q × q */
  readonly s: Float64Array;
  /** u = Z'Py, q */
  readonly u: Float64Array;
  readonly gradient: Float64Array;
  /** ½ f_k'P f_l with f_k = V_k P y: average of observed and expected information */
  readonly average: Float64Array;
  /** ½ tr(P V_k P V_l) */
  readonly expected: Float64Array;
}

export interface ComponentFit {
  readonly point: RestrictedPoint;
  readonly converged: boolean;
  readonly iterations: number;
  /** whether the residual variance fell to 0: the random terms explain all that the fixed ones leave */
  readonly isResidualZero: boolean;
}

const mostIterations = 200;
/** Newton steps below this share of the total variance end the search; one more step follows. */
const stepTolerance = 1e-11;
/** Where the criterion cannot rise any more for rounding, a step below this still counts as arrival. */
const stuckTolerance = 1e-6;
/** σ² may not fall below this share of the total variance. */
const leastResidual = 1e-9;

/**
 * REML estimates of variance components: Newton on the observed information where it is positive definite and leads
 * upwards, on the expected information elsewhere, projected on θ ≥ 0; a component stays at 0 while its gradient is
 * not positive.
 * Source: Patterson & Thompson (1971), Biometrika 58:545–554; Gilmour, Thompson & Cullis (1995), Biometrics 51:1440–1450.
 */
export function fitComponents(model: AbsorbedModel): ComponentFit {
  const unit = model.ymy / model.residualDf;
  // in units of the residual mean square, so that tolerances mean the same for any trait
  const scaled: AbsorbedModel = {
    ...model,
    zmy: model.zmy.map((v) => v / Math.sqrt(unit)),
    ymy: model.residualDf,
  };
  let point = startPoint(scaled);
  let converged = false;
  let iterations = 0;
  for (; iterations < mostIterations && !converged; iterations++) {
    const move = climb(scaled, point);
    if (move.next) point = move.next;
    // the step that Newton asks for, not the one taken, says how far the optimum is
    converged = move.size < (move.next ? stepTolerance : stuckTolerance) && !hasPositiveGradientAtZero(point);
    if (!move.next) break;
  }
  const total = point.theta.reduce((sum, value) => sum + value, 0);
  // near 0 the criterion is flat in σ² and too rough to be climbed
  const nearZero = converged ? 10 * leastResidual : 1e-4;
  const isResidualZero = point.theta[point.theta.length - 1]! <= nearZero * total;
  return { point: inOriginalUnits(point, unit, model), converged, iterations, isResidualZero };
}

/** Criterion, gradient and both informations at θ (σ² last); null where θ is too far above σ² for the arithmetic. */
export function evaluatePoint(model: AbsorbedModel, theta: Float64Array): RestrictedPoint | null {
  const { zmz, zmy, ymy, residualDf, starts } = model;
  const q = zmy.length;
  const terms = starts.length - 1;
  const sigma2 = theta[terms]!;
  const root = new Float64Array(q);
  for (let k = 0; k < terms; k++) root.fill(Math.sqrt(theta[k]! / sigma2), starts[k]!, starts[k + 1]!);
  const h = new Float64Array(q * q);
  const b = new Float64Array(q * q);
  for (let i = 0; i < q; i++)
    for (let j = 0; j < q; j++) {
      const scaled = root[i]! * zmz[i * q + j]!;
      b[i * q + j] = scaled;
      h[i * q + j] = scaled * root[j]! + (i === j ? 1 : 0);
    }
  const r = choleskyUpper(h, q);
  if (!r) return null;
  let logDet = 0;
  for (let i = 0; i < q; i++) logDet += 2 * Math.log(r[i * q + i]!);
  solveTransposedRows(r, q, b, q);
  const w = zmy.map((value, i) => value * root[i]!);
  solveTransposed(r, q, w);
  const s = crossProduct(b, q, q);
  for (let i = 0; i < s.length; i++) s[i] = (zmz[i]! - s[i]!) / sigma2;
  const u = new Float64Array(q);
  for (let k = 0; k < q; k++) {
    const weight = w[k]!;
    if (weight !== 0) for (let i = 0; i < q; i++) u[i]! += weight * b[k * q + i]!;
  }
  for (let i = 0; i < q; i++) u[i] = (zmy[i]! - u[i]!) / sigma2;
  const ypy = (ymy - w.reduce((sum, value) => sum + value * value, 0)) / sigma2;
  const logLik = -0.5 * (residualDf * Math.log(2 * Math.PI * sigma2) + logDet + ypy);
  return { theta, logLik, ypy, s, u, ...differentiate(model, theta, s, u, ypy) };
}

/** Since PVP = P, all traces and products that involve the residual follow from S and u. */
function differentiate(
  { residualDf, starts }: AbsorbedModel,
  theta: Float64Array,
  s: Float64Array,
  u: Float64Array,
  ypy: number,
): Pick<RestrictedPoint, 'gradient' | 'average' | 'expected'> {
  const terms = starts.length - 1;
  const count = terms + 1;
  const q = u.length;
  const sigma2 = theta[terms]!;
  const gradient = new Float64Array(count);
  const average = new Float64Array(count * count);
  const expected = new Float64Array(count * count);
  const trace = new Float64Array(terms);
  const norm = new Float64Array(terms);
  // D u and, from it, Z'PPy = (u − S D u) / σ²
  const du = new Float64Array(q);
  for (let k = 0; k < terms; k++)
    for (let i = starts[k]!; i < starts[k + 1]!; i++) {
      trace[k]! += s[i * q + i]!;
      norm[k]! += u[i]! * u[i]!;
      du[i] = theta[k]! * u[i]!;
    }
  const zppy = new Float64Array(q);
  for (let i = 0; i < q; i++) {
    let sum = u[i]!;
    for (let j = 0; j < q; j++) sum -= s[i * q + j]! * du[j]!;
    zppy[i] = sum / sigma2;
  }
  const traceP = (residualDf - sumProduct(theta, trace)) / sigma2;
  const yppy = (ypy - sumProduct(theta, norm)) / sigma2;
  let traceRemainder = traceP;
  let yppyRemainder = yppy;
  for (let k = 0; k < terms; k++) {
    gradient[k] = -0.5 * (trace[k]! - norm[k]!);
    let traceResidual = trace[k]!;
    for (let l = 0; l < terms; l++) {
      let [squares, product] = [0, 0];
      for (let i = starts[k]!; i < starts[k + 1]!; i++)
        for (let j = starts[l]!; j < starts[l + 1]!; j++) {
          const element = s[i * q + j]!;
          squares += element * element;
          product += u[i]! * element * u[j]!;
        }
      expected[k * count + l] = 0.5 * squares;
      average[k * count + l] = 0.5 * product;
      traceResidual -= theta[l]! * squares;
    }
    let product = 0;
    for (let i = starts[k]!; i < starts[k + 1]!; i++) product += u[i]! * zppy[i]!;
    traceResidual /= sigma2;
    expected[k * count + terms] = expected[terms * count + k] = 0.5 * traceResidual;
    average[k * count + terms] = average[terms * count + k] = 0.5 * product;
    traceRemainder -= theta[k]! * traceResidual;
    yppyRemainder -= theta[k]! * product;
  }
  gradient[terms] = -0.5 * (traceP - yppy);
  expected[terms * count + terms] = (0.5 * traceRemainder) / sigma2;
  average[terms * count + terms] = (0.5 * yppyRemainder) / sigma2;
  return { gradient, average, expected };
}

function sumProduct(theta: Float64Array, values: Float64Array): number {
  let sum = 0;
  for (let k = 0; k < values.length; k++) sum += theta[k]! * values[k]!;
  return sum;
}

/** Ratios of every component to σ² from which the search may start: few plots can make two hills. */
const startRatios = [1, 0.1, 10, 100, 1e3, 1e5];
/** With more residual df than this the criterion has one hill in practice, and the first ratio serves. */
const manyDf = 40;

/** The best of a few points with equal ratios, σ² being the best for each. */
function startPoint(model: AbsorbedModel): RestrictedPoint {
  const terms = model.starts.length - 1;
  const ratios = model.residualDf > manyDf ? startRatios.slice(0, 1) : startRatios;
  let best: RestrictedPoint | null = null;
  for (const ratio of ratios) {
    const unscaled = evaluatePoint(model, new Float64Array(terms + 1).fill(ratio, 0, terms).fill(1, terms));
    if (!unscaled) continue;
    const sigma2 = Math.max(leastResidual, unscaled.ypy / model.residualDf);
    const point = evaluatePoint(
      model,
      unscaled.theta.map((value) => value * sigma2),
    );
    if (point && (!best || point.logLik > best.logLik)) best = point;
  }
  return best!;
}

/** One step up: the move made, null where none is, and the size of the one that was asked for. */
function climb(model: AbsorbedModel, point: RestrictedPoint): { next: RestrictedPoint | null; size: number } {
  const free = freeComponents(point);
  const observed = newtonStep(point, free, (i) => 2 * point.average[i]! - point.expected[i]!);
  const first = observed && searchAlong(model, point, observed, 1 / 8);
  if (observed && first) return { next: first, size: largestMove(point.theta, observed) };
  const scoring = newtonStep(point, free, (i) => point.expected[i]!);
  if (!scoring) return { next: null, size: Infinity };
  return {
    next: searchAlong(model, point, scoring, 1e-6),
    size: largestMove(point.theta, observed ?? scoring),
  };
}

function freeComponents({ theta, gradient }: RestrictedPoint): number[] {
  const last = theta.length - 1;
  return Array.from(theta, (_, k) => k).filter((k) => k === last || theta[k]! > 0 || gradient[k]! > 0);
}

function hasPositiveGradientAtZero({ theta, gradient }: RestrictedPoint): boolean {
  return theta.some((value, k) => k < theta.length - 1 && value === 0 && gradient[k]! > 1e-8);
}

/** Step of the free components on the given information, 0 for the others; null where it is not positive definite. */
function newtonStep(
  point: RestrictedPoint,
  free: readonly number[],
  information: (element: number) => number,
): Float64Array | null {
  const size = free.length;
  const count = point.theta.length;
  const own = new Float64Array(size * size);
  for (let a = 0; a < size; a++)
    for (let b = 0; b < size; b++) own[a * size + b] = information(free[a]! * count + free[b]!);
  const triangle = choleskyUpper(own, size);
  if (!triangle) return null;
  const move = Float64Array.from(free, (k) => point.gradient[k]!);
  solveTransposed(triangle, size, move);
  solveUpper(triangle, size, move);
  const step = new Float64Array(count);
  free.forEach((k, a) => (step[k] = move[a]!));
  return step;
}

/** Largest move of a component that the step makes, held at 0 where it would go below. */
function largestMove(theta: Float64Array, step: Float64Array): number {
  let largest = 0;
  for (let k = 0; k < theta.length; k++)
    largest = Math.max(largest, Math.abs(Math.max(theta[k]! + step[k]!, 0) - theta[k]!));
  return largest;
}

/** The first point along the step, halved as often as needed, that is not worse; null where there is none. */
function searchAlong(
  model: AbsorbedModel,
  from: RestrictedPoint,
  step: Float64Array,
  leastShare: number,
): RestrictedPoint | null {
  const last = step.length - 1;
  const slack = 1e-13 * Math.abs(from.logLik);
  for (let share = 1; share >= leastShare; share /= 2) {
    const theta = from.theta.map((value, k) =>
      k < last ? Math.max(0, value + share * step[k]!) : Math.max(leastResidual, value + share * step[k]!),
    );
    const next = evaluatePoint(model, theta);
    if (next && next.logLik >= from.logLik - slack) return next;
  }
  return null;
}

/** Undoes the scaling of y by √unit. */
function inOriginalUnits(
  point: RestrictedPoint,
  unit: number,
  { residualDf }: AbsorbedModel,
): RestrictedPoint {
  const information = (value: number) => value / unit / unit;
  return {
    ...point,
    theta: point.theta.map((value) => value * unit),
    logLik: point.logLik - 0.5 * residualDf * Math.log(unit),
    s: point.s.map((value) => value / unit),
    u: point.u.map((value) => value / Math.sqrt(unit)),
    gradient: point.gradient.map((value) => value / unit),
    average: point.average.map(information),
    expected: point.expected.map(information),
  };
}
