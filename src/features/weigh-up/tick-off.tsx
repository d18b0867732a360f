import { useRef, useState } from 'react';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { tickOffTrials } from '#shared/weigh-up-record.ts';
import type { TickedOffTrial, UsedTrial, WeighUp } from '#shared/weigh-up.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { Actions, Dialog } from '#src/components/dialog.tsx';
import { Field } from '#src/components/field.tsx';
import { TextArea } from '#src/components/text-input.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { PanelFailure } from './panel-failure.tsx';
import { isConflict } from './use-saving-base.ts';
import { weighUpQuery } from './weigh-up-queries.ts';

/** Saves which trials count, under the revision on the page; where somebody saved in between, the page shows theirs. */
export function useTickingOff(weighUp: WeighUp) {
  const { t } = useTranslation('record');
  const client = useQueryClient();
  const query = weighUpQuery(weighUp.id);
  return useMutation({
    mutationFn: (tickedOff: TickedOffTrial[]) =>
      callApi(tickOffTrials, {
        params: { weighUpId: weighUp.id },
        body: { revision: weighUp.revision, tickedOff },
      }),
    onSuccess: (saved) => {
      client.setQueryData(query.queryKey, saved);
      const isMore = saved.weighUp.tickedOff.length > weighUp.tickedOff.length;
      showToast(t(isMore ? 'tickOff.done' : 'tickOff.undone'));
    },
    onError: (error) => {
      if (isConflict(error)) void client.invalidateQueries({ queryKey: query.queryKey });
    },
  });
}

type TickOffStepProps = { weighUp: WeighUp; trial: UsedTrial };

/** The way out of the figures for a trial that counts, and back in with one click for one that was ticked off. */
export function TickOffStep({ weighUp, trial }: TickOffStepProps) {
  const { t } = useTranslation('record');
  const [isAsking, setIsAsking] = useState(false);
  const saving = useTickingOff(weighUp);
  const others = weighUp.tickedOff.filter(({ trialId }) => trialId !== trial.trialId);
  const about = { site: trial.siteName, season: trial.season };
  if (others.length < weighUp.tickedOff.length) {
    return (
      <>
        <Button
          tone="quiet"
          isBusy={saving.isPending}
          aria-label={t('tickOff.backOf', about)}
          onClick={() => saving.mutate(others)}
        >
          {t('tickOff.back')}
        </Button>
        <PanelFailure error={saving.error} />
      </>
    );
  }
  return (
    <>
      <Button tone="quiet" aria-label={t('tickOff.outOf', about)} onClick={() => setIsAsking(true)}>
        {t('tickOff.out')}
      </Button>
      <Dialog isOpen={isAsking} title={t('tickOff.title', about)} onClose={() => setIsAsking(false)}>
        <ReasonForm
          isBusy={saving.isPending}
          failure={saving.error}
          onCancel={() => setIsAsking(false)}
          onSave={(reason) => saving.mutate([...others, { trialId: trial.trialId, reason }])}
        />
      </Dialog>
    </>
  );
}

type ReasonFormProps = {
  isBusy: boolean;
  failure: Error | null;
  onCancel: () => void;
  onSave: (reason: string) => void;
};

function ReasonForm({ isBusy, failure, onCancel, onSave }: ReasonFormProps) {
  const { t } = useTranslation(['record', 'common', 'errors']);
  const [reason, setReason] = useState('');
  const [isRefused, setIsRefused] = useState(false);
  const field = useRef<HTMLTextAreaElement>(null);
  const isMissing = reason.trim() === '';
  return (
    <form
      noValidate
      onSubmit={(event) => {
        event.preventDefault();
        setIsRefused(isMissing);
        if (isMissing) field.current?.focus();
        else onSave(reason);
      }}
    >
      <p className="mb-3">{t('record:tickOff.text')}</p>
      <Field
        label={t('record:tickOff.reason')}
        error={isRefused && isMissing ? t('errors:fields.required') : undefined}
        isRequired
      >
        <TextArea
          ref={field}
          value={reason}
          maxLength={500}
          onChange={(event) => setReason(event.target.value)}
        />
      </Field>
      <PanelFailure error={failure} />
      <Actions>
        <Button onClick={onCancel}>{t('common:cancel')}</Button>
        <Button type="submit" tone="main" isBusy={isBusy}>
          {t('record:tickOff.confirm')}
        </Button>
      </Actions>
    </form>
  );
}
