import type { SeedCost } from './money.ts';

export type SeedingRate = {
  /** Plants wanted on a square metre. */
  plantsM2: number;
  /** Thousand-kernel weight, g. */
  kernelWeightG: number;
  germinationPercent: number;
  /** Of the living seeds, those that give no plant. */
  mortalityPercent: number;
};

/**
 * Seed to sow, kg/ha: plants/m² × TKW g / (100 × survival), survival = germination × (1 − mortality).
 * Source: cereal seed sowing rates, domain.md [8].
 */
export function reckonSeedingRate(rate: SeedingRate): number {
  const survival = (rate.germinationPercent / 100) * (1 - rate.mortalityPercent / 100);
  return (rate.plantsM2 * rate.kernelWeightG) / (100 * survival);
}

/** The kg/ha of a variety's seed; null where a part of it is not known. */
export function findSeedingRate(cost: Partial<SeedCost>): number | null {
  const { targetPlantsM2: plantsM2, thousandKernelWeightG: kernelWeightG } = cost;
  const { germinationPercent, mortalityPercent } = cost;
  if (plantsM2 === undefined || kernelWeightG === undefined) return null;
  if (germinationPercent === undefined || mortalityPercent === undefined) return null;
  return reckonSeedingRate({ plantsM2, kernelWeightG, germinationPercent, mortalityPercent });
}

/** A hectare's seed: what is paid for it, and the grain of one's own that is kept back and so not sold. */
export type SeedBudget = {
  /** Seed or its cleaning, per ha. */
  seed: number;
  treatment: number;
  royalty: number;
  /** t/ha; 0 for seed that is bought */
  keptTonnes: number;
};

/** What the seed of a variety costs on its basis; null where a part of that is not known, which is not a cost of zero. */
export function budgetSeed(cost: SeedCost | undefined): SeedBudget | null {
  if (cost === undefined) return null;
  const further = { treatment: cost.treatmentPerHectare, royalty: cost.royaltyPerHectare };
  const { basis = 'flat', seedPerHectare, seedPricePerKg, cleaningPerTonne } = cost;
  if (basis === 'flat') {
    return seedPerHectare === null ? null : { seed: seedPerHectare, ...further, keptTonnes: 0 };
  }
  const rate = findSeedingRate(cost);
  if (rate === null) return null;
  if (basis === 'rate') {
    return seedPricePerKg === undefined ? null : { seed: rate * seedPricePerKg, ...further, keptTonnes: 0 };
  }
  if (cleaningPerTonne === undefined) return null;
  const keptTonnes = rate / 1000;
  return { seed: keptTonnes * cleaningPerTonne, ...further, keptTonnes };
}
