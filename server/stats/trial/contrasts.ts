import type { FixedTerm } from './model-terms.ts';

/**
 * One axis from cells to sum-to-zero contrasts: out[o, i, k] = src[o, i, k] − src[o, last, k].
 * src: outer × dim × inner; result outer × (dim − 1) × inner.
 */
export function contractAxis(src: Float64Array, outer: number, dim: number, inner: number): Float64Array {
  const out = new Float64Array(outer * (dim - 1) * inner);
  for (let o = 0; o < outer; o++) {
    const last = (o * dim + dim - 1) * inner;
    for (let i = 0; i < dim - 1; i++) {
      const from = (o * dim + i) * inner;
      const to = (o * (dim - 1) + i) * inner;
      for (let k = 0; k < inner; k++) out[to + k] = src[from + k]! - src[last + k]!;
    }
  }
  return out;
}

/** The reverse for effects: the last level is minus the sum of the others. src: outer × (dim − 1) × inner. */
export function expandAxis(src: Float64Array, outer: number, dim: number, inner: number): Float64Array {
  const out = new Float64Array(outer * dim * inner);
  for (let o = 0; o < outer; o++) {
    const last = (o * dim + dim - 1) * inner;
    for (let i = 0; i < dim - 1; i++) {
      const from = (o * (dim - 1) + i) * inner;
      const to = (o * dim + i) * inner;
      for (let k = 0; k < inner; k++) {
        const value = src[from + k]!;
        out[to + k] = value;
        out[last + k]! -= value;
      }
    }
  }
  return out;
}

/** Applies contractAxis along every factor of a term; src: outer × term.size × inner. */
export function contractTerm(src: Float64Array, term: FixedTerm, outer: number, inner: number): Float64Array {
  let current = src;
  let before = outer;
  let after = term.size * inner;
  for (const dim of term.dims) {
    after /= dim;
    current = contractAxis(current, before, dim, after);
    before *= dim - 1;
  }
  return current;
}

/** Applies expandAxis along every factor of a term; src: outer × term.width × inner. */
export function expandTerm(src: Float64Array, term: FixedTerm, outer: number, inner: number): Float64Array {
  let current = src;
  let before = outer;
  let after = term.width * inner;
  for (const dim of term.dims) {
    after /= dim - 1;
    current = expandAxis(current, before, dim, after);
    before *= dim;
  }
  return current;
}
