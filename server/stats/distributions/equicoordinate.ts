import { normalUpper } from './normal.ts';
import type { OneFactor } from './one-factor.ts';

const INV_SQRT_2PI = 0.3989422804014327;
/** Sizes of a normal deviate beyond which nothing is left to add. */
const REACH = 8.7;
/** Largest correlation outside the factor up to which the third order, of cost m³, changes no p by 1e-7. */
const NEGLIGIBLE_THIRD = 0.004;

/**
 * How one variable, given the shared factor, lies against its bounds. Derivatives of its density, integrated between
 * the bounds and taken as a part of P(inside), act as moments; here are their cumulants.
 */
interface Conditional {
  /** log P(inside). */
  logInside: number;
  mean: number;
  variance: number;
  skew: number;
}

/** P(outside) of a variable with mean `shift` and the given spread: it lies within ±w, or below w. */
function outsideOf(w: number, shift: number, spread: number, isTwoSided: boolean): number {
  const above = normalUpper((w - shift) / spread);
  return isTwoSided ? Math.min(1, above + normalUpper((w + shift) / spread)) : above;
}

/** Fills in the cumulants of a variable, see outsideOf. */
function fillConditional(
  into: Conditional,
  w: number,
  shift: number,
  spread: number,
  isTwoSided: boolean,
): void {
  const outside = outsideOf(w, shift, spread, isTwoSided);
  into.logInside = Math.log1p(-outside);
  if (outside > 1 - 1e-15) {
    into.mean = 0;
    into.variance = 0;
    into.skew = 0;
    return;
  }
  const above = (w - shift) / spread;
  const below = (w + shift) / spread;
  const scale = INV_SQRT_2PI / (spread * (1 - outside));
  const upper = scale * Math.exp(-0.5 * above * above);
  const lower = isTwoSided ? scale * Math.exp(-0.5 * below * below) : 0;
  const first = upper - lower;
  const second = -(above * upper + below * lower) / spread;
  const third = ((above * above - 1) * upper - (below * below - 1) * lower) / (spread * spread);
  into.mean = first;
  into.variance = second - first * first;
  into.skew = third - 3 * second * first + 2 * first * first * first;
}

/**
 * Effects of first, second and third order, as parts of P(all inside), of correlations ε outside the shared factor.
 * Raising ρ_ij acts on a normal density as ∂²/∂x_i ∂x_j, so that all of ε acts as exp(Q), Q = Σ_{i<j} ε_ij ∂_i ∂_j.
 * The variables being independent given the factor, Q is a quadratic form in independent quantities with the
 * cumulants of `Conditional`, and the effects are E Q, E Q²/2 and E Q³/6.
 */
function restEffects(
  own: readonly Conditional[],
  rest: Float64Array,
  hasThird: boolean,
  effects: Float64Array,
): void {
  const m = own.length;
  let square = 0;
  let cube = 0;
  let mean = 0;
  const slopes = new Float64Array(m);
  for (let i = 0; i < m; i += 1) {
    let slope = 0;
    for (let j = 0; j < m; j += 1) slope += (rest[i * m + j] as number) * (own[j] as Conditional).mean;
    slopes[i] = slope;
    mean += 0.5 * slope * (own[i] as Conditional).mean;
  }
  for (let i = 0; i < m; i += 1) {
    const { variance, skew } = own[i] as Conditional;
    const slope = slopes[i] as number;
    square += slope * slope * variance;
    cube += slope * slope * slope * skew;
    for (let j = 0; j < m; j += 1) {
      const epsilon = rest[i * m + j] as number;
      const other = own[j] as Conditional;
      square += 0.5 * epsilon * epsilon * variance * other.variance;
      if (!hasThird) continue;
      cube += 3 * epsilon * slope * (slopes[j] as number) * variance * other.variance;
      cube += 3 * epsilon * epsilon * slope * skew * other.variance;
      cube += 0.5 * epsilon * epsilon * epsilon * skew * other.skew;
      let paths = 0;
      for (let k = 0; k < m; k += 1) {
        paths += (rest[i * m + k] as number) * (own[k] as Conditional).variance * (rest[k * m + j] as number);
      }
      cube += epsilon * variance * other.variance * paths;
    }
  }
  effects[0] = mean;
  effects[1] = (mean * mean + square) / 2;
  effects[2] = hasThird ? (mean * mean * mean + 3 * mean * square + cube) / 6 : 0;
}

/** The tail of the largest of m correlated standard normals, or of the largest of their sizes. */
export interface EquicoordinateTail {
  /** P(some variable beyond w). */
  readonly upper: number;
  /** Parts of `upper` by their order in the correlations outside the factor: first, second, third. */
  readonly orders: readonly [number, number, number];
  /** What the orders left out may amount to. */
  readonly error: number;
}

/**
 * Size of the first order left out. Against pmvnorm for 3 to 11 variables and correlations outside the factor up to
 * .19 it lay between .3 and 1.2 times the second order times the square of the largest such correlation.
 */
