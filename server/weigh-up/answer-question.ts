import type { Trait } from '#shared/catalogue.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import type { WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import { codeMark, compute } from '#server/computing/compute.ts';
import { createWorkSharing } from '#server/computing/share-work.ts';
import type { Database } from '#server/db.ts';
import { keepAnswer, keyAnswer, recallAnswer } from './answer-store.ts';
import { yieldSlug } from './evidence-network.ts';
import { listStanding, loadEvidenceGround, loadFigures } from './evidence-store.ts';
import type { EvidenceGround } from './evidence.ts';
import { readFarm } from './farm-place.ts';
import { loadMoneyDefaults } from './money-defaults.ts';
import { placeAnswer } from './place-answer.ts';
import { breakEvenMargins, priceAnswer } from './price-answer.ts';
import type { MoneyGround, Question } from './question.ts';
import { partTickedOff, tellTickedOff } from './ticked-off.ts';
import { asksForOtherRegions, type EvidenceScope } from './trial-choice.ts';
import { checkVarietiesOfCrop } from './weigh-up-store.ts';

/** The answer to a weigh-up from the trials as they are published now, with the traits it speaks of. */
export async function answerWeighUp(
  db: Database,
  weighUp: WeighUp,
  signal?: AbortSignal,
): Promise<{ result: WeighUpResult; traits: Trait[] }> {
  const [found, priceSheet] = await Promise.all([
    loadEvidenceGround(db, weighUp),
    loadMoneyDefaults(db, weighUp.cropId, weighUp.regionId),
  ]);
  const { counted: ground, out } = partTickedOff(found, weighUp.tickedOff);
  const { currentVarietyId, candidateIds, question: kind, assumptions: money, usualYield } = weighUp;
  const asked = {
    ...{ currentVarietyId, candidateIds, kind },
    list: kind === 'best' ? await listPickedFrom(db, ground, weighUp) : [],
    traits: 'all',
    acceptsOtherRegions: asksForOtherRegions(weighUp),
  } as const;
  const pricing = { money, priceSheet, usualYield, askedAt: new Date() };
  const priced = await answerPriced(db, ground, asked, pricing, signal);
  const placed = placeAnswer(priced, ground, {
    farm: readFarm(weighUp),
    usualYield,
    currentName: weighUp.currentVarietyName,
  });
  const result = tellTickedOff(placed, await loadFigures(db, out), weighUp.tickedOff);
  return { result, traits: ground.traits };
}

/** The varieties among which the best was looked for: all that stood in the trials, and those kept in any case. */
async function listPickedFrom(
  db: Database,
  ground: EvidenceGround,
  { currentVarietyId, candidateIds }: WeighUp,
): Promise<string[]> {
  const standing = await listStanding(db, ground, yieldSlug);
  return [...new Set([...candidateIds, ...standing])].filter((id) => id !== currentVarietyId);
}

/**
 * Every variety of the crop that stood in the region's trials, weighed against the current one, largest gap first,
 * with the price sheet as assumptions.
 * @throws CodedError not-found for an unknown crop, variety-not-of-crop
 */
export async function rankCandidates(
  db: Database,
  scope: EvidenceScope & { currentVarietyId: string },
  signal?: AbortSignal,
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
    kind: 'several',
    list: [],
    traits: listPricedTraits(priceSheet),
    acceptsOtherRegions: asksForOtherRegions(scope),
  } as const;
  const money = { money: priceSheet, priceSheet, usualYield: null, askedAt: new Date() };
  const priced = await answerPriced(db, ground, asked, money, signal);
  // The list is not read at the grower's usual yield: that is for the few that are kept.
  const result = placeAnswer(priced, ground, { farm: readFarm(scope), usualYield: null, currentName: '' });
  const candidates = result.candidates.toSorted(
    (a, b) => (b.gap?.estimate ?? -Infinity) - (a.gap?.estimate ?? -Infinity),
  );
  return { result: { ...result, candidates }, assumptions: priceSheet };
}

/** Yield and the traits that premiums hang on: what the money of a list is reckoned from. */
function listPricedTraits(money: MoneyAssumptions | null): Question['traits'] {
  const rules = money?.qualityRules ?? [];
  return rules.length === 0 ? 'yield' : [...new Set([yieldSlug, ...rules.map(({ traitSlug }) => traitSlug)])];
}

/** Recalls or weighs the answer, and puts the money to it. */
async function answerPriced(
  db: Database,
  ground: EvidenceGround,
  asked: Omit<Question, 'askedInSeason' | 'margins'>,
  money: Omit<MoneyGround, 'practicalMargin'>,
  signal?: AbortSignal,
): Promise<WeighUpResult> {
  const { currentVarietyId: id, candidateIds } = asked;
  const practicalMargin = ground.traits.find((trait) => trait.slug === yieldSlug)?.practicalMargin ?? 0;
  const answer = await answerOnce(
    db,
    ground,
    {
      ...asked,
      askedInSeason: money.askedAt.getUTCFullYear(),
      margins: breakEvenMargins(id, candidateIds, money.money, practicalMargin),
    },
    signal,
  );
  const name = ground.varieties.find((variety) => variety.id === id)?.name;
  return priceAnswer(answer, { id, name }, { ...money, practicalMargin });
}

/** Two advisors, or one who clicks twice, may ask the same before it is stored. */
const weighing = createWorkSharing<WeighUpResult>();

/** The stored answer where what it hangs on is unchanged; else it is weighed, once however many ask, and kept. */
async function answerOnce(
  db: Database,
  ground: EvidenceGround,
  question: Question,
  signal?: AbortSignal,
): Promise<WeighUpResult> {
  const key = keyAnswer(ground, question, codeMark);
  const stored = await recallAnswer(db, key);
  if (stored !== null) return stored;
  return weighing.share(
    key,
    async (whileAnyWaits) => {
      const figures = await loadFigures(db, ground);
      const answer = await compute('weighEvidence', [figures, question], whileAnyWaits);
      await keepAnswer(db, key, answer);
      return answer;
    },
    signal,
  );
}
