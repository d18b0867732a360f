import type { CurrentLevel } from './money.ts';
import type { WeighUp, WeighUpResult } from './weigh-up.ts';

/** What the money of every candidate of a question is held against: the current variety, and what it gives. */
export type MoneyBasis = {
  currentVarietyId: string;
  /** t/ha that the grower usually gets of the crop; null where nobody has said */
  usualYield: number | null;
  /** Of the current variety in the trials used, yield among them. */
  levels: readonly CurrentLevel[];
};

/** The basis of a weigh-up's money; copies frozen before levels were told have none. */
export function readMoneyBasis(
  weighUp: Pick<WeighUp, 'currentVarietyId' | 'usualYield'>,
  result: Pick<WeighUpResult, 'currentLevels'>,
): MoneyBasis {
  const { currentVarietyId, usualYield } = weighUp;
  return { currentVarietyId, usualYield, levels: result.currentLevels ?? [] };
}
