import { makeCaution } from '#shared/caution.ts';
import { weighMoney, type MoneyAssumptions } from '#shared/money.ts';
import type { CandidateResult, WeighUpResult } from '#shared/weigh-up.ts';
import { cautionMoney } from './money-cautions.ts';
import type { MoneyGround } from './question.ts';

/**
 * By candidate, the size of its break-even gap: a gap smaller than that does not matter either.
 * @param ownMargin the trait's practical margin, t/ha: what does not exceed it changes no verdict and is left out
 */
export function breakEvenMargins(
  currentVarietyId: string,
  candidateIds: readonly string[],
  money: MoneyAssumptions | null,
  ownMargin: number,
): Record<string, number> {
  if (money === null) return {};
  return Object.fromEntries(
    candidateIds.flatMap((id) => {
      const result = weighMoney(id, currentVarietyId, 0, null, money);
      const margin = result === null ? 0 : Math.abs(result.breakEvenGap);
      return margin > ownMargin ? [[id, margin] as const] : [];
    }),
  );
}

/**
 * Puts the money to an answer of weighEvidence: its assumptions change more often than the evidence, and cost nothing.
 * @param current the current variety, named where the crop still has it
 */
export function priceAnswer(
  answer: WeighUpResult,
  current: { id: string; name: string | undefined },
  ground: MoneyGround,
): WeighUpResult {
  if (answer.answer === 'no-trials') return answer;
  const candidateIds = answer.candidates.map((candidate) => candidate.varietyId);
  const localAdvice = answer.cautions.filter(({ code }) => code === 'local-advice');
  const others = answer.cautions.filter(({ code }) => code !== 'local-advice');
  return {
    ...answer,
    candidates: answer.candidates.map((candidate) => priceCandidate(candidate, current.id, ground.money)),
    cautions: [...others, ...cautionMoney(ground, current, candidateIds), ...localAdvice],
  };
}

function priceCandidate(
  candidate: CandidateResult,
  currentId: string,
  money: MoneyAssumptions | null,
): CandidateResult {
  const { varietyId, varietyName: variety, moneyGap, cautions } = candidate;
  const isCosted = money?.seedCosts[varietyId] !== undefined;
  return {
    ...candidate,
    money:
      money === null || moneyGap === null
        ? null
        : weighMoney(varietyId, currentId, moneyGap.estimate, moneyGap, money),
    cautions: isCosted ? cautions : [...cautions, makeCaution('no-seed-cost', 'warning', { variety })],
  };
}
