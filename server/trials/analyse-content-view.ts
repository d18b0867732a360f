import {
  smallestShownDifference,
  type TestResult,
  type TrialAnalysis,
  type TrialNotice,
} from '#server/stats/engine.ts';
import type { TrialContent } from '#shared/trial-content.ts';
import type {
  AnalysisOutcome,
  AnalysisQuery,
  ComparisonMethod,
  PlotView,
  TrialAnalysisView,
} from '#shared/trial.ts';
import { analyseContent, type ContentAnalysis } from './analyse-content.ts';
import { cautionTrial, type CautionContext } from './analyse-content-cautions.ts';
import { comparePairs } from './analyse-content-compare.ts';
import { viewFactors, viewMeans } from './analyse-content-factors.ts';
import { checkContentLayout, nameSome } from './analyse-content-layout.ts';
import { viewSpatial } from './analyse-content-spatial.ts';
import type { ContentTrait } from './trial-content-store.ts';

/** What the content does not know of itself. */
export type ViewContext = CautionContext & {
  trialId: string;
  source: 'published' | 'draft';
  version: number | null;
  /** By plot number. */
  plotIds: ReadonlyMap<string, string>;
};

export type ViewQuery = {
  alpha?: number | undefined;
  comparison: ComparisonMethod;
  view: AnalysisQuery['view'];
};

type ViewFigures = Omit<
  TrialAnalysisView,
  | 'trialId'
  | 'traitSlug'
  | 'alpha'
  | 'comparison'
  | 'source'
  | 'version'
  | 'plotsTotal'
  | 'plotsUsed'
  | 'plotsExcluded'
  | 'plotsMissing'
  | 'layout'
  | 'plots'
  | 'cautions'
>;

/** Stands for the id of a plot that is stored nowhere yet. */
const noId = '00000000-0000-0000-0000-000000000000';

/** The analysis of one trait of a trial as the API gives it. Pure. */
export function viewAnalysis(
  content: TrialContent,
  trait: ContentTrait,
  { alpha, comparison, view }: ViewQuery,
  context: ViewContext,
): TrialAnalysisView {
  const analysis = analyseContent(content, trait, {
    ...(alpha !== undefined && { alpha }),
    withDunnett: comparison === 'dunnett',
    withBest: comparison === 'best',
    withChecks: true,
    // A spatial model costs as much as many analyses: the plain reading pays for it only where the field drifts.
    spatial: view === 'analysis' ? 'always' : 'when-drifting',
  });
  const { counts } = analysis;
  const figures = viewFigures(analysis, comparison, trait);
  return {
    trialId: context.trialId,
    traitSlug: trait.slug,
    alpha: analysis.alpha,
    comparison,
    source: context.source,
    version: context.version,
    plotsTotal: counts.total,
    plotsUsed: counts.used,
    plotsExcluded: counts.excluded,
    plotsMissing: counts.missing,
    ...figures,
    layout: content.kind === 'plots' ? checkContentLayout(content) : null,
    plots: viewPlots(content, trait.slug, analysis, context.plotIds),
    cautions: cautionTrial(analysis, {
      ...context,
      spatial: figures.spatial,
      isYield: trait.slug === 'yield',
    }),
  };
}

const nothing: ViewFigures = {
  kind: 'none',
  outcomes: [],
  method: null,
  grandMean: null,
  residualMs: null,
  residualDf: null,
  cvPercent: null,
  r2: null,
  components: [],
  anova: [],
  means: [],
  gaps: [],
  lsd: null,
  pairsDifferent: 0,
  pairsTotal: 0,
  detectable: null,
  ordinal: [],
  recoveredFrom: null,
  diagnostics: null,
  best: [],
  factors: [],
  spatial: [],
};

function viewFigures(
  analysis: ContentAnalysis,
  comparison: ComparisonMethod,
  trait: ContentTrait,
): ViewFigures {
  switch (analysis.kind) {
    case 'none':
      return { ...nothing, outcomes: [viewRefusal(analysis)] };
    case 'ordinal':
      return { ...nothing, kind: 'ordinal', ordinal: viewScores(analysis.result.entries) };
    case 'summary':
      return viewTable(analysis.result);
    case 'numeric':
      return viewNumeric(analysis, comparison, trait);
  }
}

function viewNumeric(
  { result, alpha, check }: Extract<ContentAnalysis, { kind: 'numeric' }>,
  comparison: ComparisonMethod,
  trait: ContentTrait,
): ViewFigures {
  const { fit } = result;
  const pairs = comparePairs(result, comparison, alpha, check);
  return {
    ...nothing,
    kind: 'numeric',
    outcomes: [...result.notices.map(viewNotice), ...(pairs.outcome === null ? [] : [pairs.outcome])],
    method: fit.method,
    grandMean: fit.grandMean,
    residualMs: fit.residualMs,
    residualDf: fit.residualDf,
    cvPercent: fit.cvPercent,
    r2: fit.r2,
    components: [...fit.components],
    anova: result.anova.map(({ term, df, denDf, ss, ms, f, p }) => ({ term, df, denDf, ss, ms, f, p })),
    means: viewMeans(result.means, pairs.letters),
    gaps: pairs.gaps,
    lsd: result.lsd[String(alpha)] ?? null,
    pairsDifferent: pairs.pairsDifferent,
    pairsTotal: pairs.pairsTotal,
    detectable: findDetectable(pairs.gaps, alpha),
    diagnostics: viewDiagnostics(result),
    best: result.best === null ? [] : viewBest(result.best, trait),
    factors: viewFactors(result, comparison, alpha),
    spatial: viewSpatial(result.spatial, alpha, trait.direction === 'lower' ? 'lower' : 'higher'),
  };
}

