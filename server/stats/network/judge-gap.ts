import type { LevelInterval, TraitEvidence, TraitVerdict } from './weigh-question.ts';

/**
 * Verdict on a gap from its interval for the region's average.
 * @param margin gaps within ± this do not matter; unit of the trait, ≥ 0
 * @param isAnswerable false where the evidence is too thin for the method
 */
export function judgeGap(
  interval: LevelInterval,
  better: TraitEvidence['better'],
  margin: number,
  isAnswerable: boolean,
): TraitVerdict {
  if (!isAnswerable) return 'thin';
  const side = interval.low > 0 ? 1 : interval.high < 0 ? -1 : 0;
  const isLevel = interval.low > -margin && interval.high < margin;
  if (better === 'neutral') return isLevel ? 'level' : side === 0 ? 'open' : null;
  if (side !== 0) return side === (better === 'higher' ? 1 : -1) ? 'ahead' : 'behind';
  return isLevel ? 'level' : 'open';
}
