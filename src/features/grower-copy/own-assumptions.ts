import { findMostPerHectare, mostPriceRatio } from '#shared/money-limits.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import { budgetSeed } from '#shared/seed-budget.ts';
import { findWorstCostPerTonne } from '#shared/tonne-costs.ts';
import { isPossible, type OwnName, type OwnNumbers } from './own-numbers-fragment.ts';

/** A variety whose seed the reader may price. */
export type SeedOfVariety = {
  name: OwnName;
  varietyId: string;
  varietyName: string;
  /** Seed, treatment and royalty per ha in the copy; null where the copy does not know them. */
  frozen: number | null;
};

/**
 * The varieties in the order of the copy, the current one first. Seed that is kept back is left out: what it costs
 * follows from the price of the grain.
 */
export function listSeeds(
  varieties: readonly { varietyId: string; varietyName: string }[],
  { seedCosts }: MoneyAssumptions,
): SeedOfVariety[] {
  return varieties.flatMap(({ varietyId, varietyName }, i): SeedOfVariety[] => {
    const cost = seedCosts[varietyId];
    if (cost?.basis === 'saved') return [];
    const budget = budgetSeed(cost);
    const sum = budget && budget.seed + budget.treatment + budget.royalty;
    // To the cent, as it is shown: whoever types that again means the copy's own.
    const frozen = sum === null ? null : Math.round(sum * 100) / 100;
    return [{ name: `seed${i}`, varietyId, varietyName, frozen }];
  });
}

/** The frozen assumptions with one price in place of the range: what the grower asks is "at this price". */
export function withPrice(assumptions: MoneyAssumptions, price: number): MoneyAssumptions {
  return { ...assumptions, priceLow: price, priceMiddle: price, priceHigh: price };
}

/** With another cost of a variety's seed, treatment and royalty together, per ha; whatever else is known of it stays. */
export function withSeed(
  assumptions: MoneyAssumptions,
  varietyId: string,
  perHectare: number,
): MoneyAssumptions {
  const own = {
    ...assumptions.seedCosts[varietyId],
    ...{ basis: 'flat' as const, seedPerHectare: perHectare, treatmentPerHectare: 0, royaltyPerHectare: 0 },
  };
  return { ...assumptions, seedCosts: { ...assumptions.seedCosts, [varietyId]: own } };
}

/** Why a number of one's own does not count; null where it does. A price is held to its costs, all to the limits of the panel. */
export function refuseOwnNumber(
  name: OwnName,
  value: number | null,
  frozen: MoneyAssumptions,
): 'unreadable' | 'tooLow' | 'priceTooHigh' | 'seedTooHigh' | null {
  if (name === 'price' && value !== null && value <= findWorstCostPerTonne(frozen)) return 'tooLow';
  if (!isPossible(name, value)) return 'unreadable';
  if (name !== 'price') return value > findMostPerHectare(frozen.priceMiddle) ? 'seedTooHigh' : null;
  return value > mostPriceRatio * frozen.priceMiddle ? 'priceTooHigh' : null;
}

/** The reader's own numbers that count. */
export type OwnAssumptions = {
  assumptions: MoneyAssumptions;
  /** null: the copy's own */
  price: number | null;
  seeds: { seed: SeedOfVariety; perHectare: number }[];
};

/** @returns the frozen assumptions themselves where nothing of one's own counts */
export function readOwnAssumptions(
  frozen: MoneyAssumptions,
  seeds: readonly SeedOfVariety[],
  own: OwnNumbers,
): OwnAssumptions {
  const counted = (name: OwnName): number | null => {
    const value = own.get(name) ?? null;
    return refuseOwnNumber(name, value, frozen) === null ? value : null;
  };
  const tried = counted('price');
  const price = tried === frozen.priceMiddle ? null : tried;
  const ownSeeds = seeds.flatMap((seed) => {
    const perHectare = counted(seed.name);
    return perHectare === null ? [] : [{ seed, perHectare }];
  });
  const atPrice = price === null ? frozen : withPrice(frozen, price);
  return {
    price,
    seeds: ownSeeds,
    assumptions: ownSeeds.reduce(
      (money, { seed, perHectare }) => withSeed(money, seed.varietyId, perHectare),
      atPrice,
    ),
  };
}
