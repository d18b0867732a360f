import { formatDate } from './format-date.ts';
import {
  boundDecimals,
  formatMoney,
  formatNumber,
  formatPercent,
  formatPValue,
  formatQuantity,
} from './format-number.ts';
import { readLanguage, type Language } from './language.ts';
import { readerUnit, storedUnits, toReader, type ReaderUnits } from './reader-units.ts';

/**
 * Options as a sentence gives them: `{{gap, gap(decimals: 2; unit: t/ha)}}`. Whoever says the sentence may name the
 * reader's units among its values: figures in t/ha then follow them.
 */
type SentenceFormatOptions = {
  decimals?: number;
  unit?: string;
  currency?: string;
  readerUnits?: ReaderUnits;
};

type SentenceFormat = (value: number, language: Language, options: SentenceFormatOptions) => string;

/** A figure of a sentence in the reader's unit, with no more decimals than that unit bears. */
function read(value: number, { decimals = 2, unit = '', readerUnits = storedUnits }: SentenceFormatOptions) {
  const asRead = readerUnit(unit, readerUnits);
  return {
    value: toReader(value, unit, readerUnits),
    unit: asRead,
    decimals: asRead === unit ? decimals : boundDecimals(decimals, asRead),
  };
}

/**
 * Formats that a sentence in locales/ may name behind a placeholder, so that every figure in a sentence is written
 * like those in tables: `{{cv, percent(decimals: 1)}}`, `{{count, number}}`, `{{low, gap(decimals: 2; unit: t/ha)}}`.
 */
export const sentenceFormats: Record<string, SentenceFormat> = {
  number: (value, language, { decimals = 0 }) => formatNumber(value, language, { decimals }),
  quantity: (given, language, options) => {
    const { value, unit, decimals } = read(given, options);
    return formatQuantity(value, unit, language, { decimals });
  },
  /** As `quantity`, with the unit left to the figure that follows: `from 2.1 to 4.3 t/ha`. */
  figure: (given, language, options) => {
    const { value, decimals } = read(given, options);
    return formatNumber(value, language, { decimals });
  },
  gap: (given, language, options) => {
    const { value, unit, decimals } = read(given, options);
    return formatQuantity(value, unit, language, { decimals, isSigned: true });
  },
  percent: (value, language, { decimals = 0 }) => formatPercent(value, language, { decimals }),
  money: (value, language, { decimals = 0, currency = 'CAD' }) =>
    formatMoney(value, currency, language, { decimals }),
  pvalue: (value, language) => formatPValue(value, language),
};

/** What a date in a sentence takes from the sentence's values: whose days a moment is told in. */
type DateOptions = { timeZone?: string };

/** Writes an ISO date inside a sentence: `{{on, date}}`. */
function formatSentenceDate(value: string, language: Language, { timeZone }: DateOptions): string {
  return formatDate(value, language, timeZone);
}

/** What an i18next formatter offers for taking up a format. */
type SentenceFormatter = {
  add: (name: string, write: (value: unknown, tag: string | undefined, options: object) => string) => void;
};

/** Lets sentences name our own formats behind a placeholder, in place of the translation library's. */
export function addSentenceFormats(formatter: SentenceFormatter | undefined): void {
  for (const [name, format] of Object.entries(sentenceFormats)) {
    formatter?.add(name, (value, tag, options) =>
      typeof value === 'number' ? format(value, readLanguage(tag), options) : String(value),
    );
  }
  formatter?.add('date', (value, tag, options) =>
    formatSentenceDate(String(value), readLanguage(tag), options),
  );
}
