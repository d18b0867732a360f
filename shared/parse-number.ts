import type { Language } from './account.ts';

/** Digits, or digits in groups of three with one kind of separator. */
const grouped = /^\d{1,3}(,\d{3})+$|^\d{1,3}(\.\d{3})+$/;

/** Decides which of the two signs is the decimal one; null when there is none, undefined when the text makes no sense. */
function findDecimalSign(digits: string, language: Language): '.' | ',' | null | undefined {
  const points = digits.split('.').length - 1;
  const commas = digits.split(',').length - 1;
  if (points + commas === 0) return null;
  if (points > 0 && commas > 0) {
    const last = digits.lastIndexOf('.') > digits.lastIndexOf(',') ? '.' : ',';
    const times = last === '.' ? points : commas;
    return times === 1 ? last : undefined;
  }
  const only = points > 0 ? '.' : ',';
  if (points + commas > 1) return grouped.test(digits) ? null : undefined;
  if (only === ',' && language === 'en' && grouped.test(digits)) return null;
  return only;
}

/**
 * Reads a figure as people type it in either language: `1 250,50`, `1,250.50`, `−0.4`, `12.5`.
 * A lone comma before exactly three digits groups thousands in English and marks decimals in French.
 * @returns the figure; null for nothing typed; NaN for text that is no figure
 */
export function parseNumber(text: string, language: Language): number | null {
  const bare = text.replace(/[\s\u00a0\u202f'’]/g, '').replace(/^\u2212/, '-');
  if (bare === '') return null;
  const match = /^([+-]?)([\d.,]+)$/.exec(bare);
  const digits = match?.[2];
  if (digits === undefined) return Number.NaN;
  const decimalSign = findDecimalSign(digits, language);
  if (decimalSign === undefined) return Number.NaN;
  const [whole = '', fraction = ''] = decimalSign === null ? [digits] : digits.split(decimalSign);
  if (decimalSign !== null && /[.,]/.test(whole) && !grouped.test(whole)) return Number.NaN;
  const plain = `${whole.replace(/[.,]/g, '')}.${fraction}`;
  if (!/\d/.test(plain)) return Number.NaN;
  return Number(match?.[1] === '-' ? `-${plain}` : plain);
}
