import { fitAutoregressive } from './autoregressive-fit.ts';
import { buildGrid, type FieldGrid } from './field-grid.ts';
import { placePlots } from './field-places.ts';
import { estimateFixedMeans } from './fixed-analysis.ts';
import { fitFixed, type FixedFit } from './fixed-fit.ts';
import { tabulateFamily, type MeanEstimates } from './gap-table.ts';
import { estimateMixedMeans } from './kenward-roger.ts';
import { buildFamily } from './mean-family.ts';
import type { UsedPlots } from './read-plots.ts';
import { fitSurface } from './surface-fit.ts';
import type { TrialModel } from './trial-model.ts';
import type { FamilyTable, FitSummary, SpatialComparison, SpatialModel } from './trial-result.ts';

/** Sizes above which spatial models would keep a person waiting. */
const mostPlaces = 600;
const mostColumns = 160;
const mostAbsent = 60;

/**
 * Models of the field's trend beside the design's. Random blocks of the design give way to the trend; fixed ones stay.
 * Null for a split plot, whose main plots need their own error, and where the field or the error is not known.
 * @param design the design's own fit and table
 */
export function compareSpatial(
  model: TrialModel,
  used: UsedPlots,
  design: { readonly summary: FitSummary; readonly table: FamilyTable },
  alpha: number,
): SpatialComparison | null {
  const places = placePlots(used.plots);
  if (!places || model.design.kind === 'split-plot') return null;
  const grid = buildGrid(places);
  const isTooLarge =
    grid.rows * grid.cols > mostPlaces || model.width > mostColumns || grid.absent.length > mostAbsent;
  if (isTooLarge || (grid.rows < 2 && grid.cols < 2)) return null;
  const fixed = fitFixed({ ...model, random: [] }, used.values);
  if (fixed.residualDf < 4 || fixed.isExact) return null;
  const own = describeDesign(fixed, design);
  if (!own) return null;
  const models = [
    own,
    describeAutoregressive(fixed, grid, alpha),
    describeSurface(fixed, grid, alpha),
  ].filter((one) => one !== null);
  const preferred = models.reduce((best, one) => (one.aic < best.aic ? one : best));
  return { models, preferred: preferred.code };
}

function describeDesign(
  fixed: FixedFit,
  { summary, table }: { readonly summary: FitSummary; readonly table: FamilyTable },
): SpatialModel | null {
  const { residualMs, components } = summary;
  if (residualMs === null) return null;
  const logLik = summary.method === 'reml' ? summary.logLik : restrictedLogLik(fixed);
  if (logLik === null) return null;
  return {
    code: 'design',
    ...rate(logLik, components.length),
    residualMs,
    components,
    correlations: null,
    ...pickTable(table),
  };
}

/** The restricted log-likelihood of a fixed model, ½ log|X'X| added. */
function restrictedLogLik({ residualDf, residualSs }: FixedFit): number {
  return -0.5 * residualDf * (Math.log((2 * Math.PI * residualSs) / residualDf) + 1);
}

function describeAutoregressive(fixed: FixedFit, grid: FieldGrid, alpha: number): SpatialModel | null {
  const found = fitAutoregressive(fixed, grid);
  if (!found) return null;
  const residualMs = found.fit.residualSs / fixed.residualDf;
  const axes = (grid.rows > 1 ? 1 : 0) + (grid.cols > 1 ? 1 : 0);
  return {
    code: 'autoregressive',
    ...rate(found.logLik, 1 + axes),
    residualMs,
    components: [{ name: 'residual', variance: residualMs }],
    correlations: { row: found.rhoRow, col: found.rhoCol },
    ...tabulate(found.fit, (family) => estimateFixedMeans(found.fit, family), alpha),
  };
}

function describeSurface(fixed: FixedFit, grid: FieldGrid, alpha: number): SpatialModel | null {
  const mixed = fitSurface(fixed, grid);
  if (!mixed || !mixed.components.converged) return null;
  const { theta } = mixed;
  const residualMs = theta[theta.length - 1]!;
  return {
    code: 'surface',
    ...rate(mixed.components.point.logLik, theta.length),
    residualMs,
    components: [...mixed.random.terms.map(({ name }) => name), 'residual'].map((name, k) => ({
      name,
      variance: theta[k]!,
    })),
    correlations: null,
    ...tabulate(fixed, (family) => estimateMixedMeans(mixed, family), alpha),
  };
}

function rate(logLik: number, parameters: number): Pick<SpatialModel, 'aic' | 'logLik' | 'parameters'> {
  return { aic: -2 * logLik + 2 * parameters, logLik, parameters };
}

function tabulate(
  fit: FixedFit,
  estimate: (family: ReturnType<typeof buildFamily>) => MeanEstimates,
  alpha: number,
): FamilyTable {
  const { name, factors } = fit.model.families[0]!;
  return pickTable(tabulateFamily(estimate(buildFamily(fit, name, factors)), alpha));
}

function pickTable({ means, gaps, lsd, groups }: FamilyTable): FamilyTable {
  return { means, gaps, lsd, groups };
}
