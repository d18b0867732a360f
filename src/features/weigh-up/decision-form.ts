import { z } from 'zod';
import { decisionInput, isOverArea, type Decision, type DecisionInput } from '#shared/decision.ts';
import type { WeighUp } from '#shared/weigh-up.ts';

/** What is typed: the choice in one list, a candidate by its id, the others by their word. */
const typedDecision = z.object({
  chosen: z.string().min(1, { error: 'required' }),
  areaHectares: z.number().nullable(),
  reason: z.string(),
});

/**
 * The typed decision, turned into one that is saved; what does not fit is said beside its field.
 * @param weighUpHectares what the weigh-up is about
 */
export const decisionFormOn = (weighUpHectares: number) =>
  typedDecision
    .transform(toDecisionInput)
    .pipe(decisionInput)
    .refine(({ areaHectares }) => !isOverArea(areaHectares, weighUpHectares), {
      path: ['areaHectares'],
      message: 'over-area',
    });
export type DecisionDraft = z.input<typeof typedDecision>;

/** Whether a choice has hectares: what is undecided has none. */
export const hasArea = (chosen: string): boolean => chosen !== 'undecided';

function toDecisionInput({ chosen, areaHectares, reason }: DecisionDraft): DecisionInput {
  const area = hasArea(chosen) ? areaHectares : null;
  return chosen === 'current' || chosen === 'other' || chosen === 'undecided'
    ? { choice: chosen, varietyId: null, areaHectares: area, reason }
    : { choice: 'candidate', varietyId: chosen, areaHectares: area, reason };
}

/** The recorded decision as it is typed, or an open one for the whole area. */
export function toDecisionDraft(decision: Decision | null, weighUp: WeighUp): DecisionDraft {
  if (decision === null) return { chosen: '', areaHectares: weighUp.areaHectares, reason: '' };
  return {
    chosen: decision.varietyId ?? decision.choice,
    areaHectares: decision.areaHectares,
    reason: decision.reason,
  };
}
