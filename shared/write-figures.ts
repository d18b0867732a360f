import type { Language } from './language.ts';
import type { BilingualName } from './catalogue.ts';
import { formatDate, formatDateTime } from './format-date.ts';
import {
  boundDecimals,
  decimalsFor,
  formatArea,
  formatMoney,
  formatMoneyPer,
  formatNumber,
  formatPercent,
  formatPValue,
  formatQuantity,
  sayUnit,
  type NumberStyle,
} from './format-number.ts';
import { readerUnit, toReader, toReaderPer, type ReaderUnits } from './reader-units.ts';
import type { Interval } from './verdict.ts';

/** How one reader has figures, money, dates and names written. */
export type FigureWriter = ReturnType<typeof writeFigures>;

/**
 * Figures, money, dates and names as a language writes them. Units are given as stored: what is in t/ha, per t, per ha or
 * in ha is written in the reader's units, every other unit as it is.
 * @param timeZone whose days moments are told in; without it those of this machine
 */
export function writeFigures(language: Language, units: ReaderUnits, timeZone?: string) {
  return {
    number: (value: number, style?: NumberStyle) => formatNumber(value, language, style),
    ...writeMeasures(language, units),
    percent: (value: number, style?: NumberStyle) => formatPercent(value, language, style),
    money: (value: number, currency: string, style?: NumberStyle) =>
      formatMoney(value, currency, language, style),
    pValue: (p: number) => formatPValue(p, language),
    date: (iso: string) => formatDate(iso, language, timeZone),
    dateTime: (iso: string) => formatDateTime(iso, language, timeZone),
    name: (names: BilingualName) => names[language],
  };
}

/** What hangs on the units that the reader asked for. */
function writeMeasures(language: Language, units: ReaderUnits) {
  /** What was counted out for the stored unit may be more than the unit that is read bears. */
  const bear = (decimals: number, unit: string) => {
    const read = readerUnit(unit, units);
    return read === unit ? decimals : boundDecimals(decimals, read);
  };
  const quantity = (value: number, unit: string, style: NumberStyle = {}) => {
    const decimals = bear(style.decimals ?? 0, unit);
    return formatQuantity(toReader(value, unit, units), readerUnit(unit, units), language, {
      ...style,
      decimals,
    });
  };
  /** Signed, as every gap is written: `+0.38 t/ha`. */
  const gap = (value: number, unit: string, decimals: number) =>
    quantity(value, unit, { decimals, isSigned: true });
  /** A gap with its unit left to the figure that follows: `+0.17`. */
  const gapFigure = (value: number, unit: string, decimals: number) =>
    formatNumber(toReader(value, unit, units), language, { decimals: bear(decimals, unit), isSigned: true });
  /** Money for one stored unit: `$290/t`, or `$7.89/bu` where that is read. */
  const moneyPer = (value: number, currency: string, per: string, style?: NumberStyle) =>
    formatMoneyPer(toReaderPer(value, per, units), currency, readerUnit(per, units), language, style);
  return {
    quantity,
    gap,
    gapFigure,
    /** The unit in which a stored one is read, as the language writes it. */
    unit: (unit: string) => sayUnit(readerUnit(unit, units), language),
    /** Decimals that a standard error, given in the stored unit, supports in the unit that is read. */
    decimals: (se: number | null, unit: string) =>
      decimalsFor(se === null ? null : toReader(se, unit, units), readerUnit(unit, units)),
    /** An interval of gaps for `{{low}} to {{high}}`, the unit behind its high end, and its level. */
    ends: ({ low, high, level }: Interval, unit: string, decimals: number) => ({
      low: gapFigure(low, unit, decimals),
      high: gap(high, unit, decimals),
      level: formatPercent(level * 100, language),
    }),
    moneyPer,
    /** A price or a cost as it was given, to the cent where it has cents: `$258/t`, `$310.50/t`. */
    pricePer: (value: number, currency: string, per: string) =>
      moneyPer(value, currency, per, Number.isInteger(value) ? {} : { decimals: 2 }),
    area: (hectares: number) =>
      formatArea(toReader(hectares, 'ha', units), language, readerUnit('ha', units)),
  };
}
