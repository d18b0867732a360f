import type { QualityRule } from '#shared/money.ts';
import { reckonSeedingRate } from '#shared/seed-budget.ts';
import { demoCrops, type DemoCrop } from './demo-crops.ts';
import { demoSeed, type CropSlug } from './demo-settings.ts';
import { openRandomSource } from './random-source.ts';
import { velmarRegions } from './velmar-geography.ts';

export type DemoSeedCost = {
  variety: string;
  seedPerHectare: number;
  treatmentPerHectare: number;
  royaltyPerHectare: number;
  seedPricePerKg: number;
  targetPlantsM2: number;
  thousandKernelWeightG: number;
  germinationPercent: number;
  mortalityPercent: number;
  cleaningPerTonne: number;
  harvestMoisturePercent: number;
  strawPerHectare?: number;
};

export type DemoPriceSheet = {
  crop: CropSlug;
  region: string;
  effectiveOn: string;
  currency: string;
  priceLow: number;
  priceMiddle: number;
  priceHigh: number;
  haulagePerTonne: number;
  dryingPerTonne: number;
  dryingPerPoint: number;
  qualityRules: QualityRule[];
  seedCosts: DemoSeedCost[];
};

type CropPrice = {
  low: number;
  middle: number;
  high: number;
  drying: number;
  seed: number;
  treatment: number;
  /** Of seed: g of a thousand kernels, and the share of living seeds that give no plant, %. */
  kernelWeight: number;
  mortality: number;
  /** Per ha, where straw is sold. */
  straw: number | null;
  qualityRules: QualityRule[];
};

const proteinRule = (side: QualityRule['side'], limit: number, perTonne: number): QualityRule => ({
  ...{ traitSlug: 'protein', side, limit, perTonne },
});

/** CAD per tonne at standard moisture, and per hectare for seed: of the size of a Canadian season, invented in detail. */
const cropPrices: Record<CropSlug, CropPrice> = {
  'spring-barley': {
    ...{ low: 225, middle: 262, high: 305, drying: 4, seed: 62, treatment: 11 },
    ...{ kernelWeight: 46, mortality: 12, straw: 38 },
    // Maltsters pay for barley that is not too rich.
    qualityRules: [proteinRule('under', 12, 6)],
  },
  'field-pea': {
    ...{ low: 325, middle: 390, high: 460, drying: 6, seed: 118, treatment: 19 },
    ...{ kernelWeight: 235, mortality: 10, straw: null },
    qualityRules: [],
  },
  'winter-wheat': {
    ...{ low: 255, middle: 298, high: 350, drying: 4, seed: 71, treatment: 13 },
    ...{ kernelWeight: 43, mortality: 13, straw: 34 },
    qualityRules: [proteinRule('at-least', 12, 5), proteinRule('at-least', 13, 5)],
  },
};

/** CAD per tonne and point of moisture. */
const dryingPerPoint = 1.6;
const cleaningPerTonne = 62;

/** What a region adds to the price and pays for the road to the elevator, CAD per tonne. */
const regionTerms: Record<string, { price: number; haulage: number; drying: number }> = {
  'upper-velmar': { price: -4, haulage: 19, drying: 5 },
  'lower-velmar': { price: 3, haulage: 11, drying: 2 },
  'orlaine-plateau': { price: -2, haulage: 23, drying: 0 },
  'sarrow-coast': { price: 6, haulage: 9, drying: 8 },
};

/** So new that no seed price has been published: its money verdict must stay open. */
export const varietyWithoutSeedCost = 'Larkhollow';

/** The 2026 sheets: one for every crop in every region, the coast without trials among them. */
export function writePriceSheets(): DemoPriceSheet[] {
  return demoCrops.flatMap((crop) => {
    const price = cropPrices[crop.slug];
    const seedCosts = writeSeedCosts(crop, price);
    return velmarRegions.map((region) => {
      const terms = regionTerms[region.slug] ?? { price: 0, haulage: 0, drying: 0 };
      return {
        crop: crop.slug,
        region: region.slug,
        effectiveOn: '2026-10-15',
        currency: 'CAD',
        priceLow: price.low + terms.price,
        priceMiddle: price.middle + terms.price,
        priceHigh: price.high + terms.price,
        haulagePerTonne: terms.haulage,
        dryingPerTonne: price.drying + terms.drying,
        dryingPerPoint,
        qualityRules: price.qualityRules,
        seedCosts,
      };
    });
  });
}

/** Newer varieties cost more seed and carry a royalty; each lot of seed has its own weight, germination and moisture. */
function writeSeedCosts(crop: DemoCrop, price: CropPrice): DemoSeedCost[] {
  const random = openRandomSource(demoSeed, `seed costs ${crop.slug}`);
  const lots = openRandomSource(demoSeed, `seed lots ${crop.slug}`);
  return crop.varieties
    .filter((variety) => variety.name !== varietyWithoutSeedCost)
    .map((variety) => {
      const age = Math.max(0, variety.from - 2019);
      const about = Math.round(price.seed * (1 + 0.035 * age) + 4 * random.uniform());
      const lot = {
        plantsM2: crop.seedingRatePlantsM2,
        kernelWeightG: Math.round(price.kernelWeight * (0.94 + 0.12 * lots.uniform()) * 10) / 10,
        germinationPercent: 93 + lots.integer(6),
        mortalityPercent: price.mortality,
      };
      const rate = reckonSeedingRate(lot);
      const seedPricePerKg = Math.round((about / rate) * 100) / 100;
      return {
        variety: variety.name,
        seedPerHectare: Math.round(rate * seedPricePerKg * 10) / 10,
        treatmentPerHectare: price.treatment,
        royaltyPerHectare: variety.from >= 2022 ? 6.5 : 0,
        seedPricePerKg,
        targetPlantsM2: lot.plantsM2,
        thousandKernelWeightG: lot.kernelWeightG,
        germinationPercent: lot.germinationPercent,
        mortalityPercent: lot.mortalityPercent,
        cleaningPerTonne,
        harvestMoisturePercent: crop.standardMoisturePercent + Math.round(10 + 20 * lots.uniform()) / 10,
        ...(price.straw !== null && { strawPerHectare: price.straw + lots.integer(7) }),
      };
    });
}
