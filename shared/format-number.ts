import type { Language } from './account.ts';

/** Narrow no-break space: between thousands and before % in French. */
const narrowSpace = '\u202f';
/** No-break space: keeps a figure and its unit on one line. */
const noBreakSpace = '\u00a0';
/** True minus sign. */
const minus = '\u2212';

/** Canadian conventions for both languages, so that a dollar reads as `$` and not as `CA$`. */
const numberLocales: Record<Language, string> = { en: 'en-CA', fr: 'fr-CA' };

/** Most decimals that a unit bears, whatever its standard error would allow. */
const mostDecimals: Record<string, number> = {
  't/ha': 2,
  'kg/ha': 0,
  'q/ha': 1,
  'bu/ac': 1,
  '%': 2,
  'kg/hL': 1,
  g: 1,
  cm: 0,
  d: 1,
  days: 1,
};

export type NumberStyle = {
  /** Digits after the decimal sign. */
  decimals?: number;
  /** Writes the plus sign of a positive figure, as gaps do. */
  isSigned?: boolean;
};

const formatters = new Map<string, Intl.NumberFormat>();

function numberFormat(language: Language, options: Intl.NumberFormatOptions): Intl.NumberFormat {
  const key = `${language} ${JSON.stringify(options)}`;
  const known = formatters.get(key);
  if (known) return known;
  const made = new Intl.NumberFormat(numberLocales[language], options);
  formatters.set(key, made);
  return made;
}

/** Joins the parts with our own minus sign and thousands space. */
function joinParts(parts: Intl.NumberFormatPart[], language: Language): string {
  return parts
    .map((part) => {
      if (part.type === 'minusSign') return minus;
      if (part.type === 'group' && language === 'fr') return narrowSpace;
      return part.value;
    })
    .join('');
}

/**
 * Writes a figure as the language does: `1,250.50`, `1 250,50`, `−0.38`, `+0.38`.
 * A figure that rounds to zero carries no sign.
 */
export function formatNumber(value: number, language: Language, style: NumberStyle = {}): string {
  const decimals = style.decimals ?? 0;
  const format = numberFormat(language, {
    minimumFractionDigits: decimals,
    maximumFractionDigits: decimals,
    signDisplay: style.isSigned ? 'exceptZero' : 'negative',
  });
  return joinParts(format.formatToParts(value), language);
}

/** The figure with its unit, kept on one line: `4.32 t/ha`; `%` stands as in `formatPercent`. */
export function formatQuantity(
  value: number,
  unit: string,
  language: Language,
  style: NumberStyle = {},
): string {
  if (unit === '') return formatNumber(value, language, style);
  if (unit === '%') return formatPercent(value, language, style);
  return formatNumber(value, language, style) + noBreakSpace + sayUnit(unit, language);
}

/** Units that French writes otherwise: days, bushels. */
const frenchUnits: Record<string, string> = { d: 'j', bu: 'bo', 'bu/ac': 'bo/ac' };

/** A unit as it is written in the language: days are `d` in English and `j` in French, most others are alike. */
export function sayUnit(unit: string, language: Language): string {
  return (language === 'fr' && frenchUnits[unit]) || unit;
}

/** A percentage that is already in hundredths: 13.5 gives `13.5%` and `13,5 %`. */
export function formatPercent(value: number, language: Language, style: NumberStyle = {}): string {
  return formatNumber(value, language, style) + (language === 'fr' ? `${narrowSpace}%` : '%');
}

/** Decimals that are not more than the unit bears: figures given to a fixed place stay sensible in another unit. */
export function boundDecimals(decimals: number, unit: string): number {
  return Math.min(decimals, mostDecimals[unit] ?? decimals);
}

/**
 * How many decimals the standard error supports: down to the place of a tenth of it, and never more than the unit bears.
 * @param standardError in the unit; null or 0 (not known) gives the most that the unit bears
 */
