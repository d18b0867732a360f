import type { Language } from './account.ts';
import { formatDate } from './format-date.ts';
import { formatMoney, formatNumber, formatPercent, formatPValue, formatQuantity } from './format-number.ts';

/** Options as a sentence gives them: `{{gap, gap(decimals: 2; unit: t/ha)}}`. */
export type SentenceFormatOptions = { decimals?: number; unit?: string; currency?: string };

type SentenceFormat = (value: number, language: Language, options: SentenceFormatOptions) => string;

/**
 * Formats that a sentence in locales/ may name behind a placeholder, so that every figure in a sentence is written
 * like those in tables: `{{cv, percent(decimals: 1)}}`, `{{count, number}}`, `{{low, gap(decimals: 2; unit: t/ha)}}`.
 */
export const sentenceFormats: Record<string, SentenceFormat> = {
  number: (value, language, { decimals = 0 }) => formatNumber(value, language, { decimals }),
  quantity: (value, language, { decimals = 2, unit = '' }) =>
    formatQuantity(value, unit, language, { decimals }),
  gap: (value, language, { decimals = 2, unit = '' }) =>
    formatQuantity(value, unit, language, { decimals, isSigned: true }),
  percent: (value, language, { decimals = 0 }) => formatPercent(value, language, { decimals }),
  money: (value, language, { decimals = 0, currency = 'CAD' }) =>
    formatMoney(value, currency, language, { decimals }),
  pvalue: (value, language) => formatPValue(value, language),
};

/** Writes an ISO date inside a sentence: `{{on, date}}`. */
export function formatSentenceDate(value: string, language: Language): string {
  return formatDate(value, language);
}
