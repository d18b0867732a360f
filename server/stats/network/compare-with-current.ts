import { dunnettAdjust, dunnettQuantile } from '#server/stats/distributions/dunnett.ts';
import { tQuantileUpper } from '#server/stats/distributions/student-t.ts';
import type { EntryEstimates } from './entry-estimates.ts';
import { gapCovariance, measureGap, type NetworkGap } from './network-gap.ts';
import type { ShrunkenEffects } from './shrunken-effects.ts';
import type { CandidateGap, LevelInterval } from './weigh-question.ts';

const around = (estimate: number, half: number, level: number): LevelInterval => ({
  low: estimate - half,
  high: estimate + half,
  level,
});

/** p values and half widths of gaps that share the current variety, the number of them reckoned in. */
interface FamilyWidths {
  readonly p: readonly number[];
  readonly quantile: readonly number[];
}

function widenForFamily(
  gaps: readonly NetworkGap[],
  correlation: readonly Float64Array[],
  level: number,
  withP: boolean,
): FamilyWidths {
  const df = gaps.map((gap) => gap.df);
  const ts = gaps.map(({ estimate, se }) => estimate / se);
  return {
    p: withP ? [...dunnettAdjust({ ts, df, correlation }).p] : gaps.map(({ p }) => p),
    quantile: df.map((own) => dunnettQuantile({ alpha: 1 - level, df: own, correlation })),
  };
}

function correlate(estimates: EntryEstimates, members: readonly number[], base: number): Float64Array[] {
  const covariance = members.map((r) =>
    Float64Array.from(members, (s) => gapCovariance(estimates, r, s, base)),
  );
  return covariance.map((row, r) => row.map((value, s) => value / Math.sqrt(row[r]! * covariance[s]![s]!)));
}

/**
 * Gaps of the candidates at positions `members` from the entry at position `base`, all connected to it.
 * @param isFamily true: intervals and pAdjusted by Dunnett on the model's covariance, Kenward–Roger SE and df; false: each pair alone
 * @param withP false where only intervals are asked for: pAdjusted is then that of the pair alone, and costs nothing
 */
export function compareWithCurrent(
  estimates: EntryEstimates,
  shrunken: ShrunkenEffects,
  members: readonly number[],
  base: number,
  isFamily: boolean,
  level: number,
  withP = true,
): CandidateGap[] {
  const gaps = members.flatMap((r) => measureGap(estimates, r, base) ?? []);
  const family =
    isFamily && gaps.length > 1
      ? widenForFamily(gaps, correlate(estimates, members, base), level, withP)
      : null;
  const m = estimates.chosen.length;
  const interaction = 2 * estimates.fit.point.theta.reduce((sum, value) => sum + value, 0);
  return gaps.map((gap, index) => {
    const r = members[index]!;
    const { estimate, se, df, p, ownSeason } = gap;
    const lsd = tQuantileUpper((1 - level) / 2, df) * se;
    const left = shrunken.covariance;
    const leftOver = Math.max(0, left[r * m + r]! + left[base * m + base]! - 2 * left[r * m + base]!);
    return {
      estimate,
      se,
      df,
      p,
      pAdjusted: family?.p[index] ?? p,
      lsd,
      region: around(estimate, family === null ? lsd : family.quantile[index]! * se, level),
      regionAlone: around(estimate, lsd, level),
      ownSeason: {
        ...around(estimate, tQuantileUpper((1 - level) / 2, ownSeason.df) * ownSeason.se, level),
        se: ownSeason.se,
        df: ownSeason.df,
      },
      shrunken: {
        estimate: shrunken.effects[r]! - shrunken.effects[base]!,
        se: Math.sqrt(leftOver),
        ownSeasonSe: Math.sqrt(leftOver + interaction),
      },
    };
  });
}
