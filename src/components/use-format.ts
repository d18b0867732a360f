import { useMemo } from 'react';
import { useTranslation } from 'react-i18next';
import type { BilingualName } from '#shared/catalogue.ts';
import { formatDate, formatDateTime } from '#shared/format-date.ts';
import {
  formatArea,
  formatMoney,
  formatMoneyPer,
  formatNumber,
  formatPercent,
  formatPValue,
  formatQuantity,
  sayChance,
  type NumberStyle,
} from '#shared/format-number.ts';
import { useLanguage } from './use-language.ts';

/** Figures, money, dates and names as the page's language writes them. */
export function useFormat() {
  const language = useLanguage();
  const { t } = useTranslation('common');
  return useMemo(
    () => ({
      number: (value: number, style?: NumberStyle) => formatNumber(value, language, style),
      quantity: (value: number, unit: string, style?: NumberStyle) =>
        formatQuantity(value, unit, language, style),
      /** Signed, as every gap is written: `+0.38 t/ha`. */
      gap: (value: number, unit: string, decimals: number) =>
        formatQuantity(value, unit, language, { decimals, isSigned: true }),
      percent: (value: number, style?: NumberStyle) => formatPercent(value, language, style),
      money: (value: number, currency: string, style?: NumberStyle) =>
        formatMoney(value, currency, language, style),
      moneyPer: (value: number, currency: string, per: string, style?: NumberStyle) =>
        formatMoneyPer(value, currency, per, language, style),
      area: (hectares: number) => formatArea(hectares, language),
      pValue: (p: number) => formatPValue(p, language),
      date: (iso: string) => formatDate(iso, language),
      dateTime: (iso: string) => formatDateTime(iso, language),
      /** `91 of 100`, `fewer than 1 of 100`, `more than 99 of 100`. */
      chance: (probability: number) => {
        const { key, count } = sayChance(probability);
        return t(`chance.${key}`, { number: formatNumber(count, language) });
      },
      name: (names: BilingualName) => names[language],
    }),
    [language, t],
  );
}
