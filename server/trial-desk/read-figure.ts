import type { Delimiter } from './split-records.ts';

/** What a file writes between whole and fraction; unknown where every figure could be read either way. */
export type DecimalSign = 'point' | 'comma' | 'unknown';

export type FigureFault = 'not-a-number' | 'not-finite' | 'mixed-decimals' | 'ambiguous-number';

/** What one figure gives away about the decimal sign of its file. */
type Evidence = DecimalSign | 'none' | 'no-figure' | 'maybe-comma' | 'maybe-point';

const missingMarks = new Set(['', '.', '-', '*', 'na', 'n/a', 'nd', 'n.d.', 's.o.', 'missing', 'manquant']);

/** Whether a cell says that nothing was measured. */
export function isMissingMark(text: string): boolean {
  return missingMarks.has(text.toLowerCase());
}

/** Signs and spaces that people and spreadsheets put into figures, taken out. */
function bareFigure(text: string): string {
  return text.replace(/[\s\u00a0\u202f'’]/g, '').replace(/^\u2212/, '-');
}

function weighEvidence(text: string): Evidence {
  const bare = bareFigure(text).replace(/^[+-]/, '');
  if (/^\d+$/.test(bare)) return 'none';
  if (/^\d{1,3}(,\d{3})+\.\d+$/.test(bare) || /^\d{1,3}(,\d{3}){2,}$/.test(bare)) return 'point';
  if (/^\d{1,3}(\.\d{3})+,\d+$/.test(bare) || /^\d{1,3}(\.\d{3}){2,}$/.test(bare)) return 'comma';
  if (/^[1-9]\d{0,2},\d{3}$/.test(bare)) return 'maybe-comma';
  if (/^[1-9]\d{0,2}\.\d{3}$/.test(bare)) return 'maybe-point';
  if (/^\d*,\d+$/.test(bare)) return 'comma';
  if (/^(\d+\.?\d*|\.\d+)(e[+-]?\d+)?$/i.test(bare)) return 'point';
  return 'no-figure';
}

/**
 * Finds the decimal sign of a file from all its figures together: one figure alone (`1,250`) may be a thousand or a unit.
 * @param delimiter a file that separates by semicolons or tabs was written where the comma is the decimal sign
 */
export function findDecimalSign(figures: readonly string[], delimiter: Delimiter): DecimalSign {
  const count = new Map<Evidence, number>();
  for (const figure of figures) {
    const evidence = weighEvidence(figure);
    count.set(evidence, (count.get(evidence) ?? 0) + 1);
  }
  const [commas, points] = [count.get('comma') ?? 0, count.get('point') ?? 0];
  if (commas + points > 0) return commas > points ? 'comma' : 'point';
  if (!count.has('maybe-comma') || count.has('maybe-point')) return 'point';
  return delimiter === ',' ? 'unknown' : 'comma';
}

/**
 * Reads one figure by its file's decimal sign.
 * A lone comma before three digits groups thousands where the point is the decimal sign. The reverse is refused:
 * in a file of decimal commas a lone point is more often a slip than a thousand.
 */
export function readFigure(text: string, sign: DecimalSign): number | FigureFault {
  const bare = bareFigure(text);
  if (/^[+-]?(nan|inf|infinity|∞)$/i.test(bare)) return 'not-finite';
  const evidence = weighEvidence(text);
  if (evidence === 'no-figure') return 'not-a-number';
  if (evidence === 'maybe-comma' && sign === 'unknown') return 'ambiguous-number';
  const isPointFigure = evidence === 'point' || evidence === 'maybe-point';
  if ((sign === 'comma' && isPointFigure) || (sign !== 'comma' && evidence === 'comma'))
    return 'mixed-decimals';
  const plain = sign === 'comma' ? bare.replaceAll('.', '').replace(',', '.') : bare.replaceAll(',', '');
  const value = Number(plain);
  return Number.isFinite(value) ? value : 'not-finite';
}
