import type { MoneyAssumptions, MoneyResult, SeedCost } from './money.ts';
import type { MoneyBasis } from './money-basis.ts';
import { judgeMoney } from './money-verdict.ts';
import {
  joinStates,
  listAverageStates,
  listSeasonStates,
  type Premiums,
  type PremiumState,
} from './premium-states.ts';
import { meanPrice, spreadPrice } from './price-range.ts';
import { readQualityOutlook } from './quality-outlook.ts';
import { spreadReturn, type ReturnPart } from './return-spread.ts';
import { budgetSeed, type SeedBudget } from './seed-budget.ts';
import { reckonTonneCosts, type TonneCosts } from './tonne-costs.ts';
import type { CandidateResult } from './weigh-up.ts';

/** No tonne of any crop costs more, in any currency that is likely here. */
const highestPrice = 1_000_000;

/** What of a candidate its money is reckoned from. */
export type PricedCandidate = Pick<CandidateResult, 'varietyId' | 'moneyGap' | 'moneyGapInRegion' | 'traits'>;

/** What changes on a hectare and on a tonne when the candidate is sown instead of the current variety. */
type PairBudget = {
  seed: { current: SeedBudget; candidate: SeedBudget };
  /** Candidate minus current per ha, in money alone: seed that is bought or cleaned, treatment, royalty, harvest, less straw. */
  extraPerHectare: number;
  tonne: TonneCosts;
};

function budgetPair(candidateId: string, currentId: string, money: MoneyAssumptions): PairBudget | null {
  const [candidateCost, currentCost] = [money.seedCosts[candidateId], money.seedCosts[currentId]];
  const [candidate, current] = [budgetSeed(candidateCost), budgetSeed(currentCost)];
  if (!candidateCost || !currentCost || candidate === null || current === null) return null;
  const further =
    differIn('harvestPerHectare', candidateCost, currentCost) -
    differIn('strawPerHectare', candidateCost, currentCost);
  return {
    seed: { current, candidate },
    extraPerHectare: sumSeed(candidate) - sumSeed(current) + further,
    tonne: reckonTonneCosts(currentCost, candidateCost, money),
  };
}

const sumSeed = ({ seed, treatment, royalty }: SeedBudget): number => seed + treatment + royalty;

/** Candidate minus current, where both are known: what is known of one alone is no difference. */
function differIn(
  part: 'harvestPerHectare' | 'strawPerHectare',
  { [part]: candidate }: SeedCost,
  { [part]: current }: SeedCost,
): number {
  return candidate === undefined || current === undefined ? 0 : candidate - current;
}

/**
 * The return as a line over the gap at one price and one pair of premiums: n₁(Y₀ + gap − S₁) − n₀(Y₀ − S₀) − ΔC, with
 * net prices n, the current variety's yield Y₀ and own grain S kept back for seed (both t/ha), ΔC per ha.
 */
function openLine(
  { seed, extraPerHectare, tonne }: PairBudget,
  baseYield: number,
): (price: number, premium: Premiums) => { slope: number; offset: number } {
  return (price, premium) => {
    const net = netPrices(price, premium, tonne);
    const kept = net.candidate * seed.candidate.keptTonnes - net.current * seed.current.keptTonnes;
    const offset = baseYield * (net.candidate - net.current) - kept - extraPerHectare;
    return { slope: net.candidate, offset };
  };
}

const netPrices = (price: number, premium: Premiums, tonne: TonneCosts): TonneCosts => ({
  current: price + premium.current - tonne.current,
  candidate: price + premium.candidate - tonne.candidate,
});

/** Premiums of a single season, and of the average over seasons. */
type PremiumOutlook = { season: PremiumState[]; average: PremiumState[]; isUnknown: boolean };

/** What each candidate's traits were asked last, and the answer: a price that is typed changes neither. */
const lastOutlooks = new WeakMap<PricedCandidate['traits'], { asked: unknown[]; outlook: PremiumOutlook }>();

function outlookOf(candidate: PricedCandidate, basis: MoneyBasis, money: MoneyAssumptions): PremiumOutlook {
  const asked = [basis.levels, money.qualityRules, money.currentLevels];
  const last = lastOutlooks.get(candidate.traits);
  if (last?.asked.every((part, i) => part === asked[i])) return last.outlook;
  const outlook = findOutlook(candidate, basis, money);
  lastOutlooks.set(candidate.traits, { asked, outlook });
  return outlook;
}

function findOutlook(candidate: PricedCandidate, basis: MoneyBasis, money: MoneyAssumptions): PremiumOutlook {
  const traits = readQualityOutlook(candidate.traits, basis, money);
  const known = traits === 'unknown' ? [] : traits;
  return {
    season: joinStates(known.map(listSeasonStates)),
    average: joinStates(known.map(listAverageStates)),
    isUnknown: traits === 'unknown',
  };
}

function meanPremium(states: readonly PremiumState[]): Premiums {
  const mean = (part: 'current' | 'candidate'): number =>
    states.reduce((sum, state) => sum + state.weight * state[part], 0);
  return { current: mean('current'), candidate: mean('candidate') };
}

