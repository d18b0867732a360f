import type { SaidOfCandidate, SaidThen } from '#shared/decision.ts';
import type { CandidateResult, WeighUp, WeighUpResult } from '#shared/weigh-up.ts';

/** What is said of a candidate now, in the terms in which it was said then. */
export function sayNow({ varietyId, varietyName, verdict, gap, money }: CandidateResult): SaidOfCandidate {
  return {
    ...{ varietyId, varietyName, verdict },
    estimate: gap?.estimate ?? null,
    interval: gap?.region ?? null,
    chancePays: money?.chancePays ?? null,
    moneyVerdict: money?.verdict ?? null,
  };
}

export type ThenAndNowRow = {
  then: SaidOfCandidate;
  /** null where the candidate is not weighed any more, or against another variety. */
  now: SaidOfCandidate | null;
};

/** Every candidate as it was told then, beside what is told of it now: gaps to different varieties are not held together. */
export function pairThenAndNow(said: SaidThen, weighUp: WeighUp, result: WeighUpResult): ThenAndNowRow[] {
  const isSameCurrent = said.currentVarietyId === weighUp.currentVarietyId;
  const now = new Map(result.candidates.map((candidate) => [candidate.varietyId, sayNow(candidate)]));
  return said.candidates.map((then) => ({
    then,
    now: isSameCurrent ? (now.get(then.varietyId) ?? null) : null,
  }));
}

/** Whether the evidence of the same question has moved since: new trials, corrections, ticked-off ones, or prices. */
export function hasMoved(rows: readonly ThenAndNowRow[]): boolean {
  return rows.some(
    ({ then, now }) =>
      now === null ||
      now.verdict !== then.verdict ||
      now.estimate !== then.estimate ||
      now.chancePays !== then.chancePays,
  );
}
