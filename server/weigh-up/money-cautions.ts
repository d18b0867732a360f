import { makeCaution, type Caution } from '#shared/caution.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import type { Question } from './question.ts';

const dayMs = 24 * 60 * 60 * 1000;
/** A sheet is made once a year: after that its prices are those of another season. Common practice. */
const daysUntilOld = 365;

/** What the money of a question rests on, and what goes with the seed it is about. */
export function cautionMoney(question: Question, names: ReadonlyMap<string, string>): Caution[] {
  const { money, priceSheet, askedAt, currentVarietyId, candidateIds } = question;
  const found: Caution[] = [];
  const currentName = names.get(currentVarietyId);
  if (currentName !== undefined && money?.seedCosts[currentVarietyId] === undefined) {
    found.push(makeCaution('no-seed-cost', 'warning', { variety: currentName }));
  }
  if (money === null) return found;
  if (priceSheet !== null && isOutside(money, priceSheet)) {
    found.push(makeCaution('price-outside-sheet', 'warning', {}));
  }
  const date = money.priceSheetDate;
  if (date !== null && askedAt.getTime() - Date.parse(date) > daysUntilOld * dayMs) {
    found.push(makeCaution('price-sheet-old', 'warning', { date }));
  }
  const costs = [currentVarietyId, ...candidateIds].flatMap((id) => money.seedCosts[id] ?? []);
  if (costs.some((cost) => cost.treatmentPerHectare > 0))
    found.push(makeCaution('seed-treatment', 'note', {}));
  // A royalty says that the variety is protected; seed of a free one may be kept.
  if (costs.some((cost) => cost.royaltyPerHectare > 0))
    found.push(makeCaution('farm-saved-seed', 'note', {}));
  return found;
}

const isOutside = (money: MoneyAssumptions, sheet: MoneyAssumptions): boolean =>
  money.currency === sheet.currency && (money.priceLow < sheet.priceLow || money.priceHigh > sheet.priceHigh);
