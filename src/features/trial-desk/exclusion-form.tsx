import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { z } from 'zod';
import { excludePlots } from '#shared/trial-desk.ts';
import type { PlotView, TrialDetail } from '#shared/trial.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { Field } from '#src/components/field.tsx';
import { TextInput } from '#src/components/text-input.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { fieldIssues } from '#src/field-issues.ts';
import { useErrorText } from '#src/use-error-text.ts';
import { useFieldErrorText } from '#src/use-field-error-text.ts';
import { deskTrialQuery, takeDeskTrial } from './desk-queries.ts';

const reasonForm = z.object({ reason: z.string().trim().min(3).max(500) });
type ReasonForm = z.infer<typeof reasonForm>;

type Change = { plotIds: string[]; reason: string | null };

/** Excludes or takes back plots under the newest revision, with a way to undo it at once. */
function useExclusion(trialId: string, onDone: () => void) {
  const { t } = useTranslation('desk');
  const client = useQueryClient();
  const change = useMutation({
    mutationFn: async ({ plotIds, reason }: Change) => {
      const trial = await client.ensureQueryData(deskTrialQuery(trialId));
      return callApi(excludePlots, {
        params: { trialId },
        body: { revision: trial.revision, plotIds, reason },
      });
    },
    onSuccess: async ({ trial }, { plotIds, reason }) => {
      await takeDeskTrial(client, trial);
      onDone();
      const count = plotIds.length;
      if (reason === null) showToast(t('plots.takenBackDone', { count }));
      else {
        showToast(t('plots.leftOutDone', { count }), () => change.mutate({ plotIds, reason: null }));
      }
    },
  });
  return change;
}

type ExclusionFormProps = { trial: TrialDetail; plots: readonly PlotView[]; onDone: () => void };

/** What to do with the chosen plots: leave those out that count, with a reason; take those back that do not. */
export function ExclusionForm({ trial, plots, onDone }: ExclusionFormProps) {
  const { t } = useTranslation('desk');
  const errorText = useErrorText();
  const fieldErrorText = useFieldErrorText();
  const form = useForm<ReasonForm>({
    resolver: zodResolver(reasonForm, fieldIssues),
    defaultValues: { reason: '' },
  });
  const change = useExclusion(trial.id, () => {
    form.reset();
    onDone();
  });
  const counting = plots.filter((plot) => plot.excludedReason === null).map((plot) => plot.id);
  const leftOut = plots.filter((plot) => plot.excludedReason !== null).map((plot) => plot.id);
  return (
    <form
      noValidate
      className="flex flex-col gap-3 rounded-lg border border-rule bg-card p-4"
      onSubmit={(event) =>
        void form.handleSubmit(({ reason }) => change.mutate({ plotIds: counting, reason }))(event)
      }
    >
      <p role="status" className="font-semibold">
        {t('plots.chosen', { count: plots.length })}
      </p>
      <Field label={t('plots.reason')} error={fieldErrorText(form.formState.errors.reason)}>
        <TextInput autoComplete="off" {...form.register('reason')} />
      </Field>
      {change.isError && <ErrorState message={errorText(change.error)} />}
      <div className="flex flex-wrap gap-3">
        <Button type="submit" tone="main" disabled={counting.length === 0} isBusy={change.isPending}>
          {t('plots.leaveOut')}
        </Button>
        <Button
          disabled={leftOut.length === 0}
          isBusy={change.isPending}
          onClick={() => change.mutate({ plotIds: leftOut, reason: null })}
        >
          {t('plots.takeBack')}
        </Button>
      </div>
    </form>
  );
}
