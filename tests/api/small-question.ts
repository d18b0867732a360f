import type { MoneyAssumptions } from '#shared/money.ts';
import type { WeighUpInput } from '#shared/weigh-up.ts';
import { idIn, varietyNames, type SmallWorld } from './small-world.ts';

/** Prices alone: what seed costs is not known of any variety. */
export const barePrices: MoneyAssumptions = {
  currency: 'CAD',
  priceLow: 220,
  priceMiddle: 260,
  priceHigh: 300,
  haulagePerTonne: 15,
  dryingPerTonne: 5,
  seedCosts: {},
  priceSheetDate: null,
};

/** The same with what the seed of each variety of the small world costs. */
export const fullPrices = (small: SmallWorld): MoneyAssumptions => ({
  ...barePrices,
  seedCosts: Object.fromEntries(
    varietyNames.map((name, i) => [
      idIn(small.varietyIds, name),
      { seedPerHectare: 60 + 6 * i, treatmentPerHectare: 0, royaltyPerHectare: 0 },
    ]),
  ),
  priceSheetDate: '2026-10-15',
});

/** A question in the north of the small world: Anchor is grown, Birch is asked about, unless a test says otherwise. */
export const askSmallQuestion = (small: SmallWorld, change: Partial<WeighUpInput> = {}): WeighUpInput => ({
  cropId: small.cropId,
  regionId: small.regionIds.north,
  seasonFrom: 2023,
  seasonTo: 2025,
  growerName: 'Ada Quern',
  farmName: 'Long Furlong',
  areaHectares: 42,
  currentVarietyId: idIn(small.varietyIds, 'Anchor'),
  candidateIds: [idIn(small.varietyIds, 'Birch')],
  assumptions: barePrices,
  ...change,
});
