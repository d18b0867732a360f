import type { MoneyVerdictCode } from './verdict.ts';

/** Turns the chance that it pays (0 to 1, null where there is none) into its word. */
export function judgeMoney(chance: number | null): MoneyVerdictCode {
  if (chance === null) return 'unknown';
  if (chance >= 0.95) return 'pays';
  if (chance >= 0.8) return 'likely';
  if (chance <= 0.05) return 'costs';
  if (chance <= 0.2) return 'unlikely';
  return 'toss';
}
