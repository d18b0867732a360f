import { contractTerm, expandTerm } from './contrasts.ts';
import type { FixedTerm, RandomTerm } from './model-terms.ts';
import type { TrialModel } from './trial-model.ts';

/** X'X for the sum-to-zero model matrix, from counts of plots: every element is a whole number and so exact. */
export function crossFixed(model: TrialModel): Float64Array {
  const { fixed, width } = model;
  const xtx = new Float64Array(width * width);
  for (let s = 0; s < fixed.length; s++)
    for (let t = s; t < fixed.length; t++) {
      const [a, b] = [fixed[s]!, fixed[t]!];
      const counts = countTable(a.cells, a.size, b.cells, b.size);
      const block = contractTerm(contractTerm(counts, b, a.size, 1), a, 1, b.width);
      for (let i = 0; i < a.width; i++)
        for (let j = 0; j < b.width; j++) {
          const value = block[i * b.width + j]!;
          xtx[(a.offset + i) * width + b.offset + j] = value;
          xtx[(b.offset + j) * width + a.offset + i] = value;
        }
    }
  return xtx;
}

/** X'y. */
export function projectFixed(model: TrialModel, y: Float64Array): Float64Array {
  const out = new Float64Array(model.width);
  for (const term of model.fixed) out.set(contractTerm(sumByCell(term, y), term, 1, 1), term.offset);
  return out;
}

/** Xβ, one value for each used plot. */
export function predictFixed(model: TrialModel, beta: Float64Array): Float64Array {
  const out = new Float64Array(model.count);
  for (const term of model.fixed) {
    const effects = expandTerm(beta.subarray(term.offset, term.offset + term.width), term, 1, 1);
    for (let i = 0; i < model.count; i++) out[i]! += effects[term.cells[i]!]!;
  }
  return out;
}

/** Z'Z for all random terms side by side, q × q. */
export function crossRandom(
  random: readonly RandomTerm[],
  offsets: readonly number[],
  q: number,
): Float64Array {
  const out = new Float64Array(q * q);
  random.forEach((a, s) =>
    random.forEach((b, t) => {
      const counts = countTable(a.cells, a.size, b.cells, b.size);
      for (let i = 0; i < a.size; i++)
        for (let j = 0; j < b.size; j++)
          out[(offsets[s]! + i) * q + offsets[t]! + j] = counts[i * b.size + j]!;
    }),
  );
  return out;
}

/** Z'X, q × width. */
export function crossRandomFixed(
  model: TrialModel,
  random: readonly RandomTerm[],
  offsets: readonly number[],
  q: number,
): Float64Array {
  const { fixed, width } = model;
  const out = new Float64Array(q * width);
  random.forEach((a, s) => {
    for (const b of fixed) {
      const block = contractTerm(countTable(a.cells, a.size, b.cells, b.size), b, a.size, 1);
      for (let i = 0; i < a.size; i++)
        for (let j = 0; j < b.width; j++)
          out[(offsets[s]! + i) * width + b.offset + j] = block[i * b.width + j]!;
    }
  });
  return out;
}

/** Sums of y by cell of a term. */
export function sumByCell(term: Pick<FixedTerm, 'cells' | 'size'>, y: Float64Array): Float64Array {
  const out = new Float64Array(term.size);
  for (let i = 0; i < y.length; i++) out[term.cells[i]!]! += y[i]!;
  return out;
}

function countTable(a: Int32Array, sizeA: number, b: Int32Array, sizeB: number): Float64Array {
  const out = new Float64Array(sizeA * sizeB);
  for (let i = 0; i < a.length; i++) out[a[i]! * sizeB + b[i]!]! += 1;
  return out;
}
