import { z } from 'zod';
import { findMoneyExcess } from './money-limits.ts';
import { findWorstCostPerTonne } from './tonne-costs.ts';
import { moneyVerdictCode } from './verdict.ts';

const amount = z.number().min(0).max(1_000_000);
/** No tonne of any crop costs more, in any currency that is likely here. */
const price = z.number().positive().max(1_000_000);
const moisture = z.number().min(0).max(60);

/** How the seed of a variety is told: a cost per hectare, bought by the kilogram, or kept back from the grower's own grain. */
export const seedBasis = z.enum(['flat', 'rate', 'saved']);
export type SeedBasis = z.infer<typeof seedBasis>;

/**
 * What sowing one variety costs and brings besides its yield, in the currency of the assumptions. What is left out is
 * not known: it is never taken as zero where the answer hangs on it.
 */
export const seedCost = z.object({
  /** `flat` where it is left out, as in weigh-ups stored before there was a choice. */
  basis: seedBasis.optional(),
  /** Per hectare; counts for the basis `flat`. */
  seedPerHectare: amount.nullable(),
  treatmentPerHectare: amount,
  royaltyPerHectare: amount,
  /** Counts for the basis `rate`. */
  seedPricePerKg: z.number().min(0).max(100_000).optional(),
  /** What the kg/ha follow from, for the bases `rate` and `saved`. */
  targetPlantsM2: z.number().positive().max(5000).optional(),
  thousandKernelWeightG: z.number().positive().max(5000).optional(),
  germinationPercent: z.number().min(1).max(100).optional(),
  /** Share of the living seeds that give no plant. */
  mortalityPercent: z.number().min(0).max(99).optional(),
  /** Per tonne of seed; counts for the basis `saved`. */
  cleaningPerTonne: amount.optional(),
  /** Moisture of the grain when it comes off the field. */
  harvestMoisturePercent: moisture.optional(),
  harvestPerHectare: amount.optional(),
  strawPerHectare: amount.optional(),
});
export type SeedCost = z.infer<typeof seedCost>;

/** What a buyer adds to the price of a tonne, or takes off it, for the level of a trait. */
export const qualityRule = z.object({
  traitSlug: z.string().min(1).max(80),
  side: z.enum(['at-least', 'under']),
  /** In the trait's unit. */
  limit: z.number().min(-10_000).max(10_000),
  /** Positive for a premium, negative for a discount. */
  perTonne: z.number().min(-1_000_000).max(1_000_000),
});
export type QualityRule = z.infer<typeof qualityRule>;

/**
 * The money side of a weigh-up as it is kept: prices per tonne at standard moisture, costs per tonne off the field and per
 * hectare. What is saved is held to limits as well (`moneyInput`).
 */
export const moneyAssumptions = z
  .object({
    currency: z.string().regex(/^[A-Z]{3}$/),
    priceLow: price,
    priceMiddle: price,
    priceHigh: price,
    /** Haulage, drying and harvest: per tonne as it comes off the field. */
    haulagePerTonne: amount,
    /** Whatever its moisture; `dryingPerPoint` comes on top of it. */
    dryingPerTonne: amount,
    harvestPerTonne: amount.optional(),
    /** Per tonne off the field and point of moisture above the standard. */
    dryingPerPoint: amount.optional(),
    /** Of the crop, as it stood when the assumptions were taken over. */
    standardMoisturePercent: moisture.optional(),
    qualityRules: z.array(qualityRule).max(12).optional(),
    /** By trait, the level of the current variety as the grower knows it; without it that of the trials counts. */
    currentLevels: z.record(z.string(), z.number().min(-10_000).max(10_000)).optional(),
    /** By variety id, the current variety's among them; a variety without a line has no money verdict. */
    seedCosts: z.record(z.uuid(), seedCost),
    /** Date of the price sheet the defaults came from; null when there was none. */
    priceSheetDate: z.iso.date().nullable(),
  })
  .refine((money) => money.priceLow <= money.priceMiddle && money.priceMiddle <= money.priceHigh, {
    path: ['priceMiddle'],
    message: 'price-order',
  })
  .refine((money) => money.priceLow > findWorstCostPerTonne(money), {
    path: ['priceLow'],
    message: 'price-under-costs',
  });
