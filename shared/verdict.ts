import { z } from 'zod';

/** Verdict on a trait: is the gap real? */
export const verdictCode = z.enum(['ahead', 'behind', 'level', 'open', 'thin']);
export type VerdictCode = z.infer<typeof verdictCode>;

/** Verdict on money: does the candidate return more on the grower's own land in another season? */
export const moneyVerdictCode = z.enum(['pays', 'likely', 'toss', 'unlikely', 'costs', 'unknown']);
export type MoneyVerdictCode = z.infer<typeof moneyVerdictCode>;

/** Both ends at the stated level; what it is an interval of is said by the field that holds it. */
export const interval = z.object({ low: z.number(), high: z.number(), level: z.number() });
export type Interval = z.infer<typeof interval>;
