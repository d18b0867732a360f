import type { MoneyAssumptions, MoneyResult } from './money.ts';

/** One change that, alone, would bring the return of the estimated gap to nothing. */
export type TurningPoint =
  | { kind: 'price'; side: 'under' | 'over'; value: number }
  | { kind: 'gap'; side: 'under' | 'over'; value: number }
  | { kind: 'seed'; side: 'under' | 'over'; value: number };

/** A price is within reach up to so many times the high one, and down to that part of the low one. */
const priceReach = 3;

type PriceEnds = Pick<MoneyAssumptions, 'priceLow' | 'priceHigh'>;

const isWithinReach = (price: number, { priceLow, priceHigh }: PriceEnds): boolean =>
  price >= priceLow / priceReach && price <= priceHigh * priceReach;

/**
 * What would turn the answer of a candidate: the price per tonne, the true gap and the seed cost at which it just pays,
 * and on which side of each the answer is another.
 * @param estimate gap in t/ha on which the return was reckoned
 * @param prices per tonne as assumed: a break-even price that no market comes near turns nothing
 */
export function findTurningPoints(
  money: MoneyResult,
  estimate: number,
  prices: PriceEnds,
): { pays: boolean; points: TurningPoint[] } {
  const pays = money.returnPerHectare > 0;
  const points: TurningPoint[] = [];
  if (money.breakEvenPrice !== null && isWithinReach(money.breakEvenPrice, prices)) {
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