export type MoneyAssumptions = z.infer<typeof moneyAssumptions>;

/** Refuses every figure beyond its limit, where it stands. */
export function refuseMoneyExcess(
  money: Parameters<typeof findMoneyExcess>[0],
  context: Pick<z.core.$RefinementCtx, 'addIssue'>,
): void {
  for (const { path, reason } of findMoneyExcess(money))
    context.addIssue({ code: 'custom', path, message: reason });
}

/** The money side of a weigh-up as it is saved: nothing beyond the limits of `money-limits.ts`, which came later. */
export const moneyInput = moneyAssumptions.superRefine(refuseMoneyExcess);

/** A gap as a distribution: location and scale of a t with its df, in the trait's unit. */
export const gapDistribution = z.object({ estimate: z.number(), se: z.number(), df: z.number() });
export type GapDistribution = z.infer<typeof gapDistribution>;

/** What the current variety gives in the trials used, in the trait's unit: what premiums and discounts start from. */
export const currentLevel = z.object({
  traitSlug: z.string(),
  /** Mean over the trials in which it stood. */
  mean: z.number(),
  /** Standard deviation of its means between those trials: fields and seasons; null for fewer than three. */
  spread: z.number().nullable(),
  trials: z.number().int(),
});
export type CurrentLevel = z.infer<typeof currentLevel>;

/** Expected premium per tonne of both, negative for a discount. */
export const qualityWorth = z.object({ current: z.number(), candidate: z.number() });
export type QualityWorth = z.infer<typeof qualityWorth>;

/** Parts that came later are left out in copies frozen before. */
export const moneyResult = z.object({
  /** Candidate's seed, treatment, royalty and harvest less straw, minus the current variety's, per ha at the middle price. */
  extraCostPerHectare: z.number(),
  /** t/ha at which the candidate just pays, at the middle price. */
  breakEvenGap: z.number(),
  /** Return over the current variety, per ha, at the middle price. */
  returnPerHectare: z.number(),
  /** At the low and the high price. */
  returnAtLowPrice: z.number(),
  returnAtHighPrice: z.number(),
  /** Price per tonne at which the estimated gap just pays; null where no price can turn the answer. */
  breakEvenPrice: z.number().nullable(),
  /** Seed cost per ha of the candidate at which the estimated gap just pays; null where it would be negative. */
  breakEvenSeedCost: z.number().nullable(),
  /** Chance, 0 to 1, that it returns more on the grower's own land in another season; null without an own-season interval. */
  chancePays: z.number().nullable(),
  verdict: moneyVerdictCode,
  /** Chance, 0 to 1, that it returns more in the region on average over seasons. */
  chanceInRegion: z.number().nullish(),
  /** Mean over prices, seasons and quality, per ha. */
  expectedReturn: z.number().nullish(),
  /** In one season of ten the own land returns less than this, and in one of ten more than the other; per ha. */
  badReturn: z.number().nullish(),
  goodReturn: z.number().nullish(),
  /** What a tonne leaves at the middle price after its costs, premiums reckoned in. */
  netPrice: z.object({ current: z.number(), candidate: z.number() }).nullish(),
  /** null without rules; `unknown` where a trait of the rules was not measured on both. */
  quality: z.union([qualityWorth, z.literal('unknown')]).nullish(),
  /** Yield of the current variety that unequal net prices count on, t/ha, and whose; null where it makes no difference. */
  baseYield: z.object({ value: z.number(), from: z.enum(['grower', 'trials']) }).nullish(),
});
export type MoneyResult = z.infer<typeof moneyResult>;
