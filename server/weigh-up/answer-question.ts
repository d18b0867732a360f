import type { Trait } from '#shared/catalogue.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import type { WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import type { Database } from '#server/db.ts';
import { keepAnswer, keyAnswer, recallAnswer } from './answer-store.ts';
import { yieldSlug } from './evidence-network.ts';
import { listStanding, loadEvidenceGround, loadFigures, type EvidenceScope } from './evidence-store.ts';
import type { EvidenceGround } from './evidence.ts';
import { loadMoneyDefaults } from './money-defaults.ts';
import { breakEvenMargins, priceAnswer } from './price-answer.ts';
import type { MoneyGround, Question } from './question.ts';
import { weighEvidence } from './weigh-evidence.ts';
import { checkVarietiesOfCrop } from './weigh-up-store.ts';

/** The answer to a weigh-up from the trials as they are published now, with the traits it speaks of. */
export async function answerWeighUp(
  db: Database,
  weighUp: WeighUp,
): Promise<{ result: WeighUpResult; traits: Trait[] }> {
  const [ground, priceSheet] = await Promise.all([
    loadEvidenceGround(db, weighUp),
    loadMoneyDefaults(db, weighUp.cropId, weighUp.regionId),
  ]);
  const { currentVarietyId, candidateIds, assumptions: money } = weighUp;
  const asked = { currentVarietyId, candidateIds, traits: 'all' } as const;
  const result = await answerPriced(db, ground, asked, { money, priceSheet, askedAt: new Date() });
  return { result, traits: ground.traits };
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
  const [ground, priceSheet] = await Promise.all([
    loadEvidenceGround(db, scope),
    loadMoneyDefaults(db, scope.cropId, scope.regionId),
    checkVarietiesOfCrop(db, scope.cropId, [currentVarietyId]),
  ]);
  const standing = await listStanding(db, ground, yieldSlug);
  const asked = {
    currentVarietyId,
    candidateIds: standing.filter((id) => id !== currentVarietyId),
    traits: 'yield',
  } as const;
  const money = { money: priceSheet, priceSheet, askedAt: new Date() };
  const result = await answerPriced(db, ground, asked, money);
  const candidates = result.candidates.toSorted(
    (a, b) => (b.gap?.estimate ?? -Infinity) - (a.gap?.estimate ?? -Infinity),
  );
  return { result: { ...result, candidates }, assumptions: priceSheet };
}

/** Recalls or weighs the answer, and puts the money to it. */
async function answerPriced(
  db: Database,
  ground: EvidenceGround,
  asked: Omit<Question, 'askedInSeason' | 'margins'>,
  money: MoneyGround,
): Promise<WeighUpResult> {
  const { currentVarietyId: id, candidateIds } = asked;
  const ownMargin = ground.traits.find((trait) => trait.slug === yieldSlug)?.practicalMargin ?? 0;
  const answer = await answerOnce(db, ground, {
    ...asked,
    askedInSeason: money.askedAt.getUTCFullYear(),
    margins: breakEvenMargins(id, candidateIds, money.money, ownMargin),
  });
  const name = ground.varieties.find((variety) => variety.id === id)?.name;
  return priceAnswer(answer, { id, name }, money);
}

/** The stored answer where what it hangs on is unchanged; else it is weighed, and kept. */
async function answerOnce(db: Database, ground: EvidenceGround, question: Question): Promise<WeighUpResult> {
  const key = keyAnswer(ground, question, '');
  const stored = await recallAnswer(db, key);
  if (stored !== null) return stored;
  const answer = weighEvidence(await loadFigures(db, ground), question);
  await keepAnswer(db, key, answer);
  return answer;
}
