import type { Say } from './say-sentences.ts';
import type { CandidateResult } from './weigh-up.ts';
import type { FigureWriter } from './write-figures.ts';

/**
 * The return is reckoned on the gap pulled back towards zero, the tick is drawn at the estimate. Where the break-even
 * lies between the two, tick and return seem to contradict each other: then the gap that was reckoned on is said beside.
 * @param unit stored unit of yield gaps
 * @returns null where both lie on one side, or nothing is reckoned
 */
export function sayPulledBackGap(
  { gap, moneyGap, money, verdict }: Pick<CandidateResult, 'gap' | 'moneyGap' | 'money' | 'verdict'>,
  unit: string,
  decimals: number,
  say: Say<'verdicts:pulledBack'>,
  write: FigureWriter,
): string | null {
  if (gap === null || moneyGap === null || money === null || verdict === 'thin') return null;
  const doesTickPay = gap.estimate > money.breakEvenGap;
  if (doesTickPay === moneyGap.estimate > money.breakEvenGap) return null;
  return say('verdicts:pulledBack', { gap: write.gap(moneyGap.estimate, unit, decimals) });
}
