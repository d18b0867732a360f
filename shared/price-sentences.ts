import type { MoneyAssumptions } from './money.ts';
import type { Say } from './say-sentences.ts';
import type { FigureWriter } from './write-figures.ts';

/** The prices that every return of a weigh-up hangs on, and where they come from. */
export function tellPrices(
  { currency, priceLow, priceMiddle, priceHigh, priceSheetDate }: MoneyAssumptions,
  say: Say<`verdicts:prices${'' | 'OfSheet'}`>,
  write: Pick<FigureWriter, 'pricePer' | 'date'>,
): string {
  const price = (value: number) => write.pricePer(value, currency, 't');
  const prices = { low: price(priceLow), middle: price(priceMiddle), high: price(priceHigh) };
  return priceSheetDate === null
    ? say('verdicts:prices', prices)
    : say('verdicts:pricesOfSheet', { ...prices, date: write.date(priceSheetDate) });
}
