import { AnalysisError } from '#server/stats/analysis-error.ts';
import { compareAllWithBest } from './best-comparison.ts';
import { compareWithCheck } from './check-comparison.ts';
import { describeFixedResiduals, estimateFixedMeans, summariseFixedFit } from './fixed-analysis.ts';
import { fitFixed, type FixedFit } from './fixed-fit.ts';
import { checkFurther } from './further-checks.ts';
import { tabulateFamily, type MeanEstimates } from './gap-table.ts';
import { estimateMixedMeans, testMixedTerms } from './kenward-roger.ts';
import { buildFamily, type MeanFamily } from './mean-family.ts';
import { describeMixedResiduals, noticeComponents, summariseMixedFit } from './mixed-analysis.ts';
import { fitMixed, prepareRandom, type MixedFit } from './mixed-fit.ts';
import { sortLabels } from './model-terms.ts';
import { readPlots, type UsedPlots } from './read-plots.ts';
import { compareSpatial } from './spatial-models.ts';
import type { TrialDesign, TrialOptions, TrialPlot } from './trial-data.ts';
import { diagnose, type FitResiduals } from './trial-diagnostics.ts';
import { buildModel, takeAsFixed, type TrialModel } from './trial-model.ts';
import { noticeGaps } from './trial-notices.ts';
import type { FamilyTable, FitSummary, TrialAnalysis, TrialNotice, VarianceRow } from './trial-result.ts';
import { tabulateVariance } from './variance-table.ts';

/** A fit of either kind, as far as the tables need it. */
interface ModelAnalysis {
  /** the fixed part, which says what is estimable */
  readonly fixed: FixedFit;
  readonly summary: FitSummary;
  readonly anova: readonly VarianceRow[];
  readonly estimate: (family: MeanFamily) => MeanEstimates;
  readonly residuals: FitResiduals;
  readonly notices: readonly TrialNotice[];
}

/**
 * One trial, one trait: adjusted means, all gaps with every comparison, the analysis of variance and the checks.
 * Pure: no rounding, no language. What cannot be estimated is marked so in the result.
 * @throws AnalysisError where the data cannot be analysed at all, with the rows at fault
 */
export function analyseTrial(
  plots: readonly TrialPlot[],
  design: TrialDesign,
  options: TrialOptions = {},
): TrialAnalysis {
  const alpha = options.alpha ?? 0.05;
  if (!(alpha > 0 && alpha < 1)) throw new AnalysisError('bad-option', 'alpha must lie between 0 and 1');
  const used = readPlots(plots, options.allowNegative ?? false);
  const model = buildModel(used, design);
  const analysis = analyseModel(fitFixed(model, used.values), used);
  const [own, ...others] = model.families.map((family) =>
    buildFamily(analysis.fixed, family.name, family.factors),
  );
  const missing = labelsWithoutData(plots, used, model);
  const order = missing.length === 0 ? own!.labels : sortLabels([...own!.labels, ...missing]);
  const estimates = analysis.estimate(own!);
  const table = tabulateFamily(estimates, alpha, missing, order);
  const factors = Object.fromEntries(
    others.map((family) => [family.name, withoutNotices(tabulateFamily(analysis.estimate(family), alpha))]),
  );
  const { diagnostics, residuals } = diagnose(used, model, analysis.residuals);
  return {
    design: design.kind,
    fit: analysis.summary,
    anova: analysis.anova,
    means: table.means,
    gaps: table.gaps,
    lsd: table.lsd,
    dunnett: options.check ? compareWithCheck(estimates, options.check, missing) : null,
    best: options.comparisons ? compareAllWithBest(estimates, alpha, options.better ?? 'higher') : null,
    checks: options.checks ? checkFurther(model, used) : null,
    spatial: options.spatial
      ? compareSpatial(model, used, { summary: analysis.summary, table }, alpha)
      : null,
    groups: table.groups,
    factors,
    diagnostics,
    residuals,
    notices: [...noticeGaps(analysis.fixed, own!, missing), ...analysis.notices, ...table.notices],
  };
}

/** By REML where the design has random effects and the data can tell them, else by least squares. */
function analyseModel(fixed: FixedFit, used: UsedPlots): ModelAnalysis {
  const random = prepareRandom(fixed);
  if (random && random.terms.length > 0) {
    const mixed = fitMixed(fixed, random);
    if (mixed) return analyseMixed(mixed, used);
    // nothing is left over once the random terms are known: as fixed terms they say so exactly
    return analyseFixed(fitFixed(takeAsFixed(fixed.model, random.terms), used.values), used, []);
  }
  const components = random ? random.notIdentifiable : [];
  return analyseFixed(
    fixed,
    used,
    components.length > 0 ? [{ code: 'component-not-identifiable', components }] : [],
  );
}

function analyseFixed(fit: FixedFit, used: UsedPlots, notices: readonly TrialNotice[]): ModelAnalysis {
  return {
    fixed: fit,
    summary: summariseFixedFit(fit, used.total),
    anova: tabulateVariance(fit),
    estimate: (family) => estimateFixedMeans(fit, family),
    residuals: describeFixedResiduals(fit),
    notices,
  };
}

function analyseMixed(fit: MixedFit, used: UsedPlots): ModelAnalysis {
  return {
    fixed: fit.fixed,
    summary: summariseMixedFit(fit, used.total),
    anova: testMixedTerms(fit),
    estimate: (family) => estimateMixedMeans(fit, family),
    residuals: describeMixedResiduals(fit),
    notices: noticeComponents(fit),
  };
}

/** Entries that were sown but have no used plot; factors' levels are not asked for. */
function labelsWithoutData(plots: readonly TrialPlot[], used: UsedPlots, model: TrialModel): string[] {
  const family = model.families[0]!;
  if (family.name !== (model.design.termNames?.entry ?? 'entry')) return [];
  const present = new Set(used.plots.map((plot) => plot.entry));
  return [...new Set(plots.map((plot) => plot.entry))].filter((entry) => !present.has(entry));
}

function withoutNotices({ means, gaps, lsd, groups }: FamilyTable): FamilyTable {
  return { means, gaps, lsd, groups };
}
