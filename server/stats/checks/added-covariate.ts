import { fUpper } from '#server/stats/distributions/f-distribution.ts';
import type { FTest } from './f-test.ts';
import { type CheckOutcome, notComputed } from './check-outcome.ts';

/** A linear model already fitted, as far as a check needs it. */
export interface ModelResiduals {
  /** Observed minus fitted, length n. */
  readonly residuals: ArrayLike<number>;
  readonly residualDf: number;
  /** Residuals of any vector of length n fitted by the same model: v ↦ (I − H) v. */
  readonly residualise: (values: Float64Array) => ArrayLike<number>;
}

/** Part of a covariate's sum of squares below which the model already holds it. */
const CONFOUNDED = 1e-10;

function sumOfProducts(a: ArrayLike<number>, b: ArrayLike<number>): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1) sum += (a[i] ?? 0) * (b[i] ?? 0);
  return sum;
}

/**
 * F test of one covariate added to a fitted model, from the model's residuals alone.
 * @param model the model without the covariate; residualDf at least 2
 * @param covariate length n
 * @returns slope (response per unit of the covariate) and its F test with one df
 * Source: Seber & Lee (2003), Linear Regression Analysis, section 3.7.
 */
export function testAddedCovariate(
  model: ModelResiduals,
  covariate: ArrayLike<number>,
): CheckOutcome<FTest & { readonly slope: number }> {
  if (model.residualDf < 2) return notComputed('no-residual-df');
  const values = Float64Array.from(covariate);
  const mean = values.reduce((sum, x) => sum + x, 0) / values.length;
  const centred = values.map((x) => x - mean);
  const own = model.residualise(centred);
  const ownSs = sumOfProducts(own, own);
  if (ownSs <= CONFOUNDED * sumOfProducts(centred, centred)) return notComputed('confounded');
  const rss = sumOfProducts(model.residuals, model.residuals);
  if (rss === 0) return notComputed('no-spread');
  const product = sumOfProducts(own, model.residuals);
  const df2 = model.residualDf - 1;
  const explained = (product * product) / ownSs;
  // the covariate explains all that is left: nothing remains to test it by
  if (!(explained < rss)) return notComputed('no-spread');
  const f = explained / ((rss - explained) / df2);
  return { computed: true, slope: product / ownSs, f, df1: 1, df2, p: fUpper(f, 1, df2) };
}