function orderLeftOut(orders: readonly number[], largestRest: number, hasThird: boolean): number {
  const [first = 0, second = 0, third = 0] = orders.map(Math.abs);
  const lower = second + largestRest * first;
  return hasThird ? 2 * largestRest * largestRest * lower + largestRest * third : largestRest * lower;
}

/** Nodes of the trapezoidal rule over the shared factor. */
interface FactorGrid {
  readonly step: number;
  /** First and last node for bounds at w, in steps. */
  readonly span: (w: number) => readonly [number, number];
}

/** Given that variable i is beyond w the factor lies about λ_i w: nodes reach around all of these places. */
function factorGrid(loadings: Float64Array, isTwoSided: boolean): FactorGrid {
  const sizes = isTwoSided ? loadings.map(Math.abs) : loadings;
  const least = Math.min(...sizes);
  const most = Math.max(...sizes);
  const largest = Math.max(most, -least, 1e-9);
  const step = 0.25 * Math.min(1, Math.sqrt(1 - largest * largest) / largest);
  // Two-sided the integrand is even, and half of the line is enough.
  const floor = isTwoSided ? 0 : -Infinity;
  return {
    step,
    span: (w) => [
      Math.max(floor, Math.floor((Math.min(0, least * w) - REACH) / step)),
      Math.ceil((Math.max(0, most * w) + REACH) / step),
    ],
  };
}

/**
 * P(max |Z_i| > w), or P(max Z_i > w), for standard normals with correlations λ_i λ_j: independent given the factor.
 * A sum of positive terms, so that small tails keep their relative accuracy.
 * @param loadings λ, each less than 1 in size
 * @param isTwoSided whether sizes are meant
 * Source: Dunnett & Sobel (1955), Biometrika 42:258–260.
 */
export function oneFactorTail(loadings: Float64Array, isTwoSided: boolean): (w: number) => number {
  const grid = factorGrid(loadings, isTwoSided);
  const groups = groupEqual(isTwoSided ? loadings.map(Math.abs) : loadings);
  return (w) => {
    const [start, last] = grid.span(w);
    let upper = 0;
    for (let j = start; j <= last; j += 1) {
      const z = j * grid.step;
      let logInside = 0;
      for (const { loading, spread, size } of groups) {
        logInside += size * Math.log1p(-outsideOf(w, loading * z, spread, isTwoSided));
      }
      upper -= (isTwoSided && j > 0 ? 2 : 1) * Math.exp(-0.5 * z * z) * Math.expm1(logInside);
    }
    return Math.min(1, upper * grid.step * INV_SQRT_2PI);
  };
}

/**
 * P(max |Z_i| > w), or P(max Z_i > w), for correlated standard normals, to third order in the correlations that one
 * shared factor leaves.
 * @param factor the correlation matrix split by fitOneFactor
 * @param isTwoSided whether sizes are meant
 * Source: as oneFactorTail, with Plackett (1954), Biometrika 41:351–360.
 */
export function expandedTail(factor: OneFactor, isTwoSided: boolean): (w: number) => EquicoordinateTail {
  const { loadings, rest, largestRest } = factor;
  const grid = factorGrid(loadings, isTwoSided);
  const spreads = loadings.map((loading) => Math.sqrt(1 - loading * loading));
  const own = Array.from(loadings, (): Conditional => ({ logInside: 0, mean: 0, variance: 0, skew: 0 }));
  const hasThird = largestRest > NEGLIGIBLE_THIRD;
  const effects = new Float64Array(3);
  return (w) => {
    const [start, last] = grid.span(w);
    let upper = 0;
    const orders: [number, number, number] = [0, 0, 0];
    for (let j = start; j <= last; j += 1) {
      const z = j * grid.step;
      let logInside = 0;
      own.forEach((conditional, i) => {
        fillConditional(conditional, w, (loadings[i] as number) * z, spreads[i] as number, isTwoSided);
        logInside += conditional.logInside;
      });
      restEffects(own, rest, hasThird, effects);
      const weight = (isTwoSided && j > 0 ? 2 : 1) * grid.step * INV_SQRT_2PI * Math.exp(-0.5 * z * z);
      const inside = weight * Math.exp(logInside);
      upper -= weight * Math.expm1(logInside);
      orders[0] -= inside * (effects[0] as number);
      orders[1] -= inside * (effects[1] as number);
      orders[2] -= inside * (effects[2] as number);
    }
    const total = upper + orders[0] + orders[1] + orders[2];
    return {
      upper: Math.min(1, Math.max(0, total)),
      orders,
      error: orderLeftOut(orders, largestRest, hasThird),
    };
  };
}

/** Variables with the same loading behave alike: one evaluation serves all of them. */
interface LoadingGroup {
  readonly loading: number;
  readonly spread: number;
  size: number;
}

function groupEqual(loadings: Float64Array): readonly LoadingGroup[] {
  const groups: LoadingGroup[] = [];
  for (const loading of loadings.toSorted()) {
    const previous = groups.at(-1);
    if (previous && loading - previous.loading < 1e-13) previous.size += 1;
    else groups.push({ loading, spread: Math.sqrt(1 - loading * loading), size: 1 });
  }
  return groups;
}
