import {
  choleskyUpper,
  multiplyTransposed,
  solveTransposedRows,
  crossProduct,
} from '#server/stats/linear/dense.ts';
import {
  solveTransposed,
  solveUpper,
  factorSkipping,
  keptTriangle,
} from '#server/stats/linear/skipping-factor.ts';
import { invertFromTriangle } from '#server/stats/linear/triangle-inverse.ts';
import { projectFixed } from './cross-products.ts';
import type { FixedFit } from './fixed-fit.ts';
import type { RandomTerm } from './model-terms.ts';
import { buildRandomPart, type NamedTerm, type RandomPart } from './random-part.ts';
import { fitComponents, type ComponentFit } from './variance-components.ts';

/** A model with random effects, fitted by REML, and all that Kenward and Roger's method needs of it. */
export interface MixedFit<Term extends NamedTerm = RandomTerm> {
  readonly fixed: FixedFit;
  readonly random: RandomPart<Term>;
  readonly components: ComponentFit;
  /** θ_1 … θ_K, σ² */
  readonly theta: Float64Array;
  /** inverse expected information of all components, those at 0 included */
  readonly w: Float64Array;
  /**
   * K with blocks S_kl · w̃_kl: Φ_A = Φ + 2 (TΦ)' K (TΦ), T = Z'V⁻¹X. The residual's part is folded in, since
   * Z'PV⁻¹X = −S D T/σ² and X'V⁻¹PV⁻¹X = T'D S D T/σ⁴.
   */
  readonly correction: Float64Array;
  /** upper triangle of I + Γ½ Z'Z Γ½ and Γ½ itself */
  readonly zTriangle: Float64Array;
  readonly root: Float64Array;
  readonly basis: MixedBasis;
}

/** Generalised least squares on one choice of independent columns. */
export interface MixedBasis {
  readonly kept: Int32Array;
  /** coefficients of y − center */
  readonly beta: Float64Array;
  /** Φ = (X'V⁻¹X)⁻¹, rank × rank */
  readonly phi: Float64Array;
  /** TΦ = Z'V⁻¹XΦ, q × rank */
  readonly tPhi: Float64Array;
}

/** The random side of the model; null where there is none or no residual variance to tell it from. */
export function prepareRandom(fixed: FixedFit): RandomPart | null {
  return fixed.model.random.length === 0 || fixed.residualDf === 0 || fixed.isExact
    ? null
    : buildRandomPart(fixed);
}

/**
 * @param random with at least one term
 * @returns null where the random terms leave no residual variance
 */
export function fitMixed<Term extends NamedTerm>(
  fixed: FixedFit,
  random: RandomPart<Term>,
): MixedFit<Term> | null {
  const components = fitComponents(random);
  if (components.isResidualZero) return null;
  const { theta, expected } = components.point;
  const count = theta.length;
  const w = invertInformation(expected, count);
  const q = random.zmy.length;
  const root = new Float64Array(q);
  for (let k = 0; k < count - 1; k++)
    root.fill(Math.sqrt(theta[k]! / theta[count - 1]!), random.starts[k]!, random.starts[k + 1]!);
  const h = new Float64Array(q * q);
  for (let i = 0; i < q; i++)
    for (let j = 0; j < q; j++)
      h[i * q + j] = root[i]! * random.ztz[i * q + j]! * root[j]! + (i === j ? 1 : 0);
  const zTriangle = choleskyUpper(h, q)!;
  const correction = weighCorrection(random, components.point.s, theta, w);
  const bare = { fixed, random, components, theta, w, correction, zTriangle, root };
  return { ...bare, basis: solveBasis(bare, fixed.factor.kept, fixed.triangle, fixed.inverse) };
}

/** GLS on independent columns chosen with the given order of preference (columns of the model matrix). */
export function reorderBasis(fit: MixedFit<NamedTerm>, order: readonly number[]): MixedBasis {
  const { xtx, model } = fit.fixed;
  const size = order.length;
  const permuted = new Float64Array(size * size);
  for (let i = 0; i < size; i++)
    for (let j = 0; j < size; j++) permuted[i * size + j] = xtx[order[i]! * model.width + order[j]!]!;
  const factor = factorSkipping(permuted, size);
  const triangle = keptTriangle(factor);
  const kept = Int32Array.from(factor.kept, (i) => order[i]!);
  return solveBasis(fit, kept, triangle, invertFromTriangle(triangle, factor.rank));
}

/**
 * @param kept independent columns
 * @param triangle R of their cross products
 */
