import type { Expected } from './reference-case.ts';

/**
 * How far a value is from the one expected, relative to it.
 * @param scale below this size of the expected value the difference is taken relative to the scale: a gap of 1e-15
 *   in place of 0 is not wrong
 * @returns Infinity where only one of the two is a number, 0 where neither is
 */
export function deviationOf(
  actual: number | null | undefined,
  expected: Expected | number | null | undefined,
  scale = 0,
): number {
  const isMissing = actual === null || actual === undefined;
  if (typeof expected !== 'number') return isMissing && expected !== undefined ? 0 : Infinity;
  if (isMissing) return Infinity;
  if (actual === expected) return 0;
  return Math.abs(actual - expected) / Math.max(Math.abs(expected), scale);
}

/** Collects the largest deviation of each kind of figure in a case. */
export class DeviationLog {
  readonly largest: Record<string, number> = {};

  note(
    kind: string,
    actual: number | null | undefined,
    expected: Expected | number | null | undefined,
    scale = 0,
  ): void {
    const deviation = deviationOf(actual, expected, scale);
    this.largest[kind] = Math.max(this.largest[kind] ?? 0, Number.isNaN(deviation) ? Infinity : deviation);
  }
}
