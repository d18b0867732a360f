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
import type { ContentTrait } from './trial-content-store.ts';

export type AnalyseOptions = {
  /** Level of "different"; the trial's own unless told. */
  alpha?: number;
  /** Whether the entries are compared with the check by Dunnett's test: it costs more than all the rest. */
  withDunnett?: boolean;
  /** Whether the field is looked over for trends, which costs more than the analysis itself. */
  withChecks?: boolean;
};

/** Plots of a trial in one trait. Excluded plots count as excluded whether or not they have a value. */
export type PlotCounts = { total: number; used: number; excluded: number; missing: number };

/** What one trait of a trial says; `none` with the reason where nothing can be said. */
export type ContentAnalysis = { alpha: number; counts: PlotCounts } & (
  | { kind: 'numeric'; result: TrialAnalysis; check: string | null }
  | { kind: 'ordinal'; result: OrdinalAnalysis }
  | { kind: 'summary'; result: SummaryAnalysis }
  | { kind: 'none'; reason: AnalysisErrorCode }
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
      if (column === undefined) return { kind: 'none', reason: 'no-values', alpha, counts };
      const result = analyseSummaryColumn(column, content.design, alpha);
      return { kind: 'summary', result, alpha, counts };
    }
    const design = { kind: content.design, factors: factorNames(content) };
    if (trait.kind === 'ordinal')
      return { kind: 'ordinal', result: analyseOrdinal(plots, design), alpha, counts };
    const check = content.entries.find((entry) => entry.isCheck)?.label ?? null;
    const result = analyseTrial(plots, design, {
      alpha,
      check: options.withDunnett && hasValue(plots, check) ? check : null,
      checks: options.withChecks ?? false,
      allowNegative: (trait.scaleMin ?? 0) < 0,
    });
    return { kind: 'numeric', result, check, alpha, counts };
  } catch (error) {
    if (error instanceof AnalysisError) return { kind: 'none', reason: error.code, alpha, counts };
    throw error;
  }
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
