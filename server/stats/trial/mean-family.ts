import { expandTerm } from './contrasts.ts';
import type { FixedFit } from './fixed-fit.ts';
import type { Factor, FixedTerm } from './model-terms.ts';
import type { TrialModel } from './trial-model.ts';

/** The adjusted means of one family (entries, levels of a factor, combinations) as linear functions of the coefficients. */
export interface MeanFamily {
  readonly name: string;
  /** e labels, in table order; combinations as a:b with the first factor varying fastest */
  readonly labels: readonly string[];
  /** used plots of each */
  readonly counts: Int32Array;
  /** plain mean of the used plots minus the fit's center; 0 where there are none */
  readonly plainMeans: Float64Array;
  readonly terms: readonly FixedTerm[];
  /** for each term, the term's cell of each mean */
  readonly termCells: readonly Int32Array[];
  /** the null vectors of the model applied to each mean, e long each */
  readonly nullValues: readonly Float64Array[];
}

/** Relative size below which a null vector's effect on a mean is rounding. */
const estimabilityTolerance = 1e-7;

export function buildFamily(fit: FixedFit, name: string, factors: readonly Factor[]): MeanFamily {
  const { model } = fit;
  const dims = factors.map((factor) => factor.levels.length);
  const size = dims.reduce((product, dim) => product * dim, 1);
  const levels = factors.map(() => new Int32Array(size));
  const labels: string[] = [];
  for (let mean = 0; mean < size; mean++) {
    let rest = mean;
    const parts = factors.map((factor, f) => {
      const level = rest % dims[f]!;
      rest = Math.floor(rest / dims[f]!);
      levels[f]![mean] = level;
      return factor.levels[level]!;
    });
    labels.push(parts.join(':'));
  }
  const names = factors.map((factor) => factor.name);
  const terms = model.fixed.filter((term) => term.factors.every((factor) => names.includes(factor.name)));
  const termCells = terms.map((term) => {
    const cells = new Int32Array(size);
    for (const factor of term.factors) {
      const own = levels[names.indexOf(factor.name)]!;
      for (let mean = 0; mean < size; mean++) cells[mean] = cells[mean]! * factor.levels.length + own[mean]!;
    }
    return cells;
  });
  const counts = new Int32Array(size);
  const plainMeans = new Float64Array(size);
  for (let i = 0; i < model.count; i++) {
    let mean = 0;
    for (let f = factors.length - 1; f >= 0; f--) mean = mean * dims[f]! + factors[f]!.codes[i]!;
    counts[mean]!++;
    plainMeans[mean]! += fit.y[i]!;
  }
  for (let mean = 0; mean < size; mean++) if (counts[mean]! > 0) plainMeans[mean]! /= counts[mean]!;
  const bare = { name, labels, counts, plainMeans, terms, termCells, nullValues: [] };
  return { ...bare, nullValues: fit.nullSpace.map((vector) => predictMeans(bare, vector)) };
}

/** The family's means for given coefficients (model width long). */
export function predictMeans(family: MeanFamily, coefficients: Float64Array): Float64Array {
  const out = new Float64Array(family.labels.length);
  family.terms.forEach((term, t) => {
    const effects = expandTerm(coefficients.subarray(term.offset, term.offset + term.width), term, 1, 1);
    const cells = family.termCells[t]!;
    for (let mean = 0; mean < out.length; mean++) out[mean]! += effects[cells[mean]!]!;
  });
  return out;
}

/** L Φ L' for the family's means, e × e; phi is rank × rank over the kept columns. */
export function covarianceOfMeans(family: MeanFamily, fit: FixedFit, phi: Float64Array): Float64Array {
  const size = family.labels.length;
  const out = new Float64Array(size * size);
  const full = scatterSquare(phi, fit);
  family.terms.forEach((a, s) =>
    family.terms.forEach((b, t) => {
      const block = expandBlock(full, fit.model, a, b);
      const cellsA = family.termCells[s]!;
      const cellsB = family.termCells[t]!;
      for (let i = 0; i < size; i++) {
        const row = cellsA[i]! * b.size;
        for (let j = 0; j < size; j++) out[i * size + j]! += block[row + cellsB[j]!]!;
      }
    }),
  );
  return out;
}

/** h_i = x_i' (X'X)⁻¹ x_i for every used plot. */
export function leverages(fit: FixedFit): Float64Array {
  const { model } = fit;
  const full = scatterSquare(fit.inverse, fit);
  const out = new Float64Array(model.count);
  model.fixed.forEach((a, s) =>
    model.fixed.forEach((b, t) => {
      if (t < s) return;
      const block = expandBlock(full, model, a, b);
      const weight = s === t ? 1 : 2;
      for (let i = 0; i < model.count; i++) out[i]! += weight * block[a.cells[i]! * b.size + b.cells[i]!]!;
    }),
  );
  return out;
}

/** Whether a mean, or the gap of two (b given), does not depend on the choice among equivalent coefficients. */
export function isEstimable(family: MeanFamily, a: number, b: number | null): boolean {
  return family.nullValues.every(
    (values) => Math.abs(values[a]! - (b === null ? 0 : values[b]!)) < estimabilityTolerance,
  );
}

/** Cells × cells covariance of the effects of two terms. */
function expandBlock(full: Float64Array, model: TrialModel, a: FixedTerm, b: FixedTerm): Float64Array {
  const block = new Float64Array(a.width * b.width);
  for (let i = 0; i < a.width; i++)
    for (let j = 0; j < b.width; j++)
      block[i * b.width + j] = full[(a.offset + i) * model.width + b.offset + j]!;
  return expandTerm(expandTerm(block, b, a.width, 1), a, 1, b.size);
}

/** A rank × rank matrix over the kept columns as a width × width one, 0 elsewhere. */
function scatterSquare(phi: Float64Array, fit: FixedFit): Float64Array {
  const { width } = fit.model;
  const { kept, rank, dropped } = fit.factor;
  if (dropped.length === 0) return phi;
  const out = new Float64Array(width * width);
  for (let i = 0; i < rank; i++)
    for (let j = 0; j < rank; j++) out[kept[i]! * width + kept[j]!] = phi[i * rank + j]!;
  return out;
}
