/** Where a plot stands and what grows on it; labels as the trial gives them. */
export interface PlacedPlot {
  readonly plot: string;
  readonly entry: string;
  readonly block?: string;
  readonly row?: number;
  readonly column?: number;
}

/** Something about the layout that the design named for the trial does not allow, or that weakens it. */
export type LayoutFinding =
  | { readonly code: 'plot-named-twice'; readonly plot: string; readonly times: number }
  | {
      readonly code: 'position-taken-twice';
      readonly row: number;
      readonly column: number;
      readonly plots: readonly string[];
    }
  | {
      readonly code: 'entry-repeated-in-block';
      readonly entry: string;
      readonly block: string;
      readonly plots: readonly string[];
    }
  | { readonly code: 'entry-missing-from-block'; readonly entry: string; readonly block: string }
  | {
      readonly code: 'unequal-replication';
      readonly fewest: number;
      readonly most: number;
      readonly entries: readonly string[];
    }
  | { readonly code: 'entry-not-replicated'; readonly entry: string }
  | { readonly code: 'entries-disconnected'; readonly parts: readonly (readonly string[])[] };

function groupBy<Item>(items: readonly Item[], key: (item: Item) => string): Map<string, Item[]> {
  const groups = new Map<string, Item[]>();
  for (const item of items) {
    const name = key(item);
    const group = groups.get(name);
    if (group) group.push(item);
    else groups.set(name, [item]);
  }
  return groups;
}

/**
 * Parts of a layout between which no gap can be estimated: two entries belong together when a chain of shared
 * blocks leads from one to the other.
 * @param plots entry and block of each plot that has a value
 * @returns entries of each part, parts and entries in order of first appearance
 */
export function connectedParts(
  plots: readonly { readonly entry: string; readonly block: string }[],
): readonly (readonly string[])[] {
  const parent = new Map<string, string>();
  const rootOf = (node: string): string => {
    let root = node;
    for (let up = parent.get(root); up !== undefined && up !== root; up = parent.get(root)) root = up;
    parent.set(node, root);
    return root;
  };
  for (const { entry, block } of plots) {
    const nodes = [`entry ${entry}`, `block ${block}`] as const;
    for (const node of nodes) if (!parent.has(node)) parent.set(node, node);
    parent.set(rootOf(nodes[1]), rootOf(nodes[0]));
  }
  const entries = [...new Set(plots.map((plot) => plot.entry))];
  return [...groupBy(entries, (entry) => rootOf(`entry ${entry}`)).values()];
}

function findDoubles(plots: readonly PlacedPlot[]): LayoutFinding[] {
  const named: LayoutFinding[] = [...groupBy(plots, (plot) => plot.plot)]
    .filter(([, same]) => same.length > 1)
    .map(([plot, same]) => ({ code: 'plot-named-twice', plot, times: same.length }));
  const placed = plots.flatMap((plot) =>
    plot.row === undefined || plot.column === undefined
      ? []
      : [{ plot: plot.plot, row: plot.row, column: plot.column }],
  );
  const taken: LayoutFinding[] = [
    ...groupBy(placed, (place) => `${place.row}:${place.column}`).values(),
  ].flatMap((same) =>
    same.length > 1 && same[0]
      ? [
          {
            code: 'position-taken-twice' as const,
            row: same[0].row,
            column: same[0].column,
            plots: same.map((place) => place.plot),
          },
        ]
      : [],
  );
  return [...named, ...taken];
}

function findBlockFaults(
  plots: readonly (PlacedPlot & { readonly block: string })[],
  entries: readonly string[],
): LayoutFinding[] {
  return [...groupBy(plots, (plot) => plot.block)].flatMap(([block, members]) => {
    const byEntry = groupBy(members, (plot) => plot.entry);
    return entries.flatMap((entry): LayoutFinding[] => {
      const own = byEntry.get(entry) ?? [];
      if (own.length === 0) return [{ code: 'entry-missing-from-block', entry, block }];
      if (own.length === 1) return [];
      return [{ code: 'entry-repeated-in-block', entry, block, plots: own.map((plot) => plot.plot) }];
    });
  });
}

function findReplicationFaults(plots: readonly PlacedPlot[]): LayoutFinding[] {
  const counts = [...groupBy(plots, (plot) => plot.entry)].map(([entry, own]) => ({ entry, n: own.length }));
  const fewest = Math.min(...counts.map((count) => count.n));
  const most = Math.max(...counts.map((count) => count.n));
  const single: LayoutFinding[] = counts
    .filter((count) => count.n === 1)
    .map(({ entry }) => ({ code: 'entry-not-replicated', entry }));
  if (fewest === most) return single;
  const entries = counts.filter((count) => count.n < most).map((count) => count.entry);
  return [{ code: 'unequal-replication', fewest, most, entries }, ...single];
}

/**
 * What a layout breaks or lacks.
 * @param plots plots that have a value, one for each
 * @param design.completeBlocks whether every block should hold every entry exactly once
 * @returns findings, none for a sound layout
 */
export function checkLayout(
  plots: readonly PlacedPlot[],
  design: { readonly completeBlocks: boolean },
): readonly LayoutFinding[] {
  if (plots.length === 0) return [];
  const blocked = plots.flatMap((plot) => (plot.block === undefined ? [] : [{ ...plot, block: plot.block }]));
  const entries = [...new Set(plots.map((plot) => plot.entry))];
  const parts = connectedParts(blocked);
  return [
    ...findDoubles(plots),
    ...(design.completeBlocks ? findBlockFaults(blocked, entries) : []),
    ...findReplicationFaults(plots),
    ...(parts.length > 1 ? [{ code: 'entries-disconnected' as const, parts }] : []),
  ];
}
