import { type ModelResiduals, testAddedCovariate } from './added-covariate.ts';
import type { FTest } from './f-test.ts';
import type { CheckOutcome } from './check-outcome.ts';

/** A straight trend of the residuals along rows and along columns of the field. */
export interface FieldTrend {
  readonly row: CheckOutcome<FTest & { readonly slope: number }>;
  readonly column: CheckOutcome<FTest & { readonly slope: number }>;
}

/**
 * F tests of a straight trend across the field, after what the design's model already removes.
 * @param model the design's model
 * @param rows field row of each plot, length n
 * @param columns field column of each plot, length n
 * @returns slopes per row and per column, each tested alone; `confounded` where blocks already hold the trend
 */
export function fieldTrend(
  model: ModelResiduals,
  rows: ArrayLike<number>,
  columns: ArrayLike<number>,
): FieldTrend {
  return { row: testAddedCovariate(model, rows), column: testAddedCovariate(model, columns) };
}
