import { normalUpper } from './normal.ts';
import type { OneFactor } from './one-factor.ts';

const INV_SQRT_2PI = 0.3989422804014327;

/** How closely the shared factor is summed over. */
interface FactorRule {
  /** Size of a normal deviate beyond which nothing is left to add. */
  readonly reach: number;
  /** Step of the trapezoidal rule where correlations are moderate. */
  readonly step: number;
  /** Part of exp(−w²/2) below which what is outside the factor adds nothing. */
  readonly negligible: number;
}

const fineRule: FactorRule = { reach: 8.7, step: 0.25, negligible: 1e-13 };
/** Leaves out 1e-8 of a tail: enough for a critical value, at a third of the cost. */
export const criticalRule: FactorRule = { reach: 5.5, step: 0.5, negligible: 1e-9 };

/** Largest correlation outside the factor up to which the third order, of cost m³, changes no p by 1e-6. */
const NEGLIGIBLE_THIRD = 0.01;

/**
 * How the variables, given the shared factor, lie against their bounds. Derivatives of a variable's density,
 * integrated between the bounds and taken as a part of P(inside), act as moments; here are their cumulants.
 */
interface Conditionals {
  readonly mean: Float64Array;
  readonly variance: Float64Array;
  readonly skew: Float64Array;
}

/** P(outside) of a variable with mean `shift` and the given spread: it lies within ±w, or below w. */
function outsideOf(w: number, shift: number, spread: number, isTwoSided: boolean): number {
  if (!isTwoSided) return normalUpper((w - shift) / spread);
  const size = Math.abs(shift);
  const nearer = normalUpper((w - size) / spread);
  // The other bound is e^(2 w size / spread²) times less likely: not worth a call where that shows no more.
  return 2 * w * size > 40 * spread * spread
    ? nearer
    : Math.min(1, nearer + normalUpper((w + size) / spread));
}

/** Fills in the cumulants of variable i, see outsideOf; returns log P(inside). */
function fillConditional(
  into: Conditionals,
  i: number,
  w: number,
  shift: number,
  spread: number,
  isTwoSided: boolean,
): number {
  const outside = outsideOf(w, shift, spread, isTwoSided);
  if (outside > 1 - 1e-15) {
    into.mean[i] = 0;
    into.variance[i] = 0;
    into.skew[i] = 0;
    return -Infinity;
  }
  const above = (w - shift) / spread;
  const below = (w + shift) / spread;
  const scale = INV_SQRT_2PI / (spread * (1 - outside));
  const upper = scale * Math.exp(-0.5 * above * above);
  const lower = isTwoSided ? scale * Math.exp(-0.5 * below * below) : 0;
  const first = upper - lower;
  const second = -(above * upper + below * lower) / spread;
  const third = ((above * above - 1) * upper - (below * below - 1) * lower) / (spread * spread);
  into.mean[i] = first;
  into.variance[i] = second - first * first;
  into.skew[i] = third - 3 * second * first + 2 * first * first * first;
  return Math.log1p(-outside);
}

/**
 * Effects of first, second and third order, as parts of P(all inside), of correlations ε outside the shared factor.
 * Raising ρ_ij acts on a normal density as ∂²/∂x_i ∂x_j, so that all of ε acts as exp(Q), Q = Σ_{i<j} ε_ij ∂_i ∂_j.
 * The variables being independent given the factor, Q is a quadratic form in independent quantities with the
 * cumulants of `Conditionals`, and the effects are E Q, E Q²/2 and E Q³/6.
 */
function restEffects(own: Conditionals, rest: Float64Array, hasThird: boolean, effects: Float64Array): void {
  const { mean, variance } = own;
  const m = mean.length;
  const slopes = new Float64Array(m);
  let pairs = 0;
  // Half of ε is read for both: this is the innermost loop of every comparison that is not balanced.
  for (let i = 1; i < m; i += 1) {
    const ownMean = mean[i] as number;
    let slope = 0;
    let spread = 0;
    for (let j = 0; j < i; j += 1) {
      const epsilon = rest[i * m + j] as number;
      slope += epsilon * (mean[j] as number);
      slopes[j] = (slopes[j] as number) + epsilon * ownMean;
      spread += epsilon * epsilon * (variance[j] as number);
    }
    slopes[i] = (slopes[i] as number) + slope;
    pairs += spread * (variance[i] as number);
  }
  let expected = 0;
  let square = pairs;
  for (let i = 0; i < m; i += 1) {
    const slope = slopes[i] as number;
    expected += 0.5 * slope * (mean[i] as number);
    square += slope * slope * (variance[i] as number);
  }
  effects[0] = expected;
  effects[1] = (expected * expected + square) / 2;
  effects[2] = hasThird
    ? (expected * expected * expected + 3 * expected * square + centredCube(own, rest, slopes)) / 6
    : 0;
}

