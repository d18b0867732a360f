import type { TraitVerdict } from '#shared/weigh-up.ts';
import type { Trait } from '#shared/catalogue.ts';
import type { Evidence } from './evidence.ts';

/**
 * Ratings are told as medians over the trials in which each variety was rated, and as counts of the trials in which
 * one stood lower or higher than the other: steps of a scale are not averaged and no verdict is drawn from them.
 */
export function compareRatings(
  evidence: Evidence,
  trait: Trait,
  candidateId: string,
  currentId: string,
): TraitVerdict {
  const ratingsOf = (varietyId: string): Map<string, number> =>
    new Map(
      evidence.means
        .filter((mean) => mean.traitId === trait.id && mean.varietyId === varietyId)
        .map(({ versionId, mean }) => [versionId, mean]),
    );
  const candidate = ratingsOf(candidateId);
  const current = ratingsOf(currentId);
  return {
    traitSlug: trait.slug,
    kind: 'ordinal',
    verdict: null,
    gap: null,
    siteYears: candidate.size,
    medianCandidate: medianOf([...candidate.values()]),
    medianCurrent: medianOf([...current.values()]),
    rated: countSides(candidate, current),
  };
}

/** Ratings by trial: only trials that rated both can say which stood lower. */
function countSides(
  candidate: ReadonlyMap<string, number>,
  current: ReadonlyMap<string, number>,
): NonNullable<TraitVerdict['rated']> {
  const gaps = [...candidate].flatMap(([trial, rating]) => {
    const other = current.get(trial);
    return other === undefined ? [] : [rating - other];
  });
  return {
    trials: gaps.length,
    lower: gaps.filter((gap) => gap < 0).length,
    higher: gaps.filter((gap) => gap > 0).length,
  };
}

function medianOf(values: readonly number[]): number | null {
  const sorted = [...values].sort((a, b) => a - b);
  const upper = sorted[Math.floor(sorted.length / 2)];
  const lower = sorted[Math.ceil(sorted.length / 2) - 1];
  return upper === undefined || lower === undefined ? null : (upper + lower) / 2;
}
