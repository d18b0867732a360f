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
}

const mostIterations = 200;
/** Newton steps below this share of the total variance end the search; one more step follows. */
const stepTolerance = 1e-11;
/** σ² may not fall below this share of the total variance. */
const leastResidual = 1e-9;

/**
 * REML estimates of variance components: Newton on the observed information where it is positive definite, on the
 * average information elsewhere, projected on θ ≥ 0; a component stays at 0 while its gradient is not positive.
 * Source: Patterson & Thompson (1971), Biometrika 58:545–554; Gilmour, Thompson & Cullis (1995), Biometrics 51:1440–1450.
 */
export function fitComponents(model: AbsorbedModel): ComponentFit {
  const count = model.starts.length; // K components and σ²
  const unit = model.ymy / model.residualDf;
  // in units of the residual mean square, so that tolerances mean the same for any trait
  const scaled: AbsorbedModel = {
    ...model,
    zmy: model.zmy.map((v) => v / Math.sqrt(unit)),
    ymy: model.residualDf,
  };
  let theta = startComponents(scaled);
  let point = evaluatePoint(scaled, theta);
  let converged = false;
  let iterations = 0;
  for (; iterations < mostIterations; iterations++) {
    const free = freeComponents(point);
    const step = newtonStep(point, free, count);
    const size = largestMove(theta, step);
    const next = searchAlong(scaled, point, step);
    if (next) {
      theta = next.theta;
      point = next;
    }
    if (size < stepTolerance || (!next && size < 1e-7)) {
      converged = !hasPositiveGradientAtZero(point);
      if (converged) break;
    }
    if (!next) break;
  }
  return { point: inOriginalUnits(point, unit, model), converged, iterations };
}

/** Criterion, gradient and both informations at θ (σ² last). */
export function evaluatePoint(model: AbsorbedModel, theta: Float64Array): RestrictedPoint {
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
  const r = choleskyUpper(h, q)!;
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
  return { theta, logLik, s, u, ...differentiate(model, theta, s, u, ypy) };
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

/** Equal shares of the variance, each random term in the unit of one of its effects. */
function startComponents({ starts }: AbsorbedModel): Float64Array {
  const count = starts.length;
  return new Float64Array(count).fill(0.5 / Math.max(1, count - 1), 0, count - 1).fill(0.6, count - 1);
}

function freeComponents({ theta, gradient }: RestrictedPoint): number[] {
  const last = theta.length - 1;
  return Array.from(theta, (_, k) => k).filter((k) => k === last || theta[k]! > 0 || gradient[k]! > 0);
}

function hasPositiveGradientAtZero({ theta, gradient }: RestrictedPoint): boolean {
  return theta.some((value, k) => k < theta.length - 1 && value === 0 && gradient[k]! > 1e-8);
}

/** Step of the free components, 0 for the others. */
function newtonStep(point: RestrictedPoint, free: readonly number[], count: number): Float64Array {
  const size = free.length;
  const step = new Float64Array(count);
  const pick = (value: (i: number) => number) => {
    const out = new Float64Array(size * size);
    for (let a = 0; a < size; a++)
      for (let b = 0; b < size; b++) out[a * size + b] = value(free[a]! * count + free[b]!);
    return out;
  };
  const triangle =
    choleskyUpper(
      pick((i) => 2 * point.average[i]! - point.expected[i]!),
      size,
    ) ??
    choleskyUpper(
      pick((i) => point.average[i]!),
      size,
    ) ??
    choleskyUpper(
      pick((i) => point.expected[i]!),
      size,
    );
  const move = Float64Array.from(free, (k) => point.gradient[k]!);
  if (triangle) {
    solveTransposed(triangle, size, move);
    solveUpper(triangle, size, move);
  }
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
): RestrictedPoint | null {
  const last = step.length - 1;
  const slack = 1e-13 * Math.abs(from.logLik);
  for (let share = 1; share > 1e-9; share /= 2) {
    const theta = from.theta.map((value, k) =>
      k < last ? Math.max(0, value + share * step[k]!) : Math.max(leastResidual, value + share * step[k]!),
    );
    const next = evaluatePoint(model, theta);
    if (next.logLik >= from.logLik - slack) return next;
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
    theta: point.theta.map((value) => value * unit),
    logLik: point.logLik - 0.5 * residualDf * Math.log(unit),
    s: point.s.map((value) => value / unit),
    u: point.u.map((value) => value / Math.sqrt(unit)),
    gradient: point.gradient.map((value) => value / unit),
    average: point.average.map(information),
    expected: point.expected.map(information),
  };
}
