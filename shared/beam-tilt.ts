import type { MoneyVerdictCode, VerdictCode } from './verdict.ts';

/** How the balance stands: down on the candidate's side (right), on the current variety's (left), level, undecided, or unloaded. */
export type BeamTilt = 'candidate' | 'current' | 'level' | 'swinging' | 'bare';

/** Of a verdict on a trait. */
export const verdictTilts: Record<VerdictCode, BeamTilt> = {
  ahead: 'candidate',
  behind: 'current',
  level: 'level',
  open: 'swinging',
  thin: 'bare',
};

/** Of a verdict on money. */
export const moneyTilts: Record<MoneyVerdictCode, BeamTilt> = {
  pays: 'candidate',
  likely: 'candidate',
  toss: 'swinging',
  unlikely: 'current',
  costs: 'current',
  unknown: 'bare',
};
