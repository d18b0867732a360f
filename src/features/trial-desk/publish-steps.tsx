import { useState } from 'react';
import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { z } from 'zod';
import { publishTrial, withdrawTrial } from '#shared/trial-desk.ts';
import type { TrialDetail } from '#shared/trial.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { Actions, Dialog } from '#src/components/dialog.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { Field } from '#src/components/field.tsx';
import { TextArea } from '#src/components/text-input.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { fieldIssues } from '#src/field-issues.ts';
import { useErrorText } from '#src/use-error-text.ts';
import { useFieldErrorText } from '#src/use-field-error-text.ts';
import { takeDeskTrial } from './desk-queries.ts';

type Step = 'publish' | 'withdraw';

const reasonForm = z.object({ reason: publishTrial.body?.shape.reason ?? z.never() });
type ReasonForm = z.infer<typeof reasonForm>;

/** Publish and withdraw, each only after a reason. */
export function PublishSteps({ trial }: { trial: TrialDetail }) {
  const { t } = useTranslation('desk');
  const [step, setStep] = useState<Step | null>(null);
  return (
    <>
      {trial.state === 'published' && (
        <Button tone="danger" onClick={() => setStep('withdraw')}>
          {t('trial.withdraw')}
        </Button>
      )}
      <Button tone="main" onClick={() => setStep('publish')}>
        {trial.version === null ? t('trial.publish') : t('trial.publishAgain')}
      </Button>
      {step && <StepDialog key={step} step={step} trial={trial} onClose={() => setStep(null)} />}
    </>
  );
}

type StepDialogProps = { step: Step; trial: TrialDetail; onClose: () => void };

function StepDialog({ step, trial, onClose }: StepDialogProps) {
  const { t } = useTranslation(['desk', 'common']);
  const errorText = useErrorText();
  const fieldErrorText = useFieldErrorText();
  const client = useQueryClient();
  const form = useForm<ReasonForm>({
    resolver: zodResolver(reasonForm, fieldIssues),
    defaultValues: { reason: '' },
  });
  const taking = useMutation({
    mutationFn: ({ reason }: ReasonForm) =>
      callApi(step === 'publish' ? publishTrial : withdrawTrial, {
        params: { trialId: trial.id },
        body: { revision: trial.revision, reason },
      }),
    onSuccess: async (reply) => {
      await takeDeskTrial(client, reply.trial);
      showToast(t(step === 'publish' ? 'desk:trial.published' : 'desk:trial.withdrawn'));
      onClose();
    },
  });
  return (
    <Dialog
      isOpen
      title={t(step === 'publish' ? 'desk:trial.publishTitle' : 'desk:trial.withdrawTitle')}
      onClose={onClose}
    >
      <form
        noValidate
        onSubmit={(event) => void form.handleSubmit((typed) => taking.mutate(typed))(event)}
        className="flex flex-col gap-4"
      >
        <p>{t(step === 'publish' ? 'desk:trial.publishText' : 'desk:trial.withdrawText')}</p>
        {step === 'publish' && <p className="text-sm text-faded">{t('desk:trial.singleAuthor')}</p>}
        <Field
          label={t('desk:trial.reason')}
          hint={t('desk:trial.reasonHint')}
          error={fieldErrorText(form.formState.errors.reason)}
          isRequired
        >
          <TextArea {...form.register('reason')} />
        </Field>
        {taking.isError && <ErrorState message={errorText(taking.error)} />}
        <Actions>
          <Button onClick={onClose}>{t('common:cancel')}</Button>
          <Button type="submit" tone={step === 'publish' ? 'main' : 'danger'} isBusy={taking.isPending}>
            {t(step === 'publish' ? 'desk:trial.publish' : 'desk:trial.withdraw')}
          </Button>
        </Actions>
      </form>
    </Dialog>
  );
}
