import { tUpper } from '#server/stats/distributions/student-t.ts';
import type { CandidateGap } from './weigh-question.ts';

/** P(gap > threshold) for a gap whose uncertainty is a t: estimate, standard error, df. */
export function chanceOver(
  gap: { readonly estimate: number; readonly se: number; readonly df: number },
  threshold: number,
): number {
  if (!(gap.se > 0)) return gap.estimate > threshold ? 1 : 0;
  return tUpper((threshold - gap.estimate) / gap.se, gap.df);
}

/**
 * Chance that a candidate's gap exceeds a threshold.
 * @param target region: its average over seasons; own-season: the grower's own next season
 * @param picked true where the candidate was picked from a list: the shrunken gap then takes the place of the estimate
 */
export function chanceAbove(
  gap: CandidateGap,
  threshold: number,
  target: 'region' | 'own-season',
  picked = false,
): number {
  const { estimate, se, df, ownSeason, shrunken } = gap;
  if (picked)
    return target === 'region'
      ? chanceOver({ estimate: shrunken.estimate, se: shrunken.se, df }, threshold)
      : chanceOver({ estimate: shrunken.estimate, se: shrunken.ownSeasonSe, df: ownSeason.df }, threshold);
  return target === 'region'
    ? chanceOver({ estimate, se, df }, threshold)
    : chanceOver({ estimate, se: ownSeason.se, df: ownSeason.df }, threshold);
}
