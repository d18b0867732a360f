import { type ModelResiduals, testAddedCovariate } from './added-covariate.ts';
import type { FTest } from './f-test.ts';
import type { CheckOutcome } from './check-outcome.ts';

/**
 * Tukey's one degree of freedom for non-additivity: do entries differ more where plots yield more?
 * The square of the fitted value is added to the model, which for a two-way table is the product of its effects.
 * @param model the additive model
 * @param fitted its fitted values, length n
 * @returns F test; `slope` is the coefficient of the squared fitted value
 * Source: Tukey (1949), Biometrics 5:232–242; Tukey (1955), query 113, Biometrics 11:111–113.
 */
export function nonAdditivity(
  model: ModelResiduals,
  fitted: ArrayLike<number>,
): CheckOutcome<FTest & { readonly slope: number }> {
  const values = Float64Array.from(fitted);
  const mean = values.reduce((sum, x) => sum + x, 0) / values.length;
  // Centred first: the square of a large offset would drown the curvature, and the model holds the linear part.
  return testAddedCovariate(
    model,
    values.map((x) => (x - mean) ** 2),
  );
}
