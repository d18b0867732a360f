import { testAddedCovariate } from '#server/stats/checks/added-covariate.ts';
import type { ModelResiduals } from '#server/stats/checks/added-covariate.ts';
import { moranI } from '#server/stats/checks/moran.ts';
import { nonAdditivity } from '#server/stats/checks/non-additivity.ts';
import { fitFixed, residualise } from './fixed-fit.ts';
import { buildRandomTerm, type RandomTerm } from './model-terms.ts';
import { buildRandomPart } from './random-part.ts';
import { placePlots, type FieldPlaces } from './field-places.ts';
import type { UsedPlots } from './read-plots.ts';
import { takeAsFixed, type TrialModel } from './trial-model.ts';
import type { FurtherChecks, TestResult } from './trial-result.ts';
import { fitComponents } from './variance-components.ts';

/** Plots above which Moran's I, which needs every pair of neighbours residualised, is left out. */
const mostMoranPlots = 800;
/** Entries above which repeatability, a second REML fit, is left out. */
const mostRepeatableEntries = 250;

/**
 * Checks that cost more than the analysis: non-additivity, trends and likeness of neighbours over the field,
 * repeatability. Blocks are taken as fixed, so that residuals are those within blocks.
 */
export function checkFurther(model: TrialModel, used: UsedPlots): FurtherChecks {
  const within = fitFixed(takeAsFixed(model, model.random), used.values);
  const canTest = within.residualDf >= 2 && !within.isExact;
  const places = placePlots(used.plots);
  const residuals: ModelResiduals = {
    residuals: within.residuals,
    residualDf: within.residualDf,
    residualise: (values) => residualise(within, values),
  };
  const fitted = within.y.map((value, i) => value - within.residuals[i]!);
  const additivity = canTest ? nonAdditivity(residuals, fitted) : null;
  return {
    nonAdditivity: additivity?.computed ? pickTest(additivity) : null,
    ...(places && canTest ? checkField(residuals, places) : { rowTrend: null, colTrend: null, moran: null }),
    repeatability: estimateRepeatability(model, used),
  };
}

function checkField(
  model: ModelResiduals,
  { rows, cols }: FieldPlaces,
): Pick<FurtherChecks, 'rowTrend' | 'colTrend' | 'moran'> {
  const row = testAddedCovariate(model, rows);
  const col = testAddedCovariate(model, cols);
  const moran = model.residuals.length <= mostMoranPlots ? moranI(model, rows, cols) : null;
  return {
    rowTrend: row.computed ? { slope: row.slope, ...pickTest(row) } : null,
    colTrend: col.computed ? { slope: col.slope, ...pickTest(col) } : null,
    moran: moran?.computed ? { i: moran.i, expected: moran.expected, z: moran.z, p: moran.p } : null,
  };
}

function pickTest({ f, df1, df2, p }: TestResult): TestResult {
  return { f, df1, df2, p };
}

/**
 * Repeatability of entry means: 1 − v̄/(2 σ²_g), v̄ the mean variance of a difference of two predicted entries, which
 * are random for this purpose. Null where entries or their variance cannot be told from the rest.
 * Source: Cullis, Smith & Coombes (2006), J. Agric. Biol. Environ. Stat. 11:381–393.
 */
function estimateRepeatability(model: TrialModel, used: UsedPlots): number | null {
  const [entry] = model.families[0]!.factors;
  const isOneFactor = model.families[0]!.factors.length === 1 && model.families.length === 1;
  if (!entry || !isOneFactor || entry.levels.length > mostRepeatableEntries) return null;
  const entryTerm = buildRandomTerm([entry], model.count);
  const random: readonly RandomTerm[] = [entryTerm, ...model.random];
  const fixed = fitFixed({ ...model, ...withoutTerm(model, entry.name), random }, used.values);
  if (fixed.residualDf === 0 || fixed.isExact) return null;
  const part = buildRandomPart(fixed);
  if (part.terms[0] !== entryTerm) return null;
  const { point, converged, isResidualZero } = fitComponents(part);
  if (!converged || isResidualZero) return null;
  const variance = point.theta[0]!;
  if (variance === 0) return 0;
  const e = entryTerm.size;
  const q = part.zmy.length;
  // C = σ²_g I − σ⁴_g S_gg is the covariance of the prediction errors
  let [trace, sum] = [e * variance, e * variance];
  for (let i = 0; i < e; i++)
    for (let j = 0; j < e; j++) {
      const reduction = variance * variance * point.s[i * q + j]!;
      sum -= reduction;
      if (i === j) trace -= reduction;
    }
  const meanVariance = (2 / (e - 1)) * (trace - sum / e);
  return 1 - meanVariance / (2 * variance);
}

/** The fixed terms but one, the columns renumbered. */
function withoutTerm(model: TrialModel, name: string): Pick<TrialModel, 'fixed' | 'width'> {
  let width = 0;
  const fixed = model.fixed
    .filter((term) => term.name !== name)
    .map((term) => {
      const moved = { ...term, offset: width };
      width += term.width;
      return moved;
    });
  return { fixed, width };
}
