import type { FixedTerm } from './model-terms.ts';
import type { TrialModel } from './trial-model.ts';

/** The sum-to-zero model matrix written out, count × width, row-major: for models whose errors are correlated. */
export function writeModelMatrix(model: TrialModel): Float64Array {
  const { count, width } = model;
  const out = new Float64Array(count * width);
  for (const term of model.fixed) {
    const rows = contrastRows(term);
    for (let i = 0; i < count; i++)
      for (let j = 0; j < term.width; j++)
        out[i * width + term.offset + j] = rows[term.cells[i]! * term.width + j]!;
  }
  return out;
}

/** The row of contrasts of every cell of a term, size × width: a Kronecker product over its factors. */
function contrastRows(term: FixedTerm): Float64Array {
  let rows: Float64Array = Float64Array.of(1);
  let [size, width] = [1, 1];
  for (const dim of term.dims) {
    const next = new Float64Array(size * dim * width * (dim - 1));
    const columns = width * (dim - 1);
    for (let i = 0; i < size; i++)
      for (let level = 0; level < dim; level++)
        for (let j = 0; j < width; j++)
          for (let c = 0; c < dim - 1; c++) {
            const contrast = level === dim - 1 ? -1 : level === c ? 1 : 0;
            next[(i * dim + level) * columns + j * (dim - 1) + c] = rows[i * width + j]! * contrast;
          }
    rows = next;
    size *= dim;
    width = columns;
  }
  return rows;
}