/** In order of merit: the best end of the trait first. */
function viewBest(
  best: NonNullable<TrialAnalysis['best']>,
  { direction }: ContentTrait,
): TrialAnalysisView['best'] {
  return [...best].sort((a, b) =>
    direction === 'lower' ? a.estimate - b.estimate : b.estimate - a.estimate,
  );
}

function viewTest(test: TestResult | null | undefined): TestResult | null {
  return test ? { f: test.f, df1: test.df1, df2: test.df2, p: test.p } : null;
}

function viewDiagnostics({ diagnostics, checks }: TrialAnalysis): TrialAnalysisView['diagnostics'] {
  const { shapiroWilk, brownForsythe, brownForsytheBlocks, largestStudentised } = diagnostics;
  return {
    shapiroWilk,
    brownForsythe,
    brownForsytheBlocks,
    largestStudentised,
    nonAdditivity: checks?.nonAdditivity ?? null,
    rowTrend: viewTest(checks?.rowTrend),
    colTrend: viewTest(checks?.colTrend),
    moran: checks?.moran ? { i: checks.moran.i, expected: checks.moran.expected, p: checks.moran.p } : null,
    repeatability: checks?.repeatability ?? null,
  };
}

/** What the trial could have shown with power .8, at the root mean square of its standard errors of a difference. */
function findDetectable(
  gaps: readonly { se: number | null; df: number | null }[],
  alpha: number,
): number | null {
  const known = gaps.flatMap(({ se, df }) => (se === null || df === null || se === 0 ? [] : [{ se, df }]));
  if (known.length === 0) return null;
  const se = Math.sqrt(known.reduce((sum, gap) => sum + gap.se ** 2, 0) / known.length);
  const df = known.reduce((sum, gap) => sum + gap.df, 0) / known.length;
  return smallestShownDifference({ se, df, alpha });
}

function viewRefusal({ reason, plotsAtFault }: Extract<ContentAnalysis, { kind: 'none' }>): AnalysisOutcome {
  if (plotsAtFault.length === 0) return { code: reason, values: {} };
  return { code: reason, values: { context: 'plots', plots: nameSome(plotsAtFault) } };
}

function viewNotice(notice: TrialNotice): AnalysisOutcome {
  switch (notice.code) {
    case 'entry-without-data':
    case 'means-not-estimable':
      return { code: notice.code, values: { entries: notice.entries.join(', ') } };
    case 'disconnected':
      return {
        code: notice.code,
        values: { parts: notice.parts.map((part) => part.join(', ')).join(' · ') },
      };
    case 'term-confounded':
      return { code: notice.code, values: { terms: notice.terms.join(', ') } };
    case 'component-not-identifiable':
    case 'component-at-zero':
      return { code: notice.code, values: { components: notice.components.join(', ') } };
    default:
      return { code: notice.code, values: {} };
  }
}

function viewScores(
  scores: Extract<ContentAnalysis, { kind: 'ordinal' }>['result']['entries'],
): TrialAnalysisView['ordinal'] {
  return scores
    .map((row) => ({
      entry: String(row.entry),
      n: row.n,
      median: row.median,
      low: row.min,
      high: row.max,
      counts: row.counts.map(({ score, count }) => ({ score, plots: count })),
    }))
    .toSorted((a, b) => a.median - b.median || (a.entry < b.entry ? -1 : 1));
}

function viewTable(result: Extract<ContentAnalysis, { kind: 'summary' }>['result']): ViewFigures {
  const { residualMs, errorDf, lsd } = result;
  return {
    ...nothing,
    kind: 'summary',
    outcomes: residualMs === null ? [{ code: 'summary-without-error', values: {} }] : [],
    grandMean: result.grandMean,
    residualMs,
    residualDf: residualMs === null ? null : errorDf,
    cvPercent: result.cvPercent,
    means: result.means
      .map(({ entry, mean, replicates }) => ({
        entry,
        n: replicates,
        mean,
        se: residualMs === null ? null : Math.sqrt(residualMs / replicates),
        df: residualMs === null ? null : errorDf,
        letters: '',
      }))
      .toSorted((a, b) => b.mean - a.mean),
    lsd: lsd === null ? null : { mean: lsd, min: lsd, max: lsd },
    recoveredFrom: result.recoveredFrom,
  };
}

function viewPlots(
  content: TrialContent,
  traitSlug: string,
  analysis: ContentAnalysis,
  plotIds: ReadonlyMap<string, string>,
): PlotView[] {
  const residuals = new Map(
    analysis.kind === 'numeric' ? analysis.result.residuals.map((row) => [row.plot, row.residual]) : [],
  );
  return content.plots.map((plot) => ({
    id: plotIds.get(plot.plotNumber) ?? noId,
    plotNumber: plot.plotNumber,
    entryLabel: plot.entry,
    rep: plot.rep,
    block: plot.block,
    row: plot.row,
    col: plot.col,
    mainLevel: plot.mainLevel,
    value: plot.values[traitSlug] ?? null,
    residual: residuals.get(plot.plotNumber) ?? null,
    excludedReason: plot.excludedReason,
  }));
}
