import { makeCaution, type Caution } from '#shared/caution.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import { budgetSeed } from '#shared/seed-budget.ts';
import type { MoneyGround } from './question.ts';

const dayMs = 24 * 60 * 60 * 1000;
/** A sheet is made once a year: after that its prices are those of another season. Common practice. */
const daysUntilOld = 365;

/**
 * What the money of a question rests on, and what goes with the seed it is about.
 * @param current the current variety, named where the crop still has it
 */
export function cautionMoney(
  { money, priceSheet, askedAt }: MoneyGround,
  current: { id: string; name: string | undefined },
  candidateIds: readonly string[],
): Caution[] {
  const found: Caution[] = [];
  if (current.name !== undefined && budgetSeed(money?.seedCosts[current.id]) === null) {
    found.push(makeCaution('no-seed-cost', 'warning', { variety: current.name }));
  }
  if (money === null) return found;
  if (priceSheet !== null && isOutside(money, priceSheet)) {
    found.push(makeCaution('price-outside-sheet', 'warning', {}));
  }
  const date = money.priceSheetDate;
  if (date !== null && askedAt.getTime() - Date.parse(date) > daysUntilOld * dayMs) {
    found.push(makeCaution('price-sheet-old', 'warning', { date }));
  }
  const costs = [current.id, ...candidateIds].flatMap((id) => money.seedCosts[id] ?? []);
  if (costs.some((cost) => cost.treatmentPerHectare > 0))
    found.push(makeCaution('seed-treatment', 'note', {}));
  // A royalty says that the variety is protected, and breeders' rights bear on whoever keeps seed back.
  if (costs.some((cost) => cost.royaltyPerHectare > 0 || cost.basis === 'saved'))
    found.push(makeCaution('farm-saved-seed', 'note', {}));
  return found;
}

const isOutside = (money: MoneyAssumptions, sheet: MoneyAssumptions): boolean =>
  money.currency === sheet.currency && (money.priceLow < sheet.priceLow || money.priceHigh > sheet.priceHigh);
