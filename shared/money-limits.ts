import type { SeedCost } from './money.ts';
import { budgetSeed } from './seed-budget.ts';
import { findWorstCostPerTonne } from './tonne-costs.ts';

/*
 * The limits are set in the crop's own price, since no amount is absurd in every currency. They stand well above what any
 * farm pays, and stop figures with a lost decimal point or in another unit, which would be reckoned with as if they were meant.
 */

/** How many times the low price the high one may be: no crop's price has moved that far within a season. */
export const mostPriceRatio = 10;
/** Tonnes whose price no cost by the hectare exceeds. Among the dearest are cane setts, some 35 t of cane; cereal seed is under one. */
export const mostTonnesPerHectare = 50;
/** How many times the middle price a premium or discount may be: it is a part of a price, never more than the price again. */
export const mostPremiumRatio = 1;

/** A figure beyond its limit: where it stands, and why it is refused, as `errors:fields` names it. */
export type MoneyExcess = {
  path: (string | number)[];
  reason: 'price-spread' | 'over-crop-worth' | 'over-price';
};

type LimitedMoney = Parameters<typeof findWorstCostPerTonne>[0] & {
  priceLow: number;
  priceMiddle: number;
  priceHigh: number;
  seedCosts: Readonly<Record<string, SeedCost>>;
};

const perHectareParts = [
  'treatmentPerHectare',
  'royaltyPerHectare',
  'harvestPerHectare',
  'strawPerHectare',
] as const;

/** The figure that the cost of the seed hangs on, by the basis that it is told on. */
const seedParts = {
  flat: 'seedPerHectare',
  rate: 'seedPricePerKg',
  saved: 'cleaningPerTonne',
} as const satisfies Record<NonNullable<SeedCost['basis']>, keyof SeedCost>;

/** The most that anything may cost or bring per ha, at a price per tonne. */
export const findMostPerHectare = (pricePerTonne: number): number => mostTonnesPerHectare * pricePerTonne;

/** Prices that are refused for themselves, half typed say, are no measure of anything else. */
function hasSoundPrices(money: LimitedMoney): boolean {
  const { priceLow, priceMiddle, priceHigh } = money;
  return priceLow > findWorstCostPerTonne(money) && priceLow <= priceMiddle && priceMiddle <= priceHigh;
}

/** Every figure beyond its limit. What was stored before there were limits is reckoned with all the same; only saving asks. */
export function findMoneyExcess(money: LimitedMoney): MoneyExcess[] {
  const { priceLow, priceMiddle, priceHigh, qualityRules = [], seedCosts } = money;
  const excess: MoneyExcess[] = [];
  if (!hasSoundPrices(money)) return excess;
  if (priceHigh > mostPriceRatio * priceLow) excess.push({ path: ['priceHigh'], reason: 'price-spread' });
  qualityRules.forEach(({ perTonne }, i) => {
    if (Math.abs(perTonne) > mostPremiumRatio * priceMiddle)
      excess.push({ path: ['qualityRules', i, 'perTonne'], reason: 'over-price' });
  });
  for (const [varietyId, cost] of Object.entries(seedCosts)) {
    for (const part of listDearParts(cost, findMostPerHectare(priceMiddle)))
      excess.push({ path: ['seedCosts', varietyId, part], reason: 'over-crop-worth' });
  }
  return excess;
}

function listDearParts(cost: SeedCost, most: number): (keyof SeedCost)[] {
  const dear: (keyof SeedCost)[] = perHectareParts.filter((part) => (cost[part] ?? 0) > most);
  const seed = budgetSeed(cost)?.seed ?? 0;
  return seed > most ? [seedParts[cost.basis ?? 'flat'], ...dear] : dear;
}
