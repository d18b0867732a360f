import type { FieldPlaces } from './field-places.ts';

/** The smallest rectangle of the field that holds all plots. */
export interface FieldGrid {
  readonly rows: number;
  readonly cols: number;
  /** place of each used plot in the rectangle, row by row */
  readonly places: Int32Array;
  /** places without a used plot */
  readonly absent: Int32Array;
}

export function buildGrid({ rows, cols }: FieldPlaces): FieldGrid {
  const [top, left] = [Math.min(...rows), Math.min(...cols)];
  const height = Math.max(...rows) - top + 1;
  const width = Math.max(...cols) - left + 1;
  const places = Int32Array.from(rows, (row, i) => (row - top) * width + (cols[i]! - left));
  const taken = new Set(places);
  const absent: number[] = [];
  for (let place = 0; place < height * width; place++) if (!taken.has(place)) absent.push(place);
  return { rows: height, cols: width, places, absent: Int32Array.from(absent) };
}

/**
 * L⁻¹ of R = LL' for first-order autoregression along rows and columns, applied in place to the columns of a matrix:
 * along each axis z_1 = x_1, z_i = (x_i − ρ x_{i−1})/√(1 − ρ²).
 * @param a grid places × count, row-major
 */
export function whiten(
  a: Float64Array,
  count: number,
  grid: FieldGrid,
  rhoRow: number,
  rhoCol: number,
): void {
  const { rows, cols } = grid;
  whitenAxis(a, rows, cols * count, 1, rhoRow);
  whitenAxis(a, cols, count, rows, rhoCol);
}

/** log|R| = rows' share (rows − 1) cols log(1 − ρ_r²) + the same for columns. */
export function logDetCorrelation({ rows, cols }: FieldGrid, rhoRow: number, rhoCol: number): number {
  return (rows - 1) * cols * Math.log1p(-rhoRow * rhoRow) + (cols - 1) * rows * Math.log1p(-rhoCol * rhoCol);
}

/** Steps along an axis of the given length; inner values stand side by side, outer blocks follow one another. */
function whitenAxis(a: Float64Array, length: number, inner: number, outer: number, rho: number): void {
  const scale = 1 / Math.sqrt(1 - rho * rho);
  for (let o = 0; o < outer; o++)
    for (let i = length - 1; i > 0; i--) {
      const at = (o * length + i) * inner;
      for (let k = 0; k < inner; k++) a[at + k] = (a[at + k]! - rho * a[at - inner + k]!) * scale;
    }
}
