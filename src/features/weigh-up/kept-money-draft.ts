import { useEffect } from 'react';
import { useQueryClient, type QueryClient } from '@tanstack/react-query';
import type { UseFormReturn } from 'react-hook-form';
import type { WeighUp } from '#shared/weigh-up.ts';
import type { MoneyDraft, MoneyForm } from './money-form.ts';

/** Numbers that were typed and not saved, with the weigh-up that they were typed over. */
type KeptMoney = { base: WeighUp; draft: MoneyDraft };

/** Of the tab: whoever looks at a trial in between finds the numbers as they were left. Gone with signing out. */
const keyOf = ({ id }: WeighUp) => ['kept-money', id] as const;

export const findKeptMoney = (client: QueryClient, weighUp: WeighUp): KeptMoney | undefined =>
  client.getQueryData<KeptMoney>(keyOf(weighUp));

const askBeforeLeaving = (event: BeforeUnloadEvent): void => event.preventDefault();

/**
 * Keeps what is typed as long as it is not saved; the browser asks before it throws the page away.
 * @param typed what stands in the form, watched
 */
export function useKeptMoney(
  getValues: UseFormReturn<MoneyDraft, unknown, MoneyForm>['getValues'],
  isDirty: boolean,
  typed: unknown,
  base: WeighUp,
): void {
  const client = useQueryClient();
  useEffect(() => {
    const queryKey = keyOf(base);
    if (!isDirty) {
      client.removeQueries({ queryKey });
      return;
    }
    // Nobody reads it while the page is away, and it is to be there all the same.
    client.setQueryDefaults(queryKey, { gcTime: Infinity });
    client.setQueryData<KeptMoney>(queryKey, { base, draft: getValues() });
  }, [client, getValues, typed, base, isDirty]);
  useEffect(() => {
    if (!isDirty) return undefined;
    window.addEventListener('beforeunload', askBeforeLeaving);
    return () => window.removeEventListener('beforeunload', askBeforeLeaving);
  }, [isDirty]);
}
