import { friedman } from '#server/stats/checks/friedman.ts';
import { kruskalWallis } from '#server/stats/checks/kruskal-wallis.ts';
import { summariseOrdinal, type OrdinalSummary } from '#server/stats/checks/ordinal.ts';
import { sortLabels } from './model-terms.ts';
import { isUsed, readPlots } from './read-plots.ts';
import type { TrialDesign, TrialPlot } from './trial-data.ts';

/** Scores of an ordered scale: medians and counts, one test by ranks, and no least significant difference. */
export interface OrdinalAnalysis {
  readonly plots: number;
  readonly used: number;
  /** in table order; entries without a score are left out */
  readonly entries: readonly OrdinalSummary[];
  /** Friedman's over complete blocks, else Kruskal and Wallis'; null where the scores allow neither */
  readonly test: {
    readonly method: 'friedman' | 'kruskal-wallis';
    readonly statistic: number;
    readonly df: number;
    readonly p: number;
  } | null;
}

/**
 * @throws AnalysisError as analyseTrial for data that cannot be read
 */
export function analyseOrdinal(plots: readonly TrialPlot[], design: TrialDesign): OrdinalAnalysis {
  const used = readPlots(plots, true);
  const labels = sortLabels(new Set(used.plots.map((plot) => plot.entry)));
  const summaries = summariseOrdinal(
    used.values,
    used.plots.map((plot) => plot.entry),
  );
  return {
    plots: plots.length,
    used: used.plots.length,
    entries: labels.map((label) => summaries.find((row) => row.entry === label)!),
    test: testByBlocks(plots, design, labels) ?? testWithoutBlocks(used.values, used.plots),
  };
}

/** Friedman's test where every block holds every entry once. */
function testByBlocks(
  plots: readonly TrialPlot[],
  design: TrialDesign,
  labels: readonly string[],
): OrdinalAnalysis['test'] {
  if (design.kind === 'crd') return null;
  const blocks = new Map<string, (number | null)[]>();
  for (const plot of plots) {
    if (!isUsed(plot)) continue;
    const block = blockOf(plot, design);
    if (!block) return null;
    const scores = blocks.get(block) ?? labels.map(() => null);
    const at = labels.indexOf(plot.entry);
    if (scores[at] !== null) return null;
    scores[at] = plot.value;
    blocks.set(block, scores);
  }
  const test = friedman([...blocks.values()]);
  return test.computed ? { method: 'friedman', statistic: test.statistic, df: test.df, p: test.p } : null;
}

function testWithoutBlocks(values: Float64Array, plots: readonly TrialPlot[]): OrdinalAnalysis['test'] {
  const test = kruskalWallis(
    values,
    plots.map((plot) => plot.entry),
  );
  return test.computed
    ? { method: 'kruskal-wallis', statistic: test.statistic, df: test.df, p: test.p }
    : null;
}

/** What is a complete block in a design: the replicate of a resolvable one, the row of a square. */
function blockOf(plot: TrialPlot, { kind }: TrialDesign): string | null {
  const block = kind === 'incomplete-blocks' || kind === 'row-column' ? plot.rep : (plot.block ?? plot.rep);
  return kind === 'latin-square' ? String(plot.row ?? '') : (block ?? null);
}
