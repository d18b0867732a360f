import type { Trait } from '#shared/catalogue.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import type { WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import type { Database } from '#server/db.ts';
import { yieldSlug } from './evidence-network.ts';
import { loadEvidence, type EvidenceScope } from './evidence-store.ts';
import type { Evidence } from './evidence.ts';
import { loadMoneyDefaults } from './money-defaults.ts';
import { weighEvidence } from './weigh-evidence.ts';
import { checkVarietiesOfCrop } from './weigh-up-store.ts';

/** The answer to a weigh-up from the trials as they are published now, with the traits it speaks of. */
export async function answerWeighUp(
  db: Database,
  weighUp: WeighUp,
): Promise<{ result: WeighUpResult; traits: Trait[] }> {
  const [evidence, priceSheet] = await Promise.all([
    loadEvidence(db, weighUp),
    loadMoneyDefaults(db, weighUp.cropId, weighUp.regionId),
  ]);
  const { currentVarietyId, candidateIds, assumptions: money } = weighUp;
  const question = { currentVarietyId, candidateIds, traits: 'all', money, priceSheet } as const;
  return { result: weighEvidence(evidence, { ...question, askedAt: new Date() }), traits: evidence.traits };
}

/**
 * Every variety of the crop that stood in the region's trials, weighed against the current one, largest gap first,
 * with the price sheet as assumptions.
 * @throws CodedError not-found for an unknown crop, variety-not-of-crop
 */
export async function rankCandidates(
  db: Database,
  scope: EvidenceScope & { currentVarietyId: string },
): Promise<{ result: WeighUpResult; assumptions: MoneyAssumptions | null }> {
  const { currentVarietyId } = scope;
  const [evidence, priceSheet] = await Promise.all([
    loadEvidence(db, scope),
    loadMoneyDefaults(db, scope.cropId, scope.regionId),
    checkVarietiesOfCrop(db, scope.cropId, [currentVarietyId]),
  ]);
  const result = weighEvidence(evidence, {
    candidateIds: listStanding(evidence).filter((id) => id !== currentVarietyId),
    ...{ currentVarietyId, priceSheet, money: priceSheet },
    traits: 'yield',
    askedAt: new Date(),
  });
  const candidates = result.candidates.toSorted(
    (a, b) => (b.gap?.estimate ?? -Infinity) - (a.gap?.estimate ?? -Infinity),
  );
  return { result: { ...result, candidates }, assumptions: priceSheet };
}

/** Varieties with a yield in one of the trials, by name. */
function listStanding({ means, traits, varieties }: Evidence): string[] {
  const yieldId = traits.find((trait) => trait.slug === yieldSlug)?.id;
  const standing = new Set(means.filter((mean) => mean.traitId === yieldId).map((mean) => mean.varietyId));
  return varieties.flatMap((variety) => (standing.has(variety.id) ? [variety.id] : []));
}
