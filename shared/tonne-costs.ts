import type { QualityRule, SeedCost } from './money.ts';
import { groupRules, layOutSteps } from './premium-steps.ts';

/** The part of the assumptions that is about a tonne. */
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
 * Haulage, harvest and drying per tonne. Drying by moisture counts only where the moisture of both is known: taken as
 * dry, the one that is not known would look cheaper than it is.
 */
export function reckonTonneCosts(current: SeedCost, candidate: SeedCost, money: TonneTerms): TonneCosts {
  const alike = money.haulagePerTonne + money.dryingPerTonne + (money.harvestPerTonne ?? 0);
  if (current.harvestMoisturePercent === undefined || candidate.harvestMoisturePercent === undefined) {
    return { current: alike, candidate: alike };
  }
  return {
    current: alike + dryByMoisture(current.harvestMoisturePercent, money),
    candidate: alike + dryByMoisture(candidate.harvestMoisturePercent, money),
  };
}

/** Per tonne at standard moisture, for the points above it; grain that comes off drier costs nothing to dry. */
function dryByMoisture(harvestMoisture: number, money: TonneTerms): number {
  const { dryingPerPoint, standardMoisturePercent } = money;
  if (dryingPerPoint === undefined || standardMoisturePercent === undefined) return 0;
  return dryingPerPoint * Math.max(harvestMoisture - standardMoisturePercent, 0);
}

/** The most that can go off the price of a tonne: its costs for the wettest variety, and the deepest discount. */
export function findWorstCostPerTonne(
  money: TonneTerms & {
    qualityRules?: readonly QualityRule[] | undefined;
    seedCosts: Readonly<Record<string, Pick<SeedCost, 'harvestMoisturePercent'>>>;
  },
): number {
  const alike = money.haulagePerTonne + money.dryingPerTonne + (money.harvestPerTonne ?? 0);
  const wettest = Object.values(money.seedCosts).map(({ harvestMoisturePercent: moisture }) =>
    moisture === undefined ? 0 : dryByMoisture(moisture, money),
  );
  const discounts = [...groupRules(money.qualityRules ?? []).values()].map((rules) =>
    Math.max(...layOutSteps(rules).premiums.map((premium) => -premium), 0),
  );
  return alike + Math.max(...wettest, 0) + discounts.reduce((sum, discount) => sum + discount, 0);
}