/** E (Q − E Q)³ for the quadratic form of restEffects, whose slopes are ε times the means. */
function centredCube({ variance, skew }: Conditionals, rest: Float64Array, slopes: Float64Array): number {
  const m = slopes.length;
  let cube = 0;
  for (let i = 0; i < m; i += 1) {
    const slope = slopes[i] as number;
    const ownVariance = variance[i] as number;
    const ownSkew = skew[i] as number;
    cube += slope * slope * slope * ownSkew;
    for (let j = 0; j < i; j += 1) {
      const epsilon = rest[i * m + j] as number;
      const otherVariance = variance[j] as number;
      const otherSkew = skew[j] as number;
      const otherSlope = slopes[j] as number;
      // Rows i and j of ε (diagonal 0): paths from i to j over any third variable.
      let paths = 0;
      for (let k = 0; k < m; k += 1) {
        paths += (rest[i * m + k] as number) * (variance[k] as number) * (rest[j * m + k] as number);
      }
      cube += 2 * epsilon * ownVariance * otherVariance * (3 * slope * otherSlope + paths);
      cube +=
        3 * epsilon * epsilon * (slope * ownSkew * otherVariance + otherSlope * otherSkew * ownVariance);
      cube += epsilon * epsilon * epsilon * ownSkew * otherSkew;
    }
  }
  return cube;
}

/** More than the first two of restEffects: b + b², where b is half the largest ε times the square of all cumulants. */
function boundEffects({ mean, variance }: Conditionals, largestRest: number): number {
  let sum = 0;
  for (let i = 0; i < mean.length; i += 1)
    sum += Math.abs(mean[i] as number) + Math.abs(variance[i] as number);
  const bound = 0.5 * largestRest * sum * sum;
  return bound * (1 + bound);
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
function factorGrid(loadings: Float64Array, isTwoSided: boolean, rule: FactorRule): FactorGrid {
  const sizes = isTwoSided ? loadings.map(Math.abs) : loadings;
  const least = Math.min(...sizes);
  const most = Math.max(...sizes);
  const largest = Math.max(most, -least, 1e-9);
  const step = rule.step * Math.min(1, Math.sqrt(1 - largest * largest) / largest);
  // Two-sided the integrand is even, and half of the line is enough.
  const floor = isTwoSided ? 0 : -Infinity;
  return {
    step,
    span: (w) => [
      Math.max(floor, Math.floor((Math.min(0, least * w) - rule.reach) / step)),
      Math.ceil((Math.max(0, most * w) + rule.reach) / step),
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
  const grid = factorGrid(loadings, isTwoSided, fineRule);
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

/** How far an expansion goes. */
interface ExpansionEffort {
  /** Whether to go beyond the second order, of cost m², to the third, of cost m³. */
  readonly hasThird: boolean;
  readonly rule: FactorRule;
}

/**
 * P(max |Z_i| > w), or P(max Z_i > w), for correlated standard normals, to third order in the correlations that one
 * shared factor leaves.
 * @param factor the correlation matrix split by fitOneFactor
 * @param isTwoSided whether sizes are meant
 * @param effort to the third order where it counts and to all digits, unless less is enough
 * Source: as oneFactorTail, with Plackett (1954), Biometrika 41:351–360.
 */
export function expandedTail(
  factor: OneFactor,
  isTwoSided: boolean,
  effort: ExpansionEffort = { hasThird: factor.largestRest > NEGLIGIBLE_THIRD, rule: fineRule },
): (w: number) => EquicoordinateTail {
  const { loadings, rest, largestRest } = factor;
  const { hasThird, rule } = effort;
  const grid = factorGrid(loadings, isTwoSided, rule);
  const spreads = loadings.map((loading) => Math.sqrt(1 - loading * loading));
  const zeros = (): Float64Array => new Float64Array(loadings.length);
  const own: Conditionals = { mean: zeros(), variance: zeros(), skew: zeros() };
  const effects = new Float64Array(3);
  return (w) => {
    const [start, last] = grid.span(w);
    const negligible = rule.negligible * Math.exp(-0.5 * w * w);
    let upper = 0;
    const orders: [number, number, number] = [0, 0, 0];
    for (let j = start; j <= last; j += 1) {
      const z = j * grid.step;
      let logInside = 0;
      for (let i = 0; i < loadings.length; i += 1) {
        const shift = (loadings[i] as number) * z;
        logInside += fillConditional(own, i, w, shift, spreads[i] as number, isTwoSided);
      }
      const weight = (isTwoSided && j > 0 ? 2 : 1) * grid.step * INV_SQRT_2PI * Math.exp(-0.5 * z * z);
      const inside = weight * Math.exp(logInside);
      upper -= weight * Math.expm1(logInside);
      if (inside * boundEffects(own, largestRest) < negligible) continue;
      restEffects(own, rest, hasThird, effects);
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
