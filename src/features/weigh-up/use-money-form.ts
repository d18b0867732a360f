import { useEffect, useMemo, useState } from 'react';
import { zodResolver } from '@hookform/resolvers/zod';
import { useQueryClient } from '@tanstack/react-query';
import { useForm, useWatch, type UseFormReturn } from 'react-hook-form';
import type { Crop } from '#shared/catalogue.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import type { WeighUp } from '#shared/weigh-up.ts';
import { fieldIssues } from '#src/field-issues.ts';
import { findKeptMoney, useKeptMoney } from './kept-money-draft.ts';
import {
  moneyForm,
  savedMoneyForm,
  toAssumptions,
  toMoneyDraft,
  type MoneyDraft,
  type MoneyForm,
} from './money-form.ts';

export type MoneyFormApi = UseFormReturn<MoneyDraft, unknown, MoneyForm>;

export type ReckonedMoney = {
  form: MoneyFormApi;
  /** The weigh-up whose numbers were last put into the panel: what is saved is a change of this revision. */
  base: WeighUp;
  /** Puts the numbers of a weigh-up into the panel, over what was typed. */
  take: (weighUp: WeighUp) => void;
  /** The last numbers that fitted: what the page reckons with. */
  assumptions: MoneyAssumptions;
  areaHectares: number;
  /** Whether what is typed now fits. */
  isValid: boolean;
};

/** The money panel's form, with the assumptions it stands for at every edit. */
export function useMoneyForm(
  weighUp: WeighUp,
  cropNow: Pick<Crop, 'traits' | 'standardMoisturePercent'>,
): ReckonedMoney {
  // A catalogue that is read again meanwhile must not reset what is being typed.
  const [crop] = useState(cropNow);
  const client = useQueryClient();
  const [left] = useState(() => findKeptMoney(client, weighUp));
  const [base, setBase] = useState(left?.base ?? weighUp);
  const form = useForm<MoneyDraft, unknown, MoneyForm>({
    resolver: zodResolver(moneyForm, fieldIssues),
    defaultValues: toMoneyDraft(base, crop),
    mode: 'onChange',
  });
  const take = (next: WeighUp) => {
    // Another one even where it holds the same: what was left unsaved is over with it.
    setBase({ ...next });
    form.reset(toMoneyDraft(next, crop));
  };
  const { isDirty } = form.formState;
  // Saved elsewhere meanwhile: an untouched panel follows, a touched one keeps its base, so that saving meets the conflict.
  if (weighUp.revision !== base.revision && !isDirty && base !== left?.base) setBase(weighUp);
  useEffect(() => {
    const draft = toMoneyDraft(base, crop);
    form.reset(draft);
    // Saved before there were limits: reckoned with, and marked, since it has to be put right before anything is saved.
    if (!moneyForm.safeParse(draft).success) void form.trigger();
    if (left?.base === base) form.reset(left.draft, { keepDefaultValues: true });
  }, [form, base, crop, left]);
  const typed = useWatch({ control: form.control });
  useKeptMoney(form, typed, base);
  const parsed = useMemo(() => moneyForm.safeParse(typed), [typed]);
  const fitting = useLastFitting(parsed.success ? parsed.data : undefined, toMoneyDraft(base, crop));
  return {
    form,
    base,
    take,
    assumptions: useMemo(() => toAssumptions(fitting, base.assumptions), [fitting, base]),
    areaHectares: fitting.areaHectares,
    isValid: parsed.success,
  };
}

/** What fits now, else what fitted last: the page goes on showing figures while a number is being typed. */
function useLastFitting(now: MoneyForm | undefined, saved: MoneyDraft): MoneyForm {
  const [last, setLast] = useState(() => savedMoneyForm.parse(saved));
  if (now !== undefined && now !== last) setLast(now);
  return now ?? last;
}
