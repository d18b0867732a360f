import type {
  CurrentLevel,
  GapDistribution,
  MoneyAssumptions,
  MoneyResult,
  SeedCost,
} from '#shared/money.ts';
import type { MoneyBasis } from '#shared/money-basis.ts';
import { weighMoney, type PricedCandidate } from '#shared/partial-budget.ts';

export const current = '11111111-1111-4111-8111-111111111111';
export const candidate = '22222222-2222-4222-8222-222222222222';

export const seed = (seedPerHectare: number | null, rest: Partial<SeedCost> = {}): SeedCost => ({
  seedPerHectare,
  treatmentPerHectare: 0,
  royaltyPerHectare: 0,
  ...rest,
});

/** One price, whatever the season. */
export function atOnePrice(
  price: number,
  costs: { candidate: SeedCost; current: SeedCost },
  perTonne = 0,
): MoneyAssumptions {
  return {
    currency: 'CAD',
    priceLow: price,
    priceMiddle: price,
    priceHigh: price,
    haulagePerTonne: perTonne,
    dryingPerTonne: 0,
    seedCosts: { [candidate]: costs.candidate, [current]: costs.current },
    priceSheetDate: null,
  };
}

export const dearer = (money: MoneyAssumptions, by: number): MoneyAssumptions => ({
  ...money,
  priceLow: money.priceLow + by,
  priceMiddle: money.priceMiddle + by,
  priceHigh: money.priceHigh + by,
});

export const gapOf = (estimate: number): GapDistribution => ({ estimate, se: 0.2, df: 20 });

export type About = {
  inRegion?: GapDistribution;
  usualYield?: number;
  levels?: CurrentLevel[];
  /** Gap in protein, for the own next season and the region alike. */
  protein?: GapDistribution;
};

/** What weighMoney asks for, of a candidate with this gap. */
export function withLevels(
  money: MoneyAssumptions,
  gap: GapDistribution,
  { inRegion, usualYield, levels = [], protein }: About,
): [PricedCandidate, MoneyBasis, MoneyAssumptions] {
  const interval = { low: 0, high: 0, level: 0.95 };
  const verdict = {
    kind: 'numeric',
    verdict: null,
    siteYears: 8,
    medianCandidate: null,
    medianCurrent: null,
  };
  const traits: PricedCandidate['traits'] =
    protein === undefined
      ? []
      : [
          {
            ...{ ...verdict, kind: 'numeric' },
            traitSlug: 'protein',
            gap: {
              ...protein,
              p: 0.5,
              region: interval,
              ownSeason: { ...interval, ...protein },
              shrunken: null,
            },
          },
        ];
  return [
    { varietyId: candidate, moneyGap: gap, moneyGapInRegion: inRegion ?? gap, traits },
    { currentVarietyId: current, usualYield: usualYield ?? null, levels },
    money,
  ];
}

/** A result with every part that such a candidate has. */
type WholeResult = MoneyResult & { chancePays: number; badReturn: number; goodReturn: number };

/** The money of a candidate with this gap, where nothing is missing. */
export function weigh(money: MoneyAssumptions, gap: GapDistribution, about: About = {}): WholeResult {
  const result = weighMoney(...withLevels(money, gap, about));
  if (result?.chancePays == null || result.badReturn == null || result.goodReturn == null)
    throw new Error('these assumptions have every cost');
  const { chancePays, badReturn, goodReturn } = result;
  return { ...result, chancePays, badReturn, goodReturn };
}
