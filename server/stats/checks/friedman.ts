import { chiSquareUpper } from '#server/stats/distributions/chi-square.ts';
import { type CheckOutcome, notComputed } from './check-outcome.ts';
import type { RankTest } from './kruskal-wallis.ts';
import { midRanks } from './mid-ranks.ts';

/**
 * Friedman's test of equal location over entries, ranked within blocks and corrected for ties.
 * @param blocks one row a block, one score an entry in the same order; null where a plot is missing
 * @returns χ² test; not computed where a block is incomplete
 * Source: Friedman (1937), J. Amer. Statist. Assoc. 32:675–701; ties: Conover (1999), section 5.8.
 */
export function friedman(blocks: readonly (readonly (number | null)[])[]): CheckOutcome<RankTest> {
  const entries = blocks[0]?.length ?? 0;
  if (entries < 2) return notComputed('one-group');
  if (blocks.length < 2) return notComputed('too-few-values');
  const sums = new Float64Array(entries);
  let ties = 0;
  for (const block of blocks) {
    const scores = block.filter((score) => score !== null);
    if (scores.length !== entries) return notComputed('incomplete-blocks');
    const ranked = midRanks(scores);
    ties += ranked.ties;
    ranked.ranks.forEach((rank, entry) => {
      sums[entry] = (sums[entry] ?? 0) + rank;
    });
  }
  const b = blocks.length;
  const between = sums.reduce((sum, total) => sum + (total - (b * (entries + 1)) / 2) ** 2, 0);
  const spread = b * entries * (entries + 1) - ties / (entries - 1);
  if (spread === 0) return notComputed('no-spread');
  const statistic = (12 * between) / spread;
  return { computed: true, statistic, df: entries - 1, p: chiSquareUpper(statistic, entries - 1) };
}
