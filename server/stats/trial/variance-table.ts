import { fUpper } from '#server/stats/distributions/f-distribution.ts';
import { choleskyUpper } from '#server/stats/linear/dense.ts';
import { factorSkipping, keptTriangle, solveTransposed } from '#server/stats/linear/skipping-factor.ts';
import { projectFixed } from './cross-products.ts';
import { gather, type FixedFit } from './fixed-fit.ts';
import type { FixedTerm } from './model-terms.ts';
import type { VarianceRow } from './trial-result.ts';

/** Analysis of variance of a fixed model: marginal (type III) rows with the sequential ones beside them, and the residual. */
export function tabulateVariance(fit: FixedFit): VarianceRow[] {
  const { model, residualSs, residualDf, isExact } = fit;
  const ms = residualDf > 0 ? residualSs / residualDf : null;
  const canTest = ms !== null && !isExact;
  const test = (df: number, ss: number) => {
    const own = df > 0 ? ss / df : null;
    const f = own !== null && canTest ? own / ms : null;
    return { df, ss, ms: own, f, p: f === null ? null : fUpper(f, df, residualDf) };
  };
  const rows = model.fixed.slice(1).map((term, i): VarianceRow => {
    const sequential = fit.sequential[i + 1]!;
    const marginal = sequential.df === 0 ? { df: 0, ss: 0 } : sumMarginal(fit, term);
    const denDf = residualDf > 0 ? residualDf : null;
    return {
      term: term.name,
      denDf,
      ...test(marginal.df, marginal.ss),
      sequential: test(sequential.df, sequential.ss),
    };
  });
  return [...rows, { term: 'residual', df: residualDf, denDf: null, ss: residualSs, ms, f: null, p: null }];
}

/** Terms that add nothing after those before them: wholly confounded. */
export function confoundedTerms(fit: FixedFit): FixedTerm[] {
  return fit.model.fixed.filter((_, i) => i > 0 && fit.sequential[i]!.df === 0);
}

/** Sum of squares of a term after all others: type III under sum-to-zero contrasts. */
function sumMarginal(fit: FixedFit, term: FixedTerm): { df: number; ss: number } {
  const last = fit.model.fixed[fit.model.fixed.length - 1]!;
  if (term === last) return fit.sequential[fit.model.fixed.length - 1]!;
  return fit.factor.dropped.length === 0 ? sumFromBlock(fit, term) : sumByReordering(fit, term);
}

/** β_t' [(X'X)⁻¹_tt]⁻¹ β_t, for a model of full rank. */
function sumFromBlock(fit: FixedFit, term: FixedTerm): { df: number; ss: number } {
  const { width } = fit.model;
  const block = new Float64Array(term.width * term.width);
  for (let i = 0; i < term.width; i++)
    for (let j = 0; j < term.width; j++)
      block[i * term.width + j] = fit.inverse[(term.offset + i) * width + term.offset + j]!;
  const triangle = choleskyUpper(block, term.width);
  if (!triangle) return sumByReordering(fit, term);
  const rotated = fit.beta.slice(term.offset, term.offset + term.width);
  solveTransposed(triangle, term.width, rotated);
  return { df: term.width, ss: rotated.reduce((sum, value) => sum + value * value, 0) };
}

/** The same with the term's columns put last, which holds for any rank; wholly confounded terms stay out. */
function sumByReordering(fit: FixedFit, term: FixedTerm): { df: number; ss: number } {
  const { model, xtx } = fit;
  const order = orderLast(fit, term);
  const size = order.length;
  const permuted = new Float64Array(size * size);
  for (let i = 0; i < size; i++)
    for (let j = 0; j < size; j++) permuted[i * size + j] = xtx[order[i]! * model.width + order[j]!]!;
  const factor = factorSkipping(permuted, size);
  const projected = projectFixed(model, fit.y);
  const rotated = gather(
    Float64Array.from(order, (column) => projected[column]!),
    factor,
  );
  solveTransposed(keptTriangle(factor), factor.rank, rotated);
  let [df, ss] = [0, 0];
  for (let i = 0; i < factor.rank; i++)
    if (factor.kept[i]! >= size - term.width) {
      df++;
      ss += rotated[i]! * rotated[i]!;
    }
  return { df, ss };
}

/** Columns of the model with those of a term last and those of wholly confounded terms left out. */
export function orderLast(fit: FixedFit, term: FixedTerm): number[] {
  const out = new Set(confoundedTerms(fit));
  const columns = (t: FixedTerm) => Array.from({ length: t.width }, (_, i) => t.offset + i);
  return [...fit.model.fixed.filter((t) => t !== term && !out.has(t)).flatMap(columns), ...columns(term)];
}
