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

/** Fills in a variable with mean `shift` and the given spread: it lies within ±w, or below w. */
function fillConditional(
  into: Conditional,
  w: number,
  shift: number,
  spread: number,
  isTwoSided: boolean,
): void {
  const above = (w - shift) / spread;
  const below = (w + shift) / spread;
  const outside = normalUpper(above) + (isTwoSided ? normalUpper(below) : 0);
  into.logInside = Math.log1p(-Math.min(outside, 1));
  if (outside > 1 - 1e-15) {
    into.mean = 0;
    into.variance = 0;
    into.skew = 0;
    return;
  }
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

/**
 * P(max |Z_i| > w), or P(max Z_i > w), for correlated standard normals: exact where one shared factor holds, else
 * to third order in what it leaves. A sum of positive terms where it is exact, so that small tails keep their accuracy.
 * @param factor the correlation matrix split by fitOneFactor
 * @param isTwoSided whether sizes are meant
 * @param hasRest whether to add the effect of `factor.rest`
 * Source: Dunnett & Sobel (1955), Biometrika 42:258–260; Plackett (1954), Biometrika 41:351–360.
 */
export function equicoordinateTail(
  factor: OneFactor,
  isTwoSided: boolean,
  hasRest: boolean,
): (w: number) => EquicoordinateTail {
  const { loadings, rest } = factor;
  const largest = loadings.reduce((max, l) => Math.max(max, Math.abs(l)), 0);
  const step = 0.25 * Math.min(1, Math.sqrt(1 - largest * largest) / Math.max(largest, 1e-9));
  // Equal loadings need one evaluation; with a rest every variable is needed by itself.
  const groups = hasRest
    ? Array.from(loadings, (loading) => ({ loading, size: 1 }))
    : groupEqual(isTwoSided ? loadings.map(Math.abs) : loadings);
  const spreads = groups.map(({ loading }) => Math.sqrt(1 - loading * loading));
  const own = groups.map((): Conditional => ({ logInside: 0, mean: 0, variance: 0, skew: 0 }));
  const hasThird = factor.largestRest > NEGLIGIBLE_THIRD;
  const effects = new Float64Array(3);
  return (w) => {
    const last = Math.ceil((largest * w + REACH) / step);
    let upper = 0;
    const orders: [number, number, number] = [0, 0, 0];
    for (let j = isTwoSided ? 0 : -last; j <= last; j += 1) {
      const z = j * step;
      let logInside = 0;
      groups.forEach(({ loading, size }, g) => {
        const conditional = own[g] as Conditional;
        fillConditional(conditional, w, loading * z, spreads[g] as number, isTwoSided);
        logInside += size * conditional.logInside;
      });
      // Two-sided the integrand is even in z.
      const weight = (isTwoSided ? (j === 0 ? 1 : 2) : 1) * step * INV_SQRT_2PI * Math.exp(-0.5 * z * z);
      upper -= weight * Math.expm1(logInside);
      if (hasRest) {
        restEffects(own, rest, hasThird, effects);
        const inside = weight * Math.exp(logInside);
        orders[0] -= inside * (effects[0] as number);
        orders[1] -= inside * (effects[1] as number);
        orders[2] -= inside * (effects[2] as number);
      }
    }
    const total = upper + orders[0] + orders[1] + orders[2];
    return {
      upper: Math.min(1, Math.max(0, total)),
      orders,
      error: orderLeftOut(orders, factor.largestRest, hasThird),
    };
  };
}

function groupEqual(loadings: Float64Array): { readonly loading: number; readonly size: number }[] {
  const groups: { loading: number; size: number }[] = [];
  for (const loading of loadings.toSorted()) {
    const previous = groups.at(-1);
    if (previous && loading - previous.loading < 1e-13) previous.size += 1;
    else groups.push({ loading, size: 1 });
  }
  return groups;
}
