import { z } from 'zod';
import { studentUpperTail } from './student-tail.ts';
import { judgeMoney, moneyVerdictCode, type MoneyVerdictCode } from './verdict.ts';

const amount = z.number().min(0).max(1_000_000);
/** No tonne of any crop costs more, in any currency that is likely here. */
const highestPrice = 1_000_000;
const price = z.number().positive().max(highestPrice);

/** What a hectare's seed of one variety costs, in the currency of the assumptions. */
export const seedCost = z.object({
  seedPerHectare: amount,
  treatmentPerHectare: amount,
  royaltyPerHectare: amount,
});
export type SeedCost = z.infer<typeof seedCost>;

/** The money side of a weigh-up: prices per tonne at standard moisture, costs per tonne and per hectare. */
export const moneyAssumptions = z
  .object({
    currency: z.string().regex(/^[A-Z]{3}$/),
    priceLow: price,
    priceMiddle: price,
    priceHigh: price,
    haulagePerTonne: amount,
    dryingPerTonne: amount,
    /** By variety id, the current variety's among them; a variety without a line has no money verdict. */
    seedCosts: z.record(z.uuid(), seedCost),
    /** Date of the price sheet the defaults came from; null when there was none. */
    priceSheetDate: z.iso.date().nullable(),
  })
  .refine((money) => money.priceLow <= money.priceMiddle && money.priceMiddle <= money.priceHigh, {
    path: ['priceMiddle'],
    message: 'price-order',
  })
  .refine((money) => money.priceLow > money.haulagePerTonne + money.dryingPerTonne, {
    path: ['priceLow'],
    message: 'price-under-costs',
  });
export type MoneyAssumptions = z.infer<typeof moneyAssumptions>;

/** A gap as a distribution: location and scale of a t with its df, t/ha. */
export const gapDistribution = z.object({ estimate: z.number(), se: z.number(), df: z.number() });
export type GapDistribution = z.infer<typeof gapDistribution>;

export const moneyResult = z.object({
  /** Candidate's seed, treatment and royalty minus the current variety's, per ha. */
  extraCostPerHectare: z.number(),
  /** t/ha at which the candidate just pays, at the middle price. */
  breakEvenGap: z.number(),
  /** Expected return over the current variety, per ha, at the middle price. */
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
});
export type MoneyResult = z.infer<typeof moneyResult>;

const sumSeedCost = (cost: SeedCost): number =>
  cost.seedPerHectare + cost.treatmentPerHectare + cost.royaltyPerHectare;

/**
 * Partial budget of sowing the candidate instead of the current variety: only what changes counts.
 * @param estimate gap on which the return is reckoned, t/ha
 * @param ownSeason distribution of the gap on the grower's own land in another season; null where the evidence gives none
 * @returns null when a seed cost is missing: an unknown cost is not a cost of zero
 * Source: partial budget, domain.md [10]; chance from estimate and SED after Esker & Conley (2012), Crop Sci. 52:351–359.
 */
export function weighMoney(
  candidateId: string,
  currentId: string,
  estimate: number,
  ownSeason: GapDistribution | null,
  money: MoneyAssumptions,
): MoneyResult | null {
  const candidateCost = money.seedCosts[candidateId];
  const currentCost = money.seedCosts[currentId];
  if (candidateCost === undefined || currentCost === undefined) return null;
  const extra = sumSeedCost(candidateCost) - sumSeedCost(currentCost);
  const perTonne = money.haulagePerTonne + money.dryingPerTonne;
  const returnAt = (priceOfTonne: number): number => estimate * (priceOfTonne - perTonne) - extra;
  const chance = ownSeason === null ? null : chancePays(ownSeason, extra, perTonne, money);
  const turningPrice = extra / estimate + perTonne;
  const turningSeed = sumSeedCost(candidateCost) + returnAt(money.priceMiddle);
  const verdict: MoneyVerdictCode = judgeMoney(chance);
  return {
    extraCostPerHectare: extra,
    breakEvenGap: extra / (money.priceMiddle - perTonne),
    returnPerHectare: returnAt(money.priceMiddle),
    returnAtLowPrice: returnAt(money.priceLow),
    returnAtHighPrice: returnAt(money.priceHigh),
    breakEvenPrice: turningPrice > perTonne && turningPrice <= highestPrice ? turningPrice : null,
    breakEvenSeedCost: turningSeed >= 0 ? turningSeed : null,
    chancePays: chance,
    verdict,
  };
}

/**
 * P(gap × net price > extra cost), averaged over a triangular price between low, middle and high.
 * The average is a fixed quadrature over the price's quantiles: the same input gives the same output.
 */
function chancePays(gap: GapDistribution, extra: number, perTonne: number, money: MoneyAssumptions): number {
  let sum = 0;
  for (let i = 0; i < priceQuantiles.length; i += 1) {
    const net = triangularQuantile(priceQuantiles[i] ?? 0.5, money) - perTonne;
    const threshold = extra / net;
    sum +=
      gap.se === 0
        ? Number(gap.estimate > threshold)
        : studentUpperTail((threshold - gap.estimate) / gap.se, gap.df);
  }
  return sum / priceQuantiles.length;
}

/** Midpoints of 32 equal slices of probability. */
const priceQuantiles = Array.from({ length: 32 }, (_, i) => (i + 0.5) / 32);

/** Quantile of the triangular distribution of the price. */
function triangularQuantile(probability: number, money: MoneyAssumptions): number {
  const { priceLow: low, priceMiddle: mode, priceHigh: high } = money;
  if (low === high) return mode;
  const split = (mode - low) / (high - low);
  return probability < split
    ? low + Math.sqrt(probability * (high - low) * (mode - low))
    : high - Math.sqrt((1 - probability) * (high - low) * (high - mode));
}
