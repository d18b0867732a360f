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
): FamilyWidths {
  const df = gaps.map((gap) => gap.df);
  const ts = gaps.map(({ estimate, se }) => estimate / se);
  return {
    p: [...dunnettAdjust({ ts, df, correlation }).p],
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
 * Gaps of the candidates at positions `members` of the estimates from the entry at position `base`, all connected to it.
 * @param shrunken of all entries of the network
 * @param isFamily true: intervals and pAdjusted by Dunnett on the model's covariance, Kenward–Roger SE and df; false: each pair alone
 */
export function compareWithCurrent(
  estimates: EntryEstimates,
  shrunken: ShrunkenEffects,
  members: readonly number[],
  base: number,
  isFamily: boolean,
  level: number,
): CandidateGap[] {
  const gaps = members.flatMap((r) => measureGap(estimates, r, base) ?? []);
  const family =
    isFamily && gaps.length > 1 ? widenForFamily(gaps, correlate(estimates, members, base), level) : null;
  const m = shrunken.effects.length;
  const b = estimates.chosen[base]!;
  const interaction = 2 * estimates.fit.point.theta.reduce((sum, value) => sum + value, 0);
  return gaps.map((gap, index) => {
    const r = estimates.chosen[members[index]!]!;
    const { estimate, se, df, p, ownSeason } = gap;
    const lsd = tQuantileUpper((1 - level) / 2, df) * se;
    const left = shrunken.covariance;
    const leftOver = Math.max(0, left[r * m + r]! + left[b * m + b]! - 2 * left[r * m + b]!);
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
        estimate: shrunken.effects[r]! - shrunken.effects[b]!,
        se: Math.sqrt(leftOver),
        ownSeasonSe: Math.sqrt(leftOver + interaction),
      },
    };
  });
}

/**
 * Verdicts alone, for the sensitivity lines. Dunnett's width lies between that of a pair alone and Bonferroni's, and a
 * verdict that both give needs no further work; the rest are asked for exactly.
 * @param judge verdict of the interval of the gap at an index of `members`; for wider intervals never a bolder one
 */
export function judgeAgainstCurrent<Verdict>(
  estimates: EntryEstimates,
  members: readonly number[],
  base: number,
  isFamily: boolean,
  level: number,
  judge: (interval: LevelInterval, index: number) => Verdict,
): Verdict[] {
  const gaps = members.flatMap((r) => measureGap(estimates, r, base) ?? []);
  const tail = (1 - level) / 2;
  // One matrix for all of them: Dunnett's table of the family is kept with it.
  let correlation: Float64Array[] | null = null;
  return gaps.map(({ estimate, se, df }, index) => {
    const alone = judge(around(estimate, tQuantileUpper(tail, df) * se, level), index);
    if (!isFamily || gaps.length < 2) return alone;
    const widest = judge(around(estimate, tQuantileUpper(tail / gaps.length, df) * se, level), index);
    if (widest === alone) return alone;
    correlation ??= correlate(estimates, members, base);
    return judge(around(estimate, dunnettQuantile({ alpha: 1 - level, df, correlation }) * se, level), index);
  });
}