export function decimalsFor(standardError: number | null, unit: string): number {
  const most = mostDecimals[unit] ?? 2;
  if (standardError === null || !(standardError > 0) || !Number.isFinite(standardError)) return most;
  const place = -Math.floor(Math.log10(standardError / 10) + 1e-9);
  return Math.min(Math.max(place, 0), most);
}

/** Money of one currency, by default in whole units: `$8,760`, `8 760 $`, `−$28`, `+$73`. */
export function formatMoney(
  amount: number,
  currency: string,
  language: Language,
  style: NumberStyle = {},
): string {
  const decimals = style.decimals ?? 0;
  const format = numberFormat(language, {
    style: 'currency',
    currency,
    minimumFractionDigits: decimals,
    maximumFractionDigits: decimals,
    signDisplay: style.isSigned ? 'exceptZero' : 'negative',
  });
  return joinParts(format.formatToParts(amount), language);
}

/** Money for one of something: `$290/t`, `290 $/t`; for so little as a bushel to the cent, `$7.89/bu`. */
export function formatMoneyPer(
  amount: number,
  currency: string,
  per: string,
  language: Language,
  style: NumberStyle = {},
): string {
  const decimals = style.decimals ?? (per === 'bu' ? 2 : 0);
  return `${formatMoney(amount, currency, language, { ...style, decimals })}/${sayUnit(per, language)}`;
}

/** The sign of a currency alone, for a field's unit: `$`, `€`. */
export function currencySign(currency: string, language: Language): string {
  const parts = numberFormat(language, { style: 'currency', currency }).formatToParts(0);
  return parts.find((part) => part.type === 'currency')?.value ?? currency;
}

/** Whether one decimal would be a nought: 100 acres are brought to hectares and back with a last digit of their own. */
function isNearlyWhole(value: number): boolean {
  return Math.abs(value - Math.round(value)) < 0.05;
}

/**
 * An area, with a decimal only where it has one: `120 ha`, `12.5 ha`, `296.5 ac`.
 * @param unit of the area: ha, or ac
 */
export function formatArea(area: number, language: Language, unit = 'ha'): string {
  return formatQuantity(area, unit, language, { decimals: isNearlyWhole(area) ? 0 : 1 });
}

/**
 * A p-value: never 0, never 1, and never rounded up to a level (0.05, 0.01) that it lies under.
 * `< 0.001`, `0.0024`, `0.031`, `0.42`, `> 0.99`.
 */
export function formatPValue(p: number, language: Language): string {
  if (p < 0.001) return `<${noBreakSpace}${formatNumber(0.001, language, { decimals: 3 })}`;
  if (p > 0.99) return `>${noBreakSpace}${formatNumber(0.99, language, { decimals: 2 })}`;
  const usual = p < 0.01 ? 4 : p < 0.1 ? 3 : 2;
  const crosses = [0.05, 0.01].some((level) => p < level && Number(p.toFixed(usual)) >= level);
  return formatNumber(p, language, { decimals: crosses ? usual + 2 : usual });
}

/** Chances at which a money verdict changes its word, in hundredths. */
const verdictSteps = [5, 20, 80, 95];

/** How a chance is said: fewer than 1, a whole number, or more than 99 of 100. */
export type SpokenChance = { key: 'fewer' | 'whole' | 'more'; count: number };

/**
 * Says a probability in hundredths, as the key of its words (`common:chance.<key>`) and the number in them.
 * Rounds to the nearest whole, but never onto a step that the verdict has not reached, so that word and number agree.
 */
export function sayChance(probability: number): SpokenChance {
  const exact = probability * 100;
  if (exact < 1) return { key: 'fewer', count: 1 };
  if (exact > 99) return { key: 'more', count: 99 };
  const rounded = Math.round(exact);
  if (!verdictSteps.includes(rounded)) return { key: 'whole', count: rounded };
  if (rounded >= 50 && exact < rounded) return { key: 'whole', count: rounded - 1 };
  if (rounded < 50 && exact > rounded) return { key: 'whole', count: rounded + 1 };
  return { key: 'whole', count: rounded };
}
