import { projectFixed } from './cross-products.ts';
import type { FieldGrid } from './field-grid.ts';
import { residualise, type FixedFit } from './fixed-fit.ts';
import { fitMixed, type MixedFit } from './mixed-fit.ts';
import { dropConfounded, type AbsorbedTerms } from './random-part.ts';

/** Waves along an axis, and along each axis for the surface that bends in both. */
const mostWaves = 12;
const mostCrossWaves = 5;

/**
 * The design's fixed model with a smooth surface over the field: a random walk along rows, one along columns, and
 * their product, each with a variance of its own. A centred first-order walk over n places is Σ λ_k c_k c_k' with
 * cosine waves c_k and λ_k = 1/(2 − 2 cos(πk/n)); the long waves carry nearly all of it and serve here.
 * Source: linear variance model, Piepho & Williams (2010), Crop Sci. 50:1157–1168; its spectrum: Strang (1999), SIAM
 * Rev. 41:135–147.
 * @returns null where no part of the surface can be told from the design's effects
 */
export function fitSurface(fixed: FixedFit, grid: FieldGrid): MixedFit<ColumnTerm> | null {
  const rowWaves = waves(grid.rows, mostWaves);
  const colWaves = waves(grid.cols, mostWaves);
  const place = (i: number) => {
    const at = grid.places[i]!;
    return [Math.floor(at / grid.cols), at % grid.cols] as const;
  };
  const all: ColumnTerm[] = [
    { name: 'row', columns: rowWaves.map((wave) => columnOf(fixed, (i) => wave[place(i)[0]]!)) },
    { name: 'col', columns: colWaves.map((wave) => columnOf(fixed, (i) => wave[place(i)[1]]!)) },
    {
      name: 'row:col',
      columns: rowWaves
        .slice(0, mostCrossWaves)
        .flatMap((row) =>
          colWaves
            .slice(0, mostCrossWaves)
            .map((col) => columnOf(fixed, (i) => row[place(i)[0]]! * col[place(i)[1]]!)),
        ),
    },
  ];
  const terms = all.filter((term) => term.columns.length > 0);
  if (terms.length === 0) return null;
  const part = dropConfounded(terms, (kept) => absorbColumns(fixed, kept));
  return part.terms.length === 0 ? null : fitMixed(fixed, part);
}

/** A random term whose columns are written out. */
export interface ColumnTerm {
  readonly name: string;
  readonly columns: readonly Float64Array[];
}

/** √λ_k c_k for the longest waves, scaled so that the variances of all places average 1. */
function waves(places: number, most: number): Float64Array[] {
  const count = Math.min(places - 1, most);
  const out = Array.from({ length: Math.max(0, count) }, (_, w) => {
    const k = w + 1;
    const root = Math.sqrt(1 / (2 - 2 * Math.cos((Math.PI * k) / places)));
    return Float64Array.from(
      { length: places },
      (_, i) => root * Math.sqrt(2 / places) * Math.cos((Math.PI * k * (i + 0.5)) / places),
    );
  });
  const total = out.reduce((sum, wave) => sum + wave.reduce((own, value) => own + value * value, 0), 0);
  const scale = Math.sqrt(places / total);
  return out.map((wave) => wave.map((value) => value * scale));
}

function columnOf(fixed: FixedFit, value: (plot: number) => number): Float64Array {
  return Float64Array.from({ length: fixed.model.count }, (_, i) => value(i));
}

/** Cross products of columns written out, the fixed effects absorbed. */
function absorbColumns(fixed: FixedFit, terms: readonly ColumnTerm[]): AbsorbedTerms<ColumnTerm> {
  const columns = terms.flatMap((term) => term.columns);
  const starts = [0];
  for (const term of terms) starts.push(starts[starts.length - 1]! + term.columns.length);
  const q = columns.length;
  const { width } = fixed.model;
  const ztz = new Float64Array(q * q);
  const zmz = new Float64Array(q * q);
  const ztx = new Float64Array(q * width);
  const zmy = new Float64Array(q);
  const left = columns.map((column) => residualise(fixed, column));
  for (let i = 0; i < q; i++) {
    ztx.set(projectFixed(fixed.model, columns[i]!), i * width);
    zmy[i] = dot(left[i]!, fixed.residuals);
    for (let j = 0; j < q; j++) {
      ztz[i * q + j] = dot(columns[i]!, columns[j]!);
      zmz[i * q + j] = dot(left[i]!, left[j]!);
    }
  }
  return { terms, ztz, ztx, zmz, zmy, ymy: fixed.residualSs, residualDf: fixed.residualDf, starts };
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i++) sum += a[i]! * b[i]!;
  return sum;
}
