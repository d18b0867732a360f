import { useState } from 'react';
import { useQueryClient } from '@tanstack/react-query';
import type { WeighUp } from '#shared/weigh-up.ts';
import { ApiError } from '#src/api-client.ts';
import { weighUpQuery } from './weigh-up-queries.ts';

/** Whether somebody, or the same person in another tab, saved in between. */
export const isConflict = (error: unknown): boolean =>
  error instanceof ApiError && error.code === 'revision-conflict';

export type SavingBase = {
  /** What a save of the panel is a change of, with the revision that it is sent under. */
  base: WeighUp;
  /**
   * Takes over what somebody saved in between, once a save was refused for it: the page then shows that beside what is
   * still chosen or typed here, and saving once more is done in its sight.
   */
  followConflict: (error: Error) => void;
};

/**
 * The weigh-up that a panel changes. An untouched panel follows the page; a touched one holds on to what it was typed
 * over where that was changed elsewhere, so that it is met as a conflict and never overwritten unseen.
 * @param partOf what of a weigh-up the panel shows: what is saved beside that does not concern it
 */
export function useSavingBase(
  weighUp: WeighUp,
  isTouched: boolean,
  partOf: (weighUp: WeighUp) => unknown,
): SavingBase {
  const client = useQueryClient();
  const [base, setBase] = useState(weighUp);
  const isSame = () => JSON.stringify(partOf(base)) === JSON.stringify(partOf(weighUp));
  if (base.revision < weighUp.revision && (!isTouched || isSame())) setBase(weighUp);
  const followConflict = (error: Error) => {
    if (!isConflict(error)) return;
    const latest = client.fetchQuery({ ...weighUpQuery(weighUp.id), staleTime: 0 });
    // Where it cannot be fetched now, the next save meets the same conflict again.
    void latest.then((saved) => setBase(saved.weighUp)).catch(() => undefined);
  };
  return { base, followConflict };
}
