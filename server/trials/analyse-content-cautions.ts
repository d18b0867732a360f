import { makeCaution, type Caution } from '#shared/caution.ts';
import type { SpatialModelView } from '#shared/trial.ts';
import type { ContentAnalysis } from './analyse-content.ts';
import { cautionTrend, hasFieldTrend, residualLevel } from './analyse-content-spatial.ts';
import { findEntryTest } from './trial-fit.ts';

/** p of the largest studentised residual, already multiplied by the number of plots. */
const outlierLevel = 0.05;

export type CautionContext = { cvLimitPercent: number; isSingleAuthor: boolean };

/** Models of the field's trend, where they were fitted, and whether the trait is told in t/ha. */
type TrendContext = { spatial: readonly SpatialModelView[]; isYield: boolean };

/** Where the evidence of one trial stops, for one trait. */
export function cautionTrial(
  analysis: ContentAnalysis,
  { cvLimitPercent, isSingleAuthor, spatial, isYield }: CautionContext & TrendContext,
): Caution[] {
  return [
    ...cautionPrecision(analysis, cvLimitPercent),
    ...cautionResiduals(analysis),
    ...(analysis.kind === 'numeric' && hasFieldTrend(analysis.result.checks)
      ? [cautionTrend(spatial, isYield)]
      : []),
    ...cautionPlots(analysis),
    ...(analysis.kind === 'summary' ? cautionTable(analysis.result) : []),
    ...(isSingleAuthor ? [makeCaution('single-author', 'note', {})] : []),
  ];
}

function cautionPrecision(analysis: ContentAnalysis, limit: number): Caution[] {
  if (analysis.kind !== 'numeric' && analysis.kind !== 'summary') return [];
  const cautions: Caution[] = [];
  const cv = analysis.kind === 'numeric' ? analysis.result.fit.cvPercent : analysis.result.cvPercent;
  if (cv !== null && cv > limit) cautions.push(makeCaution('trial-weak-cv', 'warning', { cv, limit }));
  const p = analysis.kind === 'numeric' ? (findEntryTest(analysis.result.anova)?.p ?? null) : null;
  if (p !== null && p >= analysis.alpha) cautions.push(makeCaution('trial-f-not-significant', 'note', { p }));
  return cautions;
}

function cautionResiduals(analysis: ContentAnalysis): Caution[] {
  if (analysis.kind !== 'numeric') return [];
  const { shapiroWilk, brownForsythe, largestStudentised } = analysis.result.diagnostics;
  const cautions: Caution[] = [];
  if (shapiroWilk !== null && shapiroWilk.p < residualLevel)
    cautions.push(makeCaution('residuals-not-normal', 'note', { p: shapiroWilk.p }));
  if (brownForsythe !== null && brownForsythe.p < residualLevel)
    cautions.push(makeCaution('unequal-spread', 'note', { p: brownForsythe.p }));
  if (largestStudentised !== null && largestStudentised.pBonferroni < outlierLevel) {
    const { plot, value, pBonferroni } = largestStudentised;
    cautions.push(makeCaution('outlying-plot', 'warning', { plot, value, p: pBonferroni }));
  }
  return cautions;
}

function cautionPlots({ counts }: ContentAnalysis): Caution[] {
  const { total, excluded, missing } = counts;
  return [
    ...(excluded > 0 ? [makeCaution('plots-excluded', 'note', { count: excluded, total })] : []),
    ...(missing > 0 ? [makeCaution('plots-missing', 'note', { count: missing, total })] : []),
  ];
}

function cautionTable(result: Extract<ContentAnalysis, { kind: 'summary' }>['result']): Caution[] {
  const summary = makeCaution('summary-trial', 'note', {});
  const { contradiction } = result;
  if (contradiction === null) return [summary];
  return [summary, makeCaution('summary-contradiction', 'warning', contradiction)];
}
