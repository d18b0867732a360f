import { choleskyUpper, crossProduct, solveTransposedRows } from '#server/stats/linear/dense.ts';
import { crossRandom, crossRandomFixed, sumByCell } from './cross-products.ts';
import type { FixedFit } from './fixed-fit.ts';
import type { RandomTerm } from './model-terms.ts';
import { evaluatePoint, type AbsorbedModel } from './variance-components.ts';

/** Random terms with the fixed effects absorbed. */
export interface AbsorbedTerms<Term extends NamedTerm = RandomTerm> extends AbsorbedModel {
  readonly terms: readonly Term[];
  /** Z'Z, q × q */
  readonly ztz: Float64Array;
  /** Z'X, q × model width */
  readonly ztx: Float64Array;
}

/** The random side of a model: the terms whose variance the data can tell from the others and from the residual. */
export interface RandomPart<Term extends NamedTerm = RandomTerm> extends AbsorbedTerms<Term> {
  readonly notIdentifiable: readonly string[];
}

export interface NamedTerm {
  readonly name: string;
}

/** Share of a term's own variation left beside the fixed effects, below which it is confounded with them. */
const leastShare = 1e-9;
/** Smallest pivot of the scaled information that still tells a component from the others. */
const leastPivot = 1e-8;

/** The model's own random terms. */
export function buildRandomPart(fit: FixedFit): RandomPart {
  return dropConfounded(fit.model.random, (terms) => absorb(fit, terms));
}

/** Drops the terms whose variance is confounded, one after the other. */
export function dropConfounded<Term extends NamedTerm>(
  all: readonly Term[],
  absorbTerms: (terms: readonly Term[]) => AbsorbedTerms<Term>,
): RandomPart<Term> {
  let terms = all;
  const notIdentifiable: string[] = [];
  for (;;) {
    const part = absorbTerms(terms);
    const bad = findConfounded(part);
    if (bad === null) return { ...part, notIdentifiable };
    notIdentifiable.push(terms[bad]!.name);
    terms = terms.filter((_, k) => k !== bad);
  }
}

function absorb(fit: FixedFit, terms: readonly RandomTerm[]): AbsorbedTerms {
  const { model, factor, triangle } = fit;
  const starts = [0];
  for (const term of terms) starts.push(starts[starts.length - 1]! + term.size);
  const q = starts[terms.length]!;
  const ztz = crossRandom(terms, starts, q);
  const ztx = crossRandomFixed(model, terms, starts, q);
  // H = R⁻ᵀ X'Z over the kept columns, then Z'MZ = Z'Z − H'H
  const h = new Float64Array(factor.rank * q);
  for (let i = 0; i < factor.rank; i++)
    for (let j = 0; j < q; j++) h[i * q + j] = ztx[j * model.width + factor.kept[i]!]!;
  solveTransposedRows(triangle, factor.rank, h, q);
  const zmz = crossProduct(h, factor.rank, q);
  for (let i = 0; i < zmz.length; i++) zmz[i] = ztz[i]! - zmz[i]!;
  const zmy = new Float64Array(q);
  terms.forEach((term, k) => zmy.set(sumByCell(term, fit.residuals), starts[k]!));
  return { terms, ztz, ztx, zmz, zmy, ymy: fit.residualSs, residualDf: fit.residualDf, starts };
}

/** The first term whose variance cannot be told from the fixed effects, from earlier terms or from the residual. */
function findConfounded(part: AbsorbedTerms<NamedTerm>): number | null {
  const { terms, starts, zmz, ztz } = part;
  const q = starts[terms.length]!;
  for (let k = 0; k < terms.length; k++) {
    let [own, all] = [0, 0];
    for (let i = starts[k]!; i < starts[k + 1]!; i++) {
      own += zmz[i * q + i]!;
      all += ztz[i * q + i]!;
    }
    if (own <= leastShare * all) return k;
  }
  if (terms.length === 0) return null;
  const { expected } = evaluatePoint(part, new Float64Array(terms.length + 1).fill(1))!;
  // the residual first, so that what is confounded with it is the random term
  const order = [terms.length, ...terms.map((_, k) => k)];
  const count = order.length;
  const scaled = new Float64Array(count * count);
  for (let a = 0; a < count; a++)
    for (let b = 0; b < count; b++)
      scaled[a * count + b] =
        expected[order[a]! * count + order[b]!]! /
        Math.sqrt(expected[order[a]! * count + order[a]!]! * expected[order[b]! * count + order[b]!]!);
  for (let size = 2; size <= count; size++) {
    const leading = new Float64Array(size * size);
    for (let a = 0; a < size; a++)
      for (let b = 0; b < size; b++) leading[a * size + b] = scaled[a * count + b]!;
    const triangle = choleskyUpper(leading, size);
    if (!triangle || triangle[size * size - 1]! ** 2 < leastPivot) return order[size - 1]!;
  }
  return null;
}
