import { normalUpper } from '#server/stats/distributions/normal.ts';
import type { ModelResiduals } from './added-covariate.ts';
import { type CheckOutcome, notComputed } from './check-outcome.ts';

/** Positions of the plots that share a side with each plot. */
function rookNeighbours(rows: ArrayLike<number>, columns: ArrayLike<number>): number[][] {
  const at = new Map<string, number[]>();
  const key = (row: number, column: number): string => `${row}:${column}`;
  for (let i = 0; i < rows.length; i += 1) {
    const place = key(rows[i] ?? 0, columns[i] ?? 0);
    at.set(place, [...(at.get(place) ?? []), i]);
  }
  return Array.from({ length: rows.length }, (_, i) => {
    const row = rows[i] ?? 0;
    const column = columns[i] ?? 0;
    const sides = [key(row - 1, column), key(row + 1, column), key(row, column - 1), key(row, column + 1)];
    return sides.flatMap((side) => at.get(side) ?? []);
  });
}

/** (I − H) W, column by column: rows of the result are columns of W fitted by the model. */
function residualisedWeights(neighbours: readonly number[][], model: ModelResiduals): ArrayLike<number>[] {
  return neighbours.map((own) => {
    const column = new Float64Array(neighbours.length);
    for (const j of own) column[j] = (column[j] ?? 0) + 1;
    return model.residualise(column);
  });
}

/**
 * Moran's I of the residuals over the field map, with neighbours that share a side.
 * Residuals of a fitted model are never independent, so expectation and variance are those of residuals of
 * this very model under independent normal errors.
 * @param model the design's model
 * @param rows field row of each plot, length n
 * @param columns field column of each plot, length n
 * @returns I, its expectation and variance, the standard deviate z and P(Z > z): small where neighbours are alike
 * Source: Cliff & Ord (1981), Spatial Processes, section 8.3.
 */
export function moranI(
  model: ModelResiduals,
  rows: ArrayLike<number>,
  columns: ArrayLike<number>,
): CheckOutcome<{
  readonly i: number;
  readonly expected: number;
  readonly variance: number;
  readonly z: number;
  readonly p: number;
}> {
  const n = model.residuals.length;
  const df = model.residualDf;
  if (df < 2) return notComputed('no-residual-df');
  const neighbours = rookNeighbours(rows, columns);
  const links = neighbours.reduce((sum, own) => sum + own.length, 0);
  if (links === 0) return notComputed('no-neighbours');
  let cross = 0;
  let rss = 0;
  for (let i = 0; i < n; i += 1) {
    const residual = model.residuals[i] ?? 0;
    rss += residual * residual;
    for (const j of neighbours[i] ?? []) cross += residual * (model.residuals[j] ?? 0);
  }
  if (rss === 0) return notComputed('no-spread');
  const weights = residualisedWeights(neighbours, model);
  let trace = 0;
  let traceSquare = 0;
  weights.forEach((column, j) => {
    trace += column[j] ?? 0;
    for (let i = 0; i < n; i += 1) traceSquare += (column[i] ?? 0) * (weights[i]?.[j] ?? 0);
  });
  const scale = n / links;
  const expected = (scale * trace) / df;
  const variance =
    (scale * scale * (2 * traceSquare + trace * trace)) / (df * (df + 2)) - expected * expected;
  if (!(variance > 1e-12)) return notComputed('confounded');
  const i = (scale * cross) / rss;
  const z = (i - expected) / Math.sqrt(variance);
  return { computed: true, i, expected, variance, z, p: normalUpper(z) };
}
