import type { MoneyAssumptions } from '#shared/money.ts';
import { spreadPrice } from '#shared/price-range.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { priceAnswer } from '#server/weigh-up/price-answer.ts';
import { weighEvidence } from '#server/weigh-up/weigh-evidence.ts';
import { Bins, type ReliabilityBin } from './chance-bins.ts';
import { drawPremiumWorld, type PremiumPlan, type PremiumWorld, type Season } from './premium-world.ts';

export interface PremiumReliability {
  readonly plan: PremiumPlan;
  /** chance that it pays on the own land in another season: of one planned candidate, and of the best of the list */
  readonly planned: readonly ReliabilityBin[];
  readonly picked: readonly ReliabilityBin[];
  /** chance that it returns more in the region on average over seasons, of the planned one */
  readonly average: readonly ReliabilityBin[];
}

const USUAL_YIELD = 7;
const COSTS_PER_TONNE = 25;
const EXTRA_SEED = 22;
const PRICES = { priceLow: 220, priceMiddle: 250, priceHigh: 290 };
/** A good premium per tonne for each of two limits on protein, near to which the region lies. */
const STEPS = [
  { limit: 12, perTonne: 8 },
  { limit: 13, perTonne: 8 },
];

function writeMoney(varietyIds: readonly string[]): MoneyAssumptions {
  const seed = (seedPerHectare: number) => ({
    ...{ seedPerHectare, treatmentPerHectare: 0, royaltyPerHectare: 0 },
  });
  return {
    ...{ currency: 'EUR', ...PRICES, haulagePerTonne: COSTS_PER_TONNE, dryingPerTonne: 0 },
    qualityRules: STEPS.map((step) => ({ ...step, traitSlug: 'protein', side: 'at-least' })),
    seedCosts: Object.fromEntries(varietyIds.map((id, k) => [id, seed(k === 0 ? 60 : 60 + EXTRA_SEED)])),
    priceSheetDate: null,
  };
}

function weighPriced({ evidence, varietyIds }: PremiumWorld): CandidateResult[] {
  const [currentVarietyId = '', ...candidateIds] = varietyIds;
  const answer = weighEvidence(evidence, {
    ...{ currentVarietyId, candidateIds, kind: 'several', list: [], traits: 'all', margins: {} },
    ...{ acceptsOtherRegions: false, askedInSeason: 2025 },
  });
  const ground = {
    ...{ money: writeMoney(varietyIds), priceSheet: null, usualYield: USUAL_YIELD, practicalMargin: 0.05 },
    askedAt: new Date(0),
  };
  return priceAnswer(answer, { id: currentVarietyId, name: 'V1' }, ground).candidates;
}

const payFor = (protein: number): number =>
  STEPS.reduce((sum, { limit, perTonne }) => sum + (protein >= limit ? perTonne : 0), 0);

/** What sowing the candidate returns more in one season at one price, per ha. */
function reckonSeason(price: number, { gap, current, candidate }: Season): number {
  const net = price - COSTS_PER_TONNE;
  return (USUAL_YIELD + gap) * (net + payFor(candidate)) - USUAL_YIELD * (net + payFor(current)) - EXTRA_SEED;
}

/** Further seasons drawn to know what is true of a candidate. */
const SEASONS_DRAWN = 480;

/**
 * Chances that a candidate pays with a premium for protein, as the product states them (evidence to price, none of it a
 * copy) and as they come true.
 */
export function measurePremiums(plan: PremiumPlan, runs: number, seed: number): PremiumReliability {
  const bins = { planned: new Bins(), picked: new Bins(), average: new Bins() };
  const prices = spreadPrice(PRICES);
  for (let run = 0; run < runs; run++) {
    const world = drawPremiumWorld(plan, seed + 7919 * run);
    const candidates = weighPriced(world);
    const returnsOf = ({ varietyId }: CandidateResult): number[] =>
      Array.from({ length: SEASONS_DRAWN }, (_, i) =>
        reckonSeason(prices[i % prices.length]!, world.drawSeason(world.varietyIds.indexOf(varietyId))),
      );
    const gapOf = ({ gap }: CandidateResult): number => gap?.estimate ?? -Infinity;
    const planned = candidates[0];
    const best = candidates.reduce((a, b) => (gapOf(b) > gapOf(a) ? b : a));
    for (const [candidate, bin] of [
      [planned, bins.planned],
      [best, bins.picked],
    ] as const) {
      if (candidate?.money?.chancePays == null || candidate.money.quality === 'unknown') continue;
      const returns = returnsOf(candidate);
      const share = returns.filter((value) => value > 0).length / returns.length;
      bin.add(candidate.money.chancePays, share);
      const mean = returns.reduce((sum, value) => sum + value, 0) / returns.length;
      if (bin === bins.planned) bins.average.add(candidate.money.chanceInRegion!, Number(mean > 0));
    }
  }
  return {
    plan,
    planned: bins.planned.list(),
    picked: bins.picked.list(),
    average: bins.average.list(),
  };
}