/**
 * Partial budget of sowing the candidate instead of the current variety: only what changes counts. Price, yield gap and
 * quality are taken as independent of each other.
 * @returns null when the evidence is too thin to price, or a seed cost is missing: an unknown cost is not a cost of zero
 * Source: partial budget, domain.md [10]; chance from estimate and SED after Esker & Conley (2012), Crop Sci. 52:351–359.
 */
export function weighMoney(
  candidate: PricedCandidate,
  basis: MoneyBasis,
  money: MoneyAssumptions,
): MoneyResult | null {
  const { moneyGap } = candidate;
  const pair = budgetPair(candidate.varietyId, basis.currentVarietyId, money);
  if (moneyGap === null || pair === null) return null;
  const premiums = outlookOf(candidate, basis, money);
  const expected = meanPremium(premiums.season);
  const atMiddle = netPrices(money.priceMiddle, expected, pair.tonne);
  const countsOnYield = atMiddle.candidate !== atMiddle.current || premiums.season.length > 1;
  const baseYield = countsOnYield ? findBaseYield(basis) : null;
  if (countsOnYield && baseYield === null) return null;
  const lineAt = openLine(pair, baseYield?.value ?? 0);
  const returnAt = (price: number): number => {
    const { slope, offset } = lineAt(price, expected);
    return moneyGap.estimate * slope + offset;
  };
  const middle = lineAt(money.priceMiddle, expected);
  const season = spreadReturn(listParts(lineAt, money, premiums.season), moneyGap);
  const chancePays = season.chanceOver(0);
  const turningSeed = sumOwnSeed(pair.seed.candidate, atMiddle.candidate) + returnAt(money.priceMiddle);
  return {
    extraCostPerHectare:
      pair.extraPerHectare +
      pair.seed.candidate.keptTonnes * atMiddle.candidate -
      pair.seed.current.keptTonnes * atMiddle.current,
    breakEvenGap: -middle.offset / middle.slope,
    returnPerHectare: returnAt(money.priceMiddle),
    returnAtLowPrice: returnAt(money.priceLow),
    returnAtHighPrice: returnAt(money.priceHigh),
    breakEvenPrice: findTurningPrice(
      returnAt(money.priceMiddle),
      moneyGap.estimate - pair.seed.candidate.keptTonnes + pair.seed.current.keptTonnes,
      money,
      (price) => netPrices(price, expected, pair.tonne),
    ),
    breakEvenSeedCost: turningSeed >= 0 ? turningSeed : null,
    chancePays,
    verdict: judgeMoney(chancePays),
    chanceInRegion: candidate.moneyGapInRegion
      ? spreadReturn(listParts(lineAt, money, premiums.average), candidate.moneyGapInRegion).chanceOver(0)
      : null,
    expectedReturn: returnAt(meanPrice(money)),
    badReturn: season.quantile(0.1),
    goodReturn: season.quantile(0.9),
    netPrice: atMiddle,
    quality: (money.qualityRules ?? []).length === 0 ? null : premiums.isUnknown ? 'unknown' : expected,
    baseYield,
  };
}

/** What the current variety yields: as the grower usually gets it, else as it did in the trials. */
function findBaseYield({ usualYield, levels }: MoneyBasis): NonNullable<MoneyResult['baseYield']> | null {
  if (usualYield !== null) return { value: usualYield, from: 'grower' };
  const level = levels.find(({ traitSlug }) => traitSlug === 'yield');
  return level === undefined ? null : { value: level.mean, from: 'trials' };
}

/** What a hectare's seed comes to, grain kept back at what it would have brought. */
const sumOwnSeed = (seed: SeedBudget, netPrice: number): number => sumSeed(seed) + seed.keptTonnes * netPrice;

function listParts(
  lineAt: ReturnType<typeof openLine>,
  money: MoneyAssumptions,
  states: readonly PremiumState[],
): ReturnPart[] {
  const prices = spreadPrice(money);
  return prices.flatMap((price) =>
    states.map((state) => {
      const { slope, offset } = lineAt(price, state);
      return { slope, offset, weight: state.weight / prices.length };
    }),
  );
}

/**
 * The price at which the estimated gap returns nothing: the return is a line over the price, by the tonnes more that are sold.
 * @param tonnes gap less grain kept back for seed, candidate minus current, t/ha
 */
function findTurningPrice(
  returnAtMiddle: number,
  tonnes: number,
  { priceMiddle }: MoneyAssumptions,
  netAt: (price: number) => TonneCosts,
): number | null {
  const price = priceMiddle - returnAtMiddle / tonnes;
  const net = netAt(price);
  return net.current > 0 && net.candidate > 0 && price <= highestPrice ? price : null;
}

/**
 * Gap at which the candidate pays for its seed at the middle price, t/ha, from costs alone: what can be said before any
 * trial is read. null where a seed cost is missing.
 */
export function findCostBreakEven(
  candidateId: string,
  currentId: string,
  money: MoneyAssumptions,
): number | null {
  const pair = budgetPair(candidateId, currentId, money);
  if (pair === null) return null;
  const alike = { ...pair, tonne: { ...pair.tonne, candidate: pair.tonne.current } };
  const { slope, offset } = openLine(alike, 0)(money.priceMiddle, { current: 0, candidate: 0 });
  return -offset / slope;
}
