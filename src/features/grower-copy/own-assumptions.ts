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

/** The reader's own numbers that count: a price that does not cover its costs counts for nothing. */
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
  const tried = own.get('price') ?? frozen.priceMiddle;
  const price = tried !== frozen.priceMiddle && tried > findWorstCostPerTonne(frozen) ? tried : null;
  const ownSeeds = seeds.flatMap((seed) => {
    const perHectare = own.get(seed.name);
    return perHectare === undefined || !isPossible(seed.name, perHectare) ? [] : [{ seed, perHectare }];
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
