/** Designs whose error degrees of freedom follow from the number of entries and plots. */
export type SummaryDesign =
  'crd' | 'rcbd' | 'latin-square' | 'incomplete-blocks' | 'split-plot' | 'strips' | 'unknown';

/** What is known of the size of a trial of which only the table is left. */
export interface TrialSize {
  readonly design: SummaryDesign;
  /** Entries t, at least 2. */
  readonly entries: number;
  /** Plots of each entry: one number for all, or one for each entry. */
  readonly replicates?: number | readonly number[] | undefined;
  /** Blocks in all, where blocks are incomplete. */
  readonly blocks?: number | undefined;
  /** Levels of the main-plot factor of a split plot; `entries` are then the levels of the sub-plot factor. */
  readonly mainLevels?: number | undefined;
}

/** Plots of each entry, or nothing when not known. */
export function replicatesByEntry(size: TrialSize): readonly number[] | undefined {
  const { replicates, entries } = size;
  if (replicates === undefined) return undefined;
  return typeof replicates === 'number' ? Array.from({ length: entries }, () => replicates) : replicates;
}

/** Plots that stand for all entries in the mean variance of a difference: the harmonic mean. */
export function harmonicReplication(size: TrialSize): number | undefined {
  const replicates = replicatesByEntry(size);
  if (!replicates || replicates.some((r) => !(r > 0))) return undefined;
  return replicates.length / replicates.reduce((sum, r) => sum + 1 / r, 0);
}

/**
 * Error degrees of freedom by the design.
 * @returns df of at least 1, or nothing where the design does not fix them or leaves none
 * Source: textbook theory (from memory); missing plots are counted off.
 */
export function errorDfOfDesign(size: TrialSize): number | undefined {
  const { design, entries } = size;
  const replicates = replicatesByEntry(size);
  if (!replicates) return undefined;
  const plots = replicates.reduce((sum, r) => sum + r, 0);
  const complete = Math.max(...replicates);
  const df = ((): number | undefined => {
    switch (design) {
      case 'crd':
        return plots - entries;
      case 'rcbd':
      case 'strips':
        return plots - entries - complete + 1;
      case 'latin-square':
        return plots - 3 * entries + 2;
      case 'incomplete-blocks':
        return size.blocks === undefined ? undefined : plots - entries - size.blocks + 1;
      case 'split-plot':
        return size.mainLevels === undefined
          ? undefined
          : size.mainLevels * (complete / size.mainLevels - 1) * (entries - 1);
      case 'unknown':
        return undefined;
    }
  })();
  return df !== undefined && df >= 1 ? df : undefined;
}
