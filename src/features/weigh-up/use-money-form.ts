import { useCallback, useEffect, useMemo, useState } from 'react';
import { zodResolver } from '@hookform/resolvers/zod';
import { replaceEqualDeep, useQueryClient } from '@tanstack/react-query';
import { useForm, useWatch, type Path, type UseFormReturn } from 'react-hook-form';
import type { z } from 'zod';
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
  /** Whether what is typed is not what is saved. */
  isDirty: boolean;
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
    delayError: pauseMs,
  });
  const take = useCallback(
    (next: WeighUp) => {
      // Another one even where it holds the same: what was left unsaved is over with it.
      setBase({ ...next });
      form.reset(toMoneyDraft(next, crop));
    },
    [form, crop],
  );
  // Of the form's state nothing else is read here, or all that hangs on it would be drawn anew for every check of a field.
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
  useKeptMoney(form.getValues, isDirty, typed, base);
  const parsed = useMemo(() => moneyForm.safeParse(typed), [typed]);
  useCrossChecks(form, parsed.error);
  const fitting = useLastFitting(parsed.data, () => toMoneyDraft(base, crop));
  const assumptions = useUnchanged(useMemo(() => toAssumptions(fitting, base.assumptions), [fitting, base]));
  return {
    form,
    base,
    take,
    assumptions,
    areaHectares: fitting.areaHectares,
    isValid: parsed.success,
    isDirty,
  };
}

/** Whoever types `258` is not told at `25` that it is under the low price: a figure is refused after a pause, or on leaving. */
const pauseMs = 600;

/** Every figure and choice of the form by its path. */
function listNames(part: object, at: readonly string[] = []): Path<MoneyDraft>[] {
  return Object.entries(part as Record<string, unknown>).flatMap(([key, value]) => {
    const path = [...at, key];
    if (typeof value === 'object' && value !== null) return listNames(value, path);
    // The keys are those of the form.
    return [path.join('.') as Path<MoneyDraft>];
  });
}

/**
 * Prices are held against each other and against costs, costs against prices, while a form checks the field alone that is
 * edited: what no longer holds of the others is taken back at once, what does is said after the pause. One by one, since
 * fields that are checked together are all drawn anew.
 */
function useCrossChecks(form: MoneyFormApi, error: z.ZodError | undefined): void {
  useEffect(() => {
    const issues = error?.issues ?? [];
    const refused = new Set(issues.filter(({ code }) => code === 'custom').map(({ path }) => path.join('.')));
    const names = listNames(form.getValues());
    const isMarked = (name: Path<MoneyDraft>) => form.getFieldState(name).error?.type === 'custom';
    for (const name of names) if (isMarked(name)) void form.trigger(name);
    const timer = setTimeout(() => {
      for (const name of names) if (refused.has(name) && !isMarked(name)) void form.trigger(name);
    }, pauseMs);
    return () => clearTimeout(timer);
  }, [form, error]);
}

/** What fits now, else what fitted last: the page goes on showing figures while a number is being typed. */
function useLastFitting(now: MoneyForm | undefined, readSaved: () => MoneyDraft): MoneyForm {
  const [last, setLast] = useState(() => savedMoneyForm.parse(readSaved()));
  if (now !== undefined && now !== last) setLast(now);
  return now ?? last;
}

/** The same value with every part that is as it was before: what is drawn of that part is not drawn again. */
function useUnchanged<Value>(now: Value): Value {
  const [last, setLast] = useState(now);
  const next = replaceEqualDeep(last, now);
  if (next !== last) setLast(next);
  return next;
}
