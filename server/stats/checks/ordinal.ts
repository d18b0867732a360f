import { positionsByGroup } from './group-positions.ts';
import { median } from './median.ts';

/** How one entry's scores on an ordered scale lie: no mean, since steps of a scale are not equal. */
export interface OrdinalSummary {
  readonly entry: number | string;
  readonly n: number;
  readonly median: number;
  readonly min: number;
  readonly max: number;
  /** Scores and how often each was given, ascending. */
  readonly counts: readonly { readonly score: number; readonly count: number }[];
}

/**
 * Medians, extremes and counts of scores by entry.
 * @param scores on one scale of one direction, length n
 * @param entries the entry of each score, length n
 * @returns one row an entry, in order of first appearance
 */
export function summariseOrdinal(
  scores: ArrayLike<number>,
  entries: ArrayLike<number | string>,
): readonly OrdinalSummary[] {
  return [...positionsByGroup(entries)].map(([entry, positions]) => {
    const own = positions.map((i) => scores[i] ?? 0).sort((a, b) => a - b);
    const distinct = [...new Set(own)];
    return {
      entry,
      n: own.length,
      median: median(own),
      min: own[0] ?? 0,
      max: own[own.length - 1] ?? 0,
      counts: distinct.map((score) => ({ score, count: own.filter((other) => other === score).length })),
    };
  });
}
