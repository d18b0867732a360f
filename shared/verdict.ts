import { z } from 'zod';

/** Verdict on a trait: is the gap real? */
export const verdictCode = z.enum(['ahead', 'behind', 'level', 'open', 'thin']);
export type VerdictCode = z.infer<typeof verdictCode>;

/** Verdict on money: does the candidate return more on the grower's own land in another season? */
export const moneyVerdictCode = z.enum(['pays', 'likely', 'toss', 'unlikely', 'costs', 'unknown']);
export type MoneyVerdictCode = z.infer<typeof moneyVerdictCode>;

/** Turns the chance that it pays (0 to 1, null where there is none) into its word. */
export function judgeMoney(chance: number | null): MoneyVerdictCode {
  if (chance === null) return 'unknown';
  if (chance >= 0.95) return 'pays';
  if (chance >= 0.8) return 'likely';
  if (chance <= 0.05) return 'costs';
  if (chance <= 0.2) return 'unlikely';
  return 'toss';
}

/** Both ends at the stated level; what it is an interval of is said by the field that holds it. */
export const interval = z.object({ low: z.number(), high: z.number(), level: z.number() });
export type Interval = z.infer<typeof interval>;
