import { isOverArea, type Decision, type DecisionInput, type SaidThen } from '#shared/decision.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { WeighUp, WeighUpResult } from '#shared/weigh-up.ts';

/**
 * A decision with what the evidence said of every candidate when it was taken.
 * @param recordedBy name of who records it
 * @throws CodedError invalid-input for a candidate that was not weighed, and for more hectares than the weigh-up is about
 */
export function describeDecision(
  input: DecisionInput,
  weighUp: WeighUp,
  result: WeighUpResult,
  recordedBy: string,
): Decision {
  if (isOverArea(input.areaHectares, weighUp.areaHectares))
    throw new CodedError('invalid-input', { issues: [{ path: 'areaHectares', reason: 'over-area' }] });
  return {
    ...input,
    varietyName: nameChosen(input, weighUp, result),
    decidedAt: new Date().toISOString(),
    recordedBy,
    said: freezeAnswer(weighUp, result),
  };
}

function nameChosen(input: DecisionInput, weighUp: WeighUp, { candidates }: WeighUpResult): string | null {
  if (input.choice === 'current') return weighUp.currentVarietyName;
  if (input.choice !== 'candidate') return null;
  const chosen = candidates.find(({ varietyId }) => varietyId === input.varietyId);
  if (chosen === undefined)
    throw new CodedError('invalid-input', { issues: [{ path: 'varietyId', reason: 'invalid_value' }] });
  return chosen.varietyName;
}

function freezeAnswer(weighUp: WeighUp, result: WeighUpResult): SaidThen {
  const { currentVarietyId, currentVarietyName, seasonFrom, seasonTo } = weighUp;
  return {
    ...{ currentVarietyId, currentVarietyName, seasonFrom, seasonTo },
    trials: result.trials.length,
    tickedOff: result.leftOut.filter(({ reason }) => reason === 'ticked-off').length,
    computedAt: result.computedAt,
    candidates: result.candidates.map(({ varietyId, varietyName, verdict, gap, money }) => ({
      varietyId,
      varietyName,
      verdict,
      estimate: gap?.estimate ?? null,
      interval: gap?.region ?? null,
      chancePays: money?.chancePays ?? null,
      moneyVerdict: money?.verdict ?? null,
    })),
  };
}
