import {
  AnalysisError,
  analyseOrdinal,
  analyseTrial,
  type AnalysisErrorCode,
  type OrdinalAnalysis,
  type TrialAnalysis,
  type TrialPlot,
} from '#server/stats/engine.ts';
import type { TrialContent } from '#shared/trial-content.ts';
import { analyseSummaryColumn, type SummaryAnalysis } from './analyse-content-summary.ts';
import { hasFieldTrend } from './analyse-content-spatial.ts';
import type { ContentTrait } from './trial-content-store.ts';

export type AnalyseOptions = {
  /** Level of "different"; the trial's own unless told. */
  alpha?: number;
  /** Whether the entries are compared with the check by Dunnett's test: it costs more than all the rest. */
  withDunnett?: boolean;
  /** Whether the field is looked over for trends, which costs more than the analysis itself. */
  withChecks?: boolean;
  /** Whether every entry is compared with the best of the others. */
  withBest?: boolean;
  /**
   * Models of the field's trend beside the design's, each as costly as many analyses: `always`, or only `when-drifting`,
   * where the checks have found a trend that asks for them.
   */
  spatial?: 'always' | 'when-drifting';
};

/** Plots of a trial in one trait. Excluded plots count as excluded whether or not they have a value. */
export type PlotCounts = { total: number; used: number; excluded: number; missing: number };

/** What one trait of a trial says; `none` with the reason where nothing can be said. */
export type ContentAnalysis = { alpha: number; counts: PlotCounts } & (
  | { kind: 'numeric'; result: TrialAnalysis; check: string | null }
  | { kind: 'ordinal'; result: OrdinalAnalysis }
  | { kind: 'summary'; result: SummaryAnalysis }
  | { kind: 'none'; reason: AnalysisErrorCode; plotsAtFault: string[] }
);

/**
 * Analyses one trait of a trial by the design it was laid out in. Pure: the same content gives the same result,
 * published or at the desk.
 */
export function analyseContent(
  content: TrialContent,
  trait: ContentTrait,
  options: AnalyseOptions = {},
): ContentAnalysis {
  const alpha = options.alpha ?? content.alpha;
  const plots = toEnginePlots(content, trait.slug);
  const counts = countPlots(plots);
  try {
    if (content.kind === 'summary') {
      const column = content.summary.find((part) => part.trait === trait.slug);
      if (column === undefined) return { kind: 'none', reason: 'no-values', plotsAtFault: [], alpha, counts };
      const result = analyseSummaryColumn(column, content.design, alpha);
      return { kind: 'summary', result, alpha, counts };
    }
    const design = { kind: content.design, factors: factorNames(content) };
    if (trait.kind === 'ordinal')
      return { kind: 'ordinal', result: analyseOrdinal(plots, design), alpha, counts };
    const check = content.entries.find((entry) => entry.isCheck)?.label ?? null;
    const asked = {
      alpha,
      check: options.withDunnett && hasValue(plots, check) ? check : null,
      checks: options.withChecks ?? false,
      // Of a trait without a better end there is no best.
      comparisons: (options.withBest ?? false) && trait.direction !== 'neutral',
      better: trait.direction === 'lower' ? 'lower' : 'higher',
      spatial: options.spatial === 'always',
      allowNegative: (trait.scaleMin ?? 0) < 0,
    } as const;
    const first = analyseTrial(plots, design, asked);
    const needsTrend = options.spatial === 'when-drifting' && hasFieldTrend(first.checks);
    const spatial = needsTrend
      ? analyseTrial(plots, design, { alpha, spatial: true, allowNegative: asked.allowNegative }).spatial
      : first.spatial;
    return { kind: 'numeric', result: { ...first, spatial }, check, alpha, counts };
  } catch (error) {
    if (!(error instanceof AnalysisError)) throw error;
    return { kind: 'none', reason: error.code, plotsAtFault: namePlots(plots, error.rows), alpha, counts };
  }
}

/** The engine counts rows from 1. */
function namePlots(plots: readonly TrialPlot[], rows: readonly number[]): string[] {
  return rows.flatMap((row) => plots[row - 1]?.plot ?? []);
}

function toEnginePlots(content: TrialContent, traitSlug: string): TrialPlot[] {
  return content.plots.map((plot) => ({
    plot: plot.plotNumber,
    entry: plot.entry,
    rep: plot.rep,
    block: plot.block,
    row: plot.row,
    col: plot.col,
    main: plot.mainLevel,
    factors: plot.factorLevels,
    value: plot.values[traitSlug] ?? null,
    excluded: plot.excludedReason,
  }));
}

function countPlots(plots: readonly TrialPlot[]): PlotCounts {
  const excluded = plots.filter((plot) => plot.excluded).length;
  const used = plots.filter((plot) => !plot.excluded && plot.value !== null).length;
  return { total: plots.length, used, excluded, missing: plots.length - used - excluded };
}

function factorNames(content: TrialContent): string[] {
  return Object.keys(content.plots.find((plot) => plot.factorLevels !== null)?.factorLevels ?? {}).sort();
}

function hasValue(plots: readonly TrialPlot[], entry: string | null): boolean {
  return plots.some((plot) => plot.entry === entry && plot.value !== null && !plot.excluded);
}
