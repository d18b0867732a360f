import type { MoneyAssumptions } from './money.ts';

type PriceRange = Pick<MoneyAssumptions, 'priceLow' | 'priceMiddle' | 'priceHigh'>;

/** Midpoints of 32 equal slices of probability. */
const probabilities = Array.from({ length: 32 }, (_, i) => (i + 0.5) / 32);

/**
 * The price as 32 equally likely values, the quantiles of a triangle between low, middle and high: a fixed rule, so the
 * same range gives the same prices.
 */
export function spreadPrice(range: PriceRange): number[] {
  return probabilities.map((probability) => triangularQuantile(probability, range));
}

/** Mean of that triangle. */
export const meanPrice = ({ priceLow, priceMiddle, priceHigh }: PriceRange): number =>
  (priceLow + priceMiddle + priceHigh) / 3;

function triangularQuantile(
  probability: number,
  { priceLow: low, priceMiddle: mode, priceHigh: high }: PriceRange,
): number {
  if (low === high) return mode;
  const split = (mode - low) / (high - low);
  return probability < split
    ? low + Math.sqrt(probability * (high - low) * (mode - low))
    : high - Math.sqrt((1 - probability) * (high - low) * (high - mode));
}
