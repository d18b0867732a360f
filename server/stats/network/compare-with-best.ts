import { compareWithBest } from '#server/stats/distributions/hsu-best.ts';
import type { EntryEstimates } from './entry-estimates.ts';
import { measureGap } from './network-gap.ts';
import type { BestStanding } from './weigh-result.ts';

/**
 * Hsu's comparison with the best among the entries at `members` on the model's covariance; df is the least of any
 * two of them, the cautious choice where they differ.
 */
export function standAgainstBest(
  estimates: EntryEstimates,
  members: readonly number[],
  better: 'higher' | 'lower',
  level: number,
): BestStanding[] {
  const m = estimates.chosen.length;
  const dfs = members.flatMap((r, k) =>
    members.slice(k + 1).flatMap((s) => measureGap(estimates, r, s)?.df ?? []),
  );
  if (dfs.length === 0) return [];
  const rows = compareWithBest({
    means: members.map((r) => estimates.effects[r]!),
    covariance: members.map((r) =>
      members.map((s) => estimates.covariance[r * m + s]! + estimates.correction[r * m + s]!),
    ),
    df: Math.min(...dfs),
    alpha: 1 - level,
    better,
  });
  return rows.map(({ lower, upper, estimate, mayBeBest, isBest }, k) => ({
    entry: estimates.fit.frame.entries[estimates.chosen[members[k]!]!]!,
    estimate,
    interval: { low: lower, high: upper, level },
    mayBeBest,
    isBest,
  }));
}
