import { chiSquareUpper } from '#server/stats/distributions/chi-square.ts';
import { positionsByGroup } from './group-positions.ts';
import { type CheckOutcome, notComputed } from './check-outcome.ts';
import { midRanks } from './mid-ranks.ts';

/** A rank test referred to χ². */
export interface RankTest {
  readonly statistic: number;
  readonly df: number;
  readonly p: number;
}

/**
 * Kruskal–Wallis test of equal location over groups, corrected for ties.
 * @param values scores, length n
 * @param groups the entry of each score, length n
 * Source: Kruskal & Wallis (1952), J. Amer. Statist. Assoc. 47:583–621.
 */
export function kruskalWallis(
  values: ArrayLike<number>,
  groups: ArrayLike<number | string>,
): CheckOutcome<RankTest> {
  const n = values.length;
  const members = [...positionsByGroup(groups).values()];
  if (members.length < 2) return notComputed('one-group');
  const { ranks, ties } = midRanks(values);
  const tieFactor = 1 - ties / (n * n * n - n);
  if (n < 2 || tieFactor === 0) return notComputed('no-spread');
  const between = members.reduce((sum, positions) => {
    const mean = positions.reduce((total, i) => total + (ranks[i] ?? 0), 0) / positions.length;
    return sum + positions.length * (mean - (n + 1) / 2) ** 2;
  }, 0);
  const statistic = (12 * between) / (n * (n + 1)) / tieFactor;
  const df = members.length - 1;
  return { computed: true, statistic, df, p: chiSquareUpper(statistic, df) };
}
