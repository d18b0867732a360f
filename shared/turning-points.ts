import type { MoneyResult } from './money.ts';

/** One change that, alone, would bring the return of the estimated gap to nothing. */
export type TurningPoint =
  | { kind: 'price'; side: 'under' | 'over'; value: number }
  | { kind: 'gap'; side: 'under' | 'over'; value: number }
  | { kind: 'seed'; side: 'under' | 'over'; value: number };

/**
 * What would turn the answer of a candidate: the price per tonne, the true gap and the seed cost at which it just pays,
 * and on which side of each the answer is another.
 * @param estimate gap in t/ha on which the return was reckoned
 */
export function findTurningPoints(
  money: MoneyResult,
  estimate: number,
): { pays: boolean; points: TurningPoint[] } {
  const pays = money.returnPerHectare > 0;
  const points: TurningPoint[] = [];
  if (money.breakEvenPrice !== null) {
    // A dearer tonne helps a candidate that yields more, and hurts one that yields less.
    const side = pays === estimate > 0 ? 'under' : 'over';
    points.push({ kind: 'price', side, value: money.breakEvenPrice });
  }
  points.push({ kind: 'gap', side: pays ? 'under' : 'over', value: money.breakEvenGap });
  if (money.breakEvenSeedCost !== null) {
    points.push({ kind: 'seed', side: pays ? 'over' : 'under', value: money.breakEvenSeedCost });
  }
  return { pays, points };
}
