import type { TrialDesign } from '#shared/trial.ts';
import type { RandomSource } from './random-source.ts';

/** A plot on the ground before anything grew. Rows run along the blocks, columns across them; both count from 1. */
export type LaidPlot = {
  plotNumber: string;
  entry: string;
  rep: string | null;
  block: string | null;
  row: number;
  col: number;
  mainLevel: string | null;
};

export type Layout = {
  design: Exclude<TrialDesign, 'latin-square' | 'factorial'>;
  entries: readonly string[];
  reps: number;
  /** Plots in an incomplete block; columns of a replicate in a row-column design. */
  blockSize?: number;
  /** Levels on the main plots of a split plot. */
  mainLevels?: readonly string[];
};

type Place = { entry: string; rep: number; block: string | null; row: number; col: number; main?: string };

/** Draws a field for a design: who stands where, with the plot numbers a technician would paint on the stakes. */
export function layOutTrial(layout: Layout, random: RandomSource): LaidPlot[] {
  const places = placers[layout.design](layout, random);
  const isBlocked = layout.design !== 'crd';
  return places.map((place) => ({
    plotNumber: String(place.row * 100 + place.col),
    entry: place.entry,
    rep: isBlocked ? String(place.rep) : null,
    block: place.block,
    row: place.row,
    col: place.col,
    mainLevel: place.main ?? null,
  }));
}

const placers: Record<Layout['design'], (layout: Layout, random: RandomSource) => Place[]> = {
  crd: placeAnywhere,
  rcbd: placeCompleteBlocks,
  strips: placeStrips,
  'incomplete-blocks': placeIncompleteBlocks,
  'row-column': placeRowsAndColumns,
  'split-plot': placeSplitPlots,
};

function placeAnywhere({ entries, reps }: Layout, random: RandomSource): Place[] {
  const all = entries.flatMap((entry) => Array.from({ length: reps }, () => entry));
  return random.shuffle(all).map((entry, i) => ({
    entry,
    rep: 1,
    block: null,
    row: Math.floor(i / entries.length) + 1,
    col: (i % entries.length) + 1,
  }));
}

/** One block is one row of the field. */
function placeCompleteBlocks({ entries, reps }: Layout, random: RandomSource): Place[] {
  return countTo(reps).flatMap((rep) =>
    random.shuffle(entries).map((entry, i) => ({ entry, rep, block: String(rep), row: rep, col: i + 1 })),
  );
}

/** Field-length strips side by side, the pair of a block in random order. */
function placeStrips({ entries, reps }: Layout, random: RandomSource): Place[] {
  return countTo(reps).flatMap((rep) =>
    random.shuffle(entries).map((entry, i) => ({
      entry,
      rep,
      block: String(rep),
      row: 1,
      col: (rep - 1) * entries.length + i + 1,
    })),
  );
}

/** Resolvable: the entries of a replicate are dealt to its blocks with a shift from replicate to replicate (Patterson and Williams 1976). */
function placeIncompleteBlocks({ entries, reps, blockSize = 4 }: Layout, random: RandomSource): Place[] {
  const blocks = entries.length / blockSize;
  const dealt = random.shuffle(entries);
  return countTo(reps).flatMap((rep) => {
    const members = countTo(blocks).map((block) =>
      random.shuffle(
        dealt.filter((_, i) => ((i % blocks) + (rep - 1) * Math.floor(i / blocks)) % blocks === block - 1),
      ),
    );
    return random.shuffle(members).flatMap((block, b) =>
      block.map((entry, i) => ({
        entry,
        rep,
        block: String(b + 1),
        row: rep,
        col: b * blockSize + i + 1,
      })),
    );
  });
}

/** Replicates are rectangles one below the other; a column runs through its replicate only. */
function placeRowsAndColumns({ entries, reps, blockSize = 4 }: Layout, random: RandomSource): Place[] {
  const rows = entries.length / blockSize;
  return countTo(reps).flatMap((rep) =>
    random.shuffle(entries).map((entry, i) => ({
      entry,
      rep,
      block: null,
      row: (rep - 1) * rows + Math.floor(i / blockSize) + 1,
      col: (i % blockSize) + 1,
    })),
  );
}

/** One block is one row: its main plots side by side, the entries drawn anew within each. */
function placeSplitPlots({ entries, reps, mainLevels = [] }: Layout, random: RandomSource): Place[] {
  return countTo(reps).flatMap((rep) =>
    random.shuffle(mainLevels).flatMap((main, m) =>
      random.shuffle(entries).map((entry, i) => ({
        entry,
        rep,
        block: String(rep),
        row: rep,
        col: m * entries.length + i + 1,
        main,
      })),
    ),
  );
}

function countTo(last: number): number[] {
  return Array.from({ length: last }, (_, i) => i + 1);
}
