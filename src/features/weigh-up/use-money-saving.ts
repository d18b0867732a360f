import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { changeWeighUp, type WeighUp } from '#shared/weigh-up.ts';
import { ApiError, callApi } from '#src/api-client.ts';
import { showToast } from '#src/components/toaster.tsx';
import { useErrorText } from '#src/use-error-text.ts';
import { moneyForm, toChangedInput, type MoneyForm } from './money-form.ts';
import type { ReckonedMoney } from './use-money-form.ts';
import { weighUpQuery, weighUpsQuery } from './weigh-up-queries.ts';

export type MoneySaving = {
  save: (typed: MoneyForm) => void;
  isSaving: boolean;
  /** True once the server has refused because somebody saved in between. */
  conflict: boolean;
  errorText: string | null;
  /** Drops what was typed for what was last taken over. */
  reset: () => void;
  takeTheirs: () => void;
  keepMine: () => void;
};

/** Saves the panel's numbers under the revision they were read at. */
export function useMoneySaving({ form, base, take }: ReckonedMoney): MoneySaving {
  const { t } = useTranslation('weigh-up');
  const client = useQueryClient();
  const errorText = useErrorText();
  const query = weighUpQuery(base.id);
  const change = useMutation({
    mutationFn: ({ typed, over }: { typed: MoneyForm; over: WeighUp }) =>
      callApi(changeWeighUp, {
        params: { weighUpId: over.id },
        body: { revision: over.revision, weighUp: toChangedInput(over, typed) },
      }),
    onSuccess: (saved) => {
      client.setQueryData(query.queryKey, saved);
      take(saved.weighUp);
      void client.invalidateQueries({ queryKey: weighUpsQuery.queryKey });
      showToast(t('money.saved'));
    },
  });
  const showSaved = (saved: WeighUp) => {
    take(saved);
    change.reset();
  };
  const refetch = () => client.fetchQuery({ ...query, staleTime: 0 });
  const conflict = change.error instanceof ApiError && change.error.code === 'revision-conflict';
  return {
    save: (typed) => change.mutate({ typed, over: base }),
    isSaving: change.isPending,
    conflict,
    errorText: change.isError && !conflict ? errorText(change.error) : null,
    reset: () => showSaved(base),
    takeTheirs: () => void refetch().then((latest) => showSaved(latest.weighUp)),
    keepMine: () =>
      void refetch().then((latest) => {
        const typed = moneyForm.safeParse(form.getValues());
        if (typed.success) change.mutate({ typed: typed.data, over: latest.weighUp });
      }),
  };
}
