import { checkLayout, type LayoutFinding, type PlacedPlot } from '#server/stats/engine.ts';
import type { TrialContent } from '#shared/trial-content.ts';
import type { LayoutFindingView } from '#shared/trial.ts';

type Plot = TrialContent['plots'][number];

/** Names in one sentence; beyond these a list says nothing more. */
const mostNames = 12;

/** Which grouping of plots must hold every entry exactly once, and which one links the entries, if any. */
type DesignCheck = {
  complete: readonly ((plot: Plot) => string | null)[];
  linking: (plot: Plot) => string | null;
};

const none = () => null;
const blockOrRep = (plot: Plot) => plot.block ?? plot.rep;
const byBlock: DesignCheck = { complete: [blockOrRep], linking: blockOrRep };
const within = (rep: string | null, part: string | null) =>
  part === null ? null : rep === null ? part : `${rep} / ${part}`;

const designChecks: Record<TrialContent['design'], DesignCheck> = {
  crd: { complete: [], linking: none },
  rcbd: byBlock,
  strips: byBlock,
  factorial: byBlock,
  'latin-square': { complete: [(plot) => textOf(plot.row), (plot) => textOf(plot.col)], linking: none },
  'incomplete-blocks': { complete: [(plot) => plot.rep], linking: (plot) => within(plot.rep, plot.block) },
  'row-column': { complete: [(plot) => plot.rep], linking: (plot) => within(plot.rep, textOf(plot.row)) },
  'split-plot': {
    complete: [(plot) => within(blockOrRep(plot), plot.mainLevel)],
    linking: (plot) => within(blockOrRep(plot), plot.mainLevel),
  },
};

/**
 * Whether the field lies as its design asks: each entry once in each complete block, each place taken once, equal
 * replication, all entries linked. Every plot that was sown counts, measured or not.
 */
export function checkContentLayout(content: TrialContent): LayoutFindingView[] {
  const { complete, linking } = designChecks[content.design];
  const place = (block: (plot: Plot) => string | null): PlacedPlot[] =>
    content.plots.map((plot) => placePlot(plot, content.design, block(plot)));
  const found = [
    ...checkLayout(place(linking), { completeBlocks: false }),
    ...complete.flatMap((block) =>
      checkLayout(place(block), { completeBlocks: true }).filter(({ code }) => ofBlocks.has(code)),
    ),
  ];
  return viewFindings(found.filter((finding) => !isCountedWithinReps(finding, content.plots)));
}

const ofBlocks: ReadonlySet<LayoutFinding['code']> = new Set([
  'entry-repeated-in-block',
  'entry-missing-from-block',
]);

const textOf = (value: number | null) => (value === null ? null : String(value));

function placePlot(plot: Plot, design: TrialContent['design'], block: string | null): PlacedPlot {
  const levels = design === 'factorial' && plot.factorLevels !== null ? Object.values(plot.factorLevels) : [];
  return {
    plot: plot.plotNumber,
    entry: levels.length > 0 ? levels.join(' · ') : plot.entry,
    ...(block !== null && { block }),
    ...(plot.row !== null && plot.col !== null && { row: plot.row, column: plot.col }),
  };
}

/** Rows and columns may be counted anew in each replicate: then one place stands for several. */
function isCountedWithinReps(finding: LayoutFinding, plots: readonly Plot[]): boolean {
  if (finding.code !== 'position-taken-twice') return false;
  const reps = finding.plots.map((number) => plots.find((plot) => plot.plotNumber === number)?.rep ?? null);
  return reps.every((rep) => rep !== null) && new Set(reps).size === reps.length;
}

/** Findings as the page tells them; those of one kind about many entries or blocks are one sentence. */
function viewFindings(findings: readonly LayoutFinding[]): LayoutFindingView[] {
  const single: string[] = [];
  const missing = new Map<string, string[]>();
  const views: LayoutFindingView[] = [];
  for (const finding of findings) {
    const { code } = finding;
    switch (code) {
      case 'plot-named-twice':
        views.push({ code, values: { plot: finding.plot, times: finding.times } });
        break;
      case 'position-taken-twice': {
        const { row, column, plots } = finding;
        views.push({ code, values: { row, column, plots: nameSome(plots) } });
        break;
      }
      case 'entry-repeated-in-block': {
        const { entry, block, plots } = finding;
        views.push({ code, values: { entry, block, plots: nameSome(plots) } });
        break;
      }
      case 'unequal-replication': {
        const { fewest, most, entries } = finding;
        views.push({ code, values: { fewest, most, entries: nameSome(entries) } });
        break;
      }
      case 'entries-disconnected':
        views.push({ code, values: { parts: finding.parts.map(nameSome).join(' · ') } });
        break;
      case 'entry-missing-from-block':
        missing.set(finding.entry, [...(missing.get(finding.entry) ?? []), finding.block]);
        break;
      case 'entry-not-replicated':
        single.push(finding.entry);
    }
  }
  for (const [entry, blocks] of missing)
    views.push({
      code: 'entry-missing-from-block',
      values: { entry, blocks: nameSome(blocks), count: blocks.length },
    });
  if (single.length > 0)
    views.push({
      code: 'entry-not-replicated',
      values: { entries: nameSome(single), count: single.length },
    });
  return views;
}

/** The names of one sentence, cut short where there are many. */
export function nameSome(names: readonly string[]): string {
  return names.length > mostNames ? `${names.slice(0, mostNames).join(', ')}…` : names.join(', ');
}
