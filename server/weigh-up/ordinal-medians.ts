import type { TraitVerdict } from '#shared/weigh-up.ts';
import type { Trait } from '#shared/catalogue.ts';
import type { Evidence } from './evidence.ts';

/**
 * Ratings are told as medians over the trials in which each variety was rated: steps of a scale are not averaged and
 * no verdict is drawn from them.
 */
export function compareRatings(
  evidence: Evidence,
  trait: Trait,
  candidateId: string,
  currentId: string,
): TraitVerdict {
  const ratings = (varietyId: string): number[] =>
    evidence.means
      .filter((mean) => mean.traitId === trait.id && mean.varietyId === varietyId)
      .map((mean) => mean.mean);
  const candidate = ratings(candidateId);
  return {
    traitSlug: trait.slug,
    kind: 'ordinal',
    verdict: null,
    gap: null,
    siteYears: candidate.length,
    medianCandidate: medianOf(candidate),
    medianCurrent: medianOf(ratings(currentId)),
  };
}

function medianOf(values: readonly number[]): number | null {
  const sorted = [...values].sort((a, b) => a - b);
  const upper = sorted[Math.floor(sorted.length / 2)];
  const lower = sorted[Math.ceil(sorted.length / 2) - 1];
  return upper === undefined || lower === undefined ? null : (upper + lower) / 2;
}
