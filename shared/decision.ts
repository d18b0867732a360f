import { z } from 'zod';
import { interval, moneyVerdictCode, verdictCode } from './verdict.ts';

/** candidate: one of those weighed; other: something that was not weighed; undecided: talked over, and left open. */
export const decisionChoice = z.enum(['candidate', 'current', 'other', 'undecided']);
export type DecisionChoice = z.infer<typeof decisionChoice>;

/** What the grower chose, on how many hectares and why. */
export const decisionInput = z
  .object({
    choice: decisionChoice,
    /** The candidate chosen; null for every other choice. */
    varietyId: z.uuid().nullable(),
    areaHectares: z.number().positive().max(100_000).nullable(),
    reason: z.string().trim().min(1).max(1000),
  })
  .refine(({ choice, varietyId }) => (choice === 'candidate') === (varietyId !== null), {
    path: ['varietyId'],
    message: 'required',
  })
  .refine(
    ({ choice, areaHectares }) => areaHectares !== null || choice === 'other' || choice === 'undecided',
    { path: ['areaHectares'], message: 'required' },
  )
  .refine(({ choice, areaHectares }) => areaHectares === null || choice !== 'undecided', {
    path: ['areaHectares'],
    message: 'custom',
  });
export type DecisionInput = z.infer<typeof decisionInput>;

/**
 * Whether a decision is on more hectares than the weigh-up is about. An area that was shown rounded, in acres say, may be
 * typed again: a thousandth more is the same.
 */
export const isOverArea = (decided: number | null, weighUpHectares: number): boolean =>
  decided !== null && decided > weighUpHectares * 1.001;

/** What was said of a candidate when it was decided on; yields in t/ha, the chance between 0 and 1. */
export const saidOfCandidate = z.object({
  varietyId: z.uuid(),
  varietyName: z.string(),
  verdict: verdictCode,
  estimate: z.number().nullable(),
  /** For the region's average over seasons. */
  interval: interval.nullable(),
  chancePays: z.number().nullable(),
  moneyVerdict: moneyVerdictCode.nullable(),
});
export type SaidOfCandidate = z.infer<typeof saidOfCandidate>;

/** The answer as it stood when it was decided on: frozen, so that a later season can be held against it. */
export const saidThen = z.object({
  currentVarietyId: z.uuid(),
  currentVarietyName: z.string(),
  seasonFrom: z.number().int(),
  seasonTo: z.number().int(),
  /** Trials that the figures rested on, and those that the advisor had ticked off. */
  trials: z.number().int(),
  tickedOff: z.number().int(),
  computedAt: z.iso.datetime(),
  candidates: z.array(saidOfCandidate),
});
export type SaidThen = z.infer<typeof saidThen>;

export const decision = z.object({
  choice: decisionChoice,
  varietyId: z.uuid().nullable(),
  /** The candidate's or the current variety's name as it was; null where neither was chosen. */
  varietyName: z.string().nullable(),
  areaHectares: z.number().nullable(),
  reason: z.string(),
  decidedAt: z.iso.datetime(),
  recordedBy: z.string(),
  said: saidThen,
});
export type Decision = z.infer<typeof decision>;

/** A decision of the same farm and crop from an earlier weigh-up. */
export const earlierDecision = z.object({ weighUpId: z.uuid(), decision });
export type EarlierDecision = z.infer<typeof earlierDecision>;

/** A decision in one line of a list. */
export const decisionLine = decision.pick({ choice: true, varietyName: true, areaHectares: true });
export type DecisionLine = z.infer<typeof decisionLine>;
