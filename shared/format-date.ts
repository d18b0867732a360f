import type { Language } from './account.ts';

/** Day before month in both languages, as the trade writes it. */
const dateLocales: Record<Language, string> = { en: 'en-GB', fr: 'fr-CA' };

/** French writes the first of a month as an ordinal. */
function writeFirstOfMonth(text: string, language: Language): string {
  return language === 'fr' ? text.replace(/^1(?=\s)/, '1er') : text;
}

/** A day in words, and where a moment is told in no place's own time, that too: `1 December 2026 (UTC)`. */
const markUniversal = (text: string, timeZone: string | undefined): string =>
  timeZone === 'UTC' ? `${text} (UTC)` : text;

const formatters = new Map<string, Intl.DateTimeFormat>();

/** One writer for each language, style and place: to make one takes a thousand times as long as to use it. */
function dateFormat(locale: string, options: Intl.DateTimeFormatOptions): Intl.DateTimeFormat {
  const key = `${locale} ${JSON.stringify(options)}`;
  const known = formatters.get(key);
  if (known) return known;
  const made = new Intl.DateTimeFormat(locale, options);
  formatters.set(key, made);
  return made;
}

const isDay = (iso: string): boolean => /^\d{4}-\d{2}-\d{2}$/.test(iso);

function writeDay(iso: string, language: Language, timeZone: string | undefined): string {
  const format = dateFormat(dateLocales[language], {
    dateStyle: 'long',
    timeZone: isDay(iso) ? 'UTC' : timeZone,
  });
  return writeFirstOfMonth(format.format(new Date(iso)), language);
}

/**
 * A date in words: `14 November 2026`, `1er décembre 2026`.
 * @param iso a date (`2026-11-14`, taken as that day everywhere) or a moment (shown in the reader's time zone)
 */
export function formatDate(iso: string, language: Language, timeZone?: string): string {
  const day = writeDay(iso, language, timeZone);
  return isDay(iso) ? day : markUniversal(day, timeZone);
}

/** A moment in words with hour and minute: `14 November 2026, 09:30`, `14 novembre 2026, 09 h 30`. */
export function formatDateTime(iso: string, language: Language, timeZone?: string): string {
  const time = dateFormat(dateLocales[language], {
    hour: '2-digit',
    minute: '2-digit',
    hourCycle: 'h23',
    timeZone,
  });
  // The hour stays on one line: `09 h 30`.
  const clock = time.format(new Date(iso)).replace(/\s/g, '\u00a0');
  return markUniversal(`${writeDay(iso, language, timeZone)}, ${clock}`, timeZone);
}

/** The day of a moment in a place, as a date: `2026-11-30`. */
export const dayIn = (iso: string, timeZone: string): string =>
  dateFormat('en-CA', { timeZone, dateStyle: 'short' }).format(new Date(iso));

/** Whether a name is one of a time zone that is known here. */
export function isTimeZone(name: string): boolean {
  try {
    return new Intl.DateTimeFormat('en', { timeZone: name }).resolvedOptions().timeZone !== '';
  } catch {
    return false;
  }
}
