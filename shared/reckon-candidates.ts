import type { MoneyAssumptions } from './money.ts';
import type { MoneyBasis } from './money-basis.ts';
import { weighMoney } from './partial-budget.ts';
import type { Interval, VerdictCode } from './verdict.ts';
import type { CandidateResult } from './weigh-up.ts';

/**
 * The verdict on yield once the break-even gap has moved: gaps smaller than what pays for the seed do not matter, so
 * the margin is the larger of the crop's practical margin and the break-even gap. A sure side and `thin` stay.
 * @param region interval of the region's average, t/ha
 * @param practicalMargin t/ha
 */
export function rejudgeYield(
  verdict: VerdictCode,
  region: Interval,
  practicalMargin: number,
  breakEvenGap: number | null,
): VerdictCode {
  if (verdict !== 'level' && verdict !== 'open') return verdict;
  const margin = Math.max(practicalMargin, Math.abs(breakEvenGap ?? 0));
  return region.low > -margin && region.high < margin ? 'level' : 'open';
}

/**
 * The candidates under some money: the same gaps, with return, chance and the verdicts that hang on them anew. The server
 * answers by it, and the page runs it at every edit; nothing statistical is estimated here.
 * @param practicalMargin of yield for the crop, t/ha; null where none is set
 */
export function reckonCandidates(
  candidates: readonly CandidateResult[],
  basis: MoneyBasis,
  money: MoneyAssumptions | null,
  practicalMargin: number | null,
): CandidateResult[] {
  return candidates.map((candidate) => {
    const { gap } = candidate;
    if (gap === null || money === null) return { ...candidate, money: null };
    const reckoned = weighMoney(candidate, basis, money);
    const verdict = rejudgeYield(
      candidate.verdict,
      gap.region,
      practicalMargin ?? 0,
      reckoned?.breakEvenGap ?? null,
    );
    return { ...candidate, money: reckoned, verdict };
  });
}