function solveBasis(
  fit: Omit<MixedFit<NamedTerm>, 'basis'>,
  kept: Int32Array,
  triangle: Float64Array,
  inverse: Float64Array,
): MixedBasis {
  const { fixed, random, theta, root, zTriangle } = fit;
  const { width } = fixed.model;
  const rank = kept.length;
  const q = root.length;
  const sigma2 = theta[theta.length - 1]!;
  const c = new Float64Array(q * rank);
  for (let i = 0; i < q; i++)
    for (let j = 0; j < rank; j++) c[i * rank + j] = random.ztx[i * width + kept[j]!]!;
  // Y = R⁻ᵀ Γ½ Z'X, so that X'V⁻¹X = (X'X − Y'Y)/σ²
  const y = c.map((value, i) => value * root[Math.floor(i / rank)]!);
  solveTransposedRows(zTriangle, q, y, rank);
  const xvx = crossProduct(y, q, rank);
  for (let i = 0; i < rank; i++)
    for (let j = 0; j < rank; j++)
      xvx[i * rank + j] = (fixed.xtx[kept[i]! * width + kept[j]!]! - xvx[i * rank + j]!) / sigma2;
  const own = choleskyUpper(xvx, rank);
  const phi = own ? invertFromTriangle(own, rank) : inverse;
  // T = (Z'X − W'Y)/σ² with W = R⁻ᵀ Γ½ Z'Z
  const wz = random.ztz.map((value, i) => value * root[Math.floor(i / q)]!);
  solveTransposedRows(zTriangle, q, wz, q);
  const t = multiplyTransposed(wz, y, q, q, rank);
  for (let i = 0; i < t.length; i++) t[i] = (c[i]! - t[i]!) / sigma2;
  const tPhi = new Float64Array(q * rank);
  for (let i = 0; i < q; i++)
    for (let k = 0; k < rank; k++) {
      const factor = t[i * rank + k]!;
      if (factor !== 0) for (let j = 0; j < rank; j++) tPhi[i * rank + j]! += factor * phi[k * rank + j]!;
    }
  return { kept, phi, tPhi, beta: solveCoefficients(fit, kept, triangle, y, phi) };
}

/** β of generalised least squares: least squares, then Φ X'V⁻¹ applied to its residuals (whose X'r is 0). */
function solveCoefficients(
  { fixed, random, root, zTriangle, theta }: Omit<MixedFit<NamedTerm>, 'basis'>,
  kept: Int32Array,
  triangle: Float64Array,
  y: Float64Array,
  phi: Float64Array,
): Float64Array {
  const rank = kept.length;
  const q = root.length;
  const beta =
    kept === fixed.factor.kept
      ? Float64Array.from(kept, (column) => fixed.beta[column]!)
      : leastSquaresOn(fixed, kept, triangle);
  const w = random.zmy.map((value, i) => value * root[i]!);
  solveTransposed(zTriangle, q, w);
  const score = new Float64Array(rank);
  for (let k = 0; k < q; k++) for (let j = 0; j < rank; j++) score[j]! -= y[k * rank + j]! * w[k]!;
  const sigma2 = theta[theta.length - 1]!;
  for (let i = 0; i < rank; i++) {
    let sum = 0;
    for (let j = 0; j < rank; j++) sum += phi[i * rank + j]! * score[j]!;
    beta[i]! += sum / sigma2;
  }
  return beta;
}

function leastSquaresOn(fixed: FixedFit, kept: Int32Array, triangle: Float64Array): Float64Array {
  const projected = projectFixed(fixed.model, fixed.y);
  const beta = Float64Array.from(kept, (column) => projected[column]!);
  solveTransposed(triangle, kept.length, beta);
  solveUpper(triangle, kept.length, beta);
  return beta;
}

function invertInformation(expected: Float64Array, count: number): Float64Array {
  const triangle = choleskyUpper(expected, count);
  // identifiability was asked before the fit, so that only an infinite θ could bring this about
  if (!triangle) throw new RangeError('the information on the variance components is singular');
  return invertFromTriangle(triangle, count);
}

function weighCorrection(
  { starts, zmy }: RandomPart<NamedTerm>,
  s: Float64Array,
  theta: Float64Array,
  w: Float64Array,
): Float64Array {
  const q = zmy.length;
  const terms = starts.length - 1;
  const count = terms + 1;
  const sigma2 = theta[terms]!;
  const out = new Float64Array(q * q);
  for (let k = 0; k < terms; k++)
    for (let l = 0; l < terms; l++) {
      const weight =
        w[k * count + l]! -
        (w[k * count + terms]! * theta[l]! + w[l * count + terms]! * theta[k]!) / sigma2 +
        (w[terms * count + terms]! * theta[k]! * theta[l]!) / (sigma2 * sigma2);
      for (let i = starts[k]!; i < starts[k + 1]!; i++)
        for (let j = starts[l]!; j < starts[l + 1]!; j++) out[i * q + j] = weight * s[i * q + j]!;
    }
  return out;
}
