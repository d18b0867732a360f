import { smallestShownDifference, type TrialNotice } from '#server/stats/engine.ts';
import type { TrialContent } from '#shared/trial-content.ts';
import type { AnalysisOutcome, ComparisonMethod, PlotView, TrialAnalysisView } from '#shared/trial.ts';
import { analyseContent, type ContentAnalysis } from './analyse-content.ts';
import { cautionTrial, type CautionContext } from './analyse-content-cautions.ts';
import { comparePairs } from './analyse-content-compare.ts';
import type { ContentTrait } from './trial-content-store.ts';

/** What the content does not know of itself. */
export type ViewContext = CautionContext & {
  trialId: string;
  source: 'published' | 'draft';
  version: number | null;
  /** By plot number. */
  plotIds: ReadonlyMap<string, string>;
};

export type ViewQuery = { alpha?: number | undefined; comparison: ComparisonMethod };

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
  | 'plots'
  | 'cautions'
>;

/** Stands for the id of a plot that is stored nowhere yet. */
const noId = '00000000-0000-0000-0000-000000000000';

/** The analysis of one trait of a trial as the API gives it. Pure. */
export function viewAnalysis(
  content: TrialContent,
  trait: ContentTrait,
  { alpha, comparison }: ViewQuery,
  context: ViewContext,
): TrialAnalysisView {
  const analysis = analyseContent(content, trait, {
    ...(alpha !== undefined && { alpha }),
    withDunnett: comparison === 'dunnett',
    withChecks: true,
  });
  const { counts } = analysis;
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
    ...viewFigures(analysis, comparison),
    plots: viewPlots(content, trait.slug, analysis, context.plotIds),
    cautions: cautionTrial(analysis, context),
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
  spatial: [],
};

function viewFigures(analysis: ContentAnalysis, comparison: ComparisonMethod): ViewFigures {
  switch (analysis.kind) {
    case 'none':
      return { ...nothing, outcomes: [{ code: analysis.reason, values: {} }] };
    case 'ordinal':
      return { ...nothing, kind: 'ordinal', ordinal: viewScores(analysis.result.entries) };
    case 'summary':
      return viewTable(analysis.result);
    case 'numeric':
      return viewNumeric(analysis, comparison);
  }
}

function viewNumeric(
  { result, alpha, check }: Extract<ContentAnalysis, { kind: 'numeric' }>,
  comparison: ComparisonMethod,
): ViewFigures {
  const { fit, diagnostics } = result;
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
    means: result.means
      .map(({ entry, n, mean, se, df }) => ({
        entry,
        n,
        mean,
        se,
        df,
        letters: pairs.letters.get(entry) ?? '',
      }))
      .toSorted((a, b) => (b.mean ?? Number.NEGATIVE_INFINITY) - (a.mean ?? Number.NEGATIVE_INFINITY)),
    gaps: pairs.gaps,
    lsd: result.lsd[String(alpha)] ?? null,
    pairsDifferent: pairs.pairsDifferent,
    pairsTotal: pairs.pairsTotal,
    detectable: findDetectable(pairs.gaps, alpha),
    diagnostics: {
      shapiroWilk: diagnostics.shapiroWilk,
      brownForsythe: diagnostics.brownForsythe,
      largestStudentised: diagnostics.largestStudentised,
    },
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
