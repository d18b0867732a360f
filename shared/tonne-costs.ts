import type { QualityRule, SeedCost } from './money.ts';
import { groupRules, layOutSteps } from './premium-steps.ts';

/** The part of the assumptions that is about a tonne, as it comes off the field. */
export type TonneTerms = {
  haulagePerTonne: number;
  dryingPerTonne: number;
  harvestPerTonne?: number | undefined;
  dryingPerPoint?: number | undefined;
  standardMoisturePercent?: number | undefined;
};

/** What a tonne at standard moisture costs of each of two varieties before it is paid for. */
export type TonneCosts = { current: number; candidate: number };

/**
 * Haulage, harvest and drying. They are paid for the tonnes that come off the field, water and all, while yields and prices
 * are stated at standard moisture. Moisture counts only where that of both is known: taken as dry, the one that is not
 * known would look cheaper than it is.
 */
export function reckonTonneCosts(current: SeedCost, candidate: SeedCost, money: TonneTerms): TonneCosts {
  if (current.harvestMoisturePercent === undefined || candidate.harvestMoisturePercent === undefined) {
    return { current: costsOfTonne(null, money), candidate: costsOfTonne(null, money) };
  }
  return {
    current: costsOfTonne(current.harvestMoisturePercent, money),
    candidate: costsOfTonne(candidate.harvestMoisturePercent, money),
  };
}

/**
 * Per tonne at standard moisture. Wet mass = mass at the standard × (100 − standard) / (100 − moisture at harvest); grain
 * that comes off drier costs nothing to dry by the point.
 * Source of the wet mass: domain.md [6], the other way round.
 * @param harvestMoisture percent; null where it is not known, and taken as the standard
 */
function costsOfTonne(harvestMoisture: number | null, money: TonneTerms): number {
  const { dryingPerPoint = 0, standardMoisturePercent: standard } = money;
  const alike = money.haulagePerTonne + money.dryingPerTonne + (money.harvestPerTonne ?? 0);
  if (harvestMoisture === null || standard === undefined) return alike;
  const wetTonnes = (100 - standard) / (100 - harvestMoisture);
  return wetTonnes * (alike + dryingPerPoint * Math.max(harvestMoisture - standard, 0));
}

/** The most that can go off the price of a tonne: its costs for the wettest variety, and the deepest discount. */
export function findWorstCostPerTonne(
  money: TonneTerms & {
    qualityRules?: readonly QualityRule[] | undefined;
    seedCosts: Readonly<Record<string, Pick<SeedCost, 'harvestMoisturePercent'>>>;
  },
): number {
  const costs = Object.values(money.seedCosts).map(({ harvestMoisturePercent: moisture = null }) =>
    costsOfTonne(moisture, money),
  );
  const discounts = [...groupRules(money.qualityRules ?? []).values()].map((rules) =>
    Math.max(...layOutSteps(rules).premiums.map((premium) => -premium), 0),
  );
  return (
    Math.max(...costs, costsOfTonne(null, money)) + discounts.reduce((sum, discount) => sum + discount, 0)
  );
}
