import { demoCrops, type DemoCrop } from './demo-crops.ts';
import { demoSeed, type CropSlug } from './demo-settings.ts';
import { openRandomSource } from './random-source.ts';
import { velmarRegions } from './velmar-geography.ts';

export type DemoSeedCost = {
  variety: string;
  seedPerHectare: number;
  treatmentPerHectare: number;
  royaltyPerHectare: number;
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
  seedCosts: DemoSeedCost[];
};

/** CAD per tonne at standard moisture, and per hectare for seed: of the size of a Canadian season, invented in detail. */
const cropPrices: Record<
  CropSlug,
  { low: number; middle: number; high: number; drying: number; seed: number; treatment: number }
> = {
  'spring-barley': { low: 225, middle: 262, high: 305, drying: 4, seed: 62, treatment: 11 },
  'field-pea': { low: 325, middle: 390, high: 460, drying: 6, seed: 118, treatment: 19 },
  'winter-wheat': { low: 255, middle: 298, high: 350, drying: 4, seed: 71, treatment: 13 },
};

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
    const seedCosts = writeSeedCosts(crop, price.seed, price.treatment);
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
        seedCosts,
      };
    });
  });
}

/** Newer varieties cost more seed and carry a royalty. */
function writeSeedCosts(crop: DemoCrop, seed: number, treatment: number): DemoSeedCost[] {
  const random = openRandomSource(demoSeed, `seed costs ${crop.slug}`);
  return crop.varieties
    .filter((variety) => variety.name !== varietyWithoutSeedCost)
    .map((variety) => {
      const age = Math.max(0, variety.from - 2019);
      return {
        variety: variety.name,
        seedPerHectare: Math.round(seed * (1 + 0.035 * age) + 4 * random.uniform()),
        treatmentPerHectare: treatment,
        royaltyPerHectare: variety.from >= 2022 ? 6.5 : 0,
      };
    });
}
