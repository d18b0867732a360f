import { makeCaution } from '#shared/caution.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import { findCostBreakEven } from '#shared/partial-budget.ts';
import { reckonCandidates } from '#shared/reckon-candidates.ts';
import { budgetSeed } from '#shared/seed-budget.ts';
import type { CandidateResult, WeighUpResult } from '#shared/weigh-up.ts';
import { cautionMoney } from './money-cautions.ts';
import type { MoneyGround } from './question.ts';

/**
 * By candidate, the size of its break-even gap: a gap smaller than that does not matter either. Reckoned from costs
 * alone, before any trial is read; what premiums make of it is judged once the answer is priced.
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
      const margin = Math.abs(findCostBreakEven(id, currentVarietyId, money) ?? 0);
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
  const basis = {
    currentVarietyId: current.id,
    usualYield: ground.usualYield,
    levels: answer.currentLevels ?? [],
  };
  const priced = reckonCandidates(answer.candidates, basis, ground.money, ground.practicalMargin);
  return {
    ...answer,
    candidates: priced.map((candidate) => cautionUncosted(candidate, ground.money)),
    cautions: [...others, ...cautionMoney(ground, current, candidateIds), ...localAdvice],
  };
}

function cautionUncosted(candidate: CandidateResult, money: MoneyAssumptions | null): CandidateResult {
  const { varietyId, varietyName: variety, cautions } = candidate;
  if (budgetSeed(money?.seedCosts[varietyId]) !== null) return candidate;
  return { ...candidate, cautions: [...cautions, makeCaution('no-seed-cost', 'warning', { variety })] };
}
