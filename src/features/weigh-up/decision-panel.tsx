import { useState } from 'react';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link } from 'react-router-dom';
import type { Decision, DecisionInput, EarlierDecision } from '#shared/decision.ts';
import { recordDecision } from '#shared/weigh-up-record.ts';
import type { WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { Actions, Dialog } from '#src/components/dialog.tsx';
import { FoldedSection } from '#src/components/folded-section.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { fillPath, paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { DecisionFormFields } from './decision-form-fields.tsx';
import { PanelFailure } from './panel-failure.tsx';
import { RecordedDecision } from './recorded-decision.tsx';
import { hasMoved, pairThenAndNow } from './then-and-now.ts';
import { isConflict } from './use-saving-base.ts';
import { decisionsQuery, weighUpQuery, weighUpsQuery } from './weigh-up-queries.ts';

type DecisionPanelProps = { weighUp: WeighUp; result: WeighUpResult; hasUnsaved: boolean };

/** What the grower decided, and what was decided in earlier seasons beside what the evidence says now. */
export function DecisionPanel({ weighUp, result, hasUnsaved }: DecisionPanelProps) {
  const { t } = useTranslation('record');
  const decisions = useQuery(decisionsQuery(weighUp.id));
  return (
    <FoldedSection id="decision" title={t('decision.title')}>
      <p className="text-faded">{t('decision.lead')}</p>
      {decisions.isPending && <Skeleton lines={3} />}
      {decisions.isError && <QueryErrorState query={decisions} />}
      {decisions.data && (
        <>
          <OwnDecision
            weighUp={weighUp}
            result={result}
            decision={decisions.data.decision}
            hasUnsaved={hasUnsaved}
          />
          {decisions.data.earlier.map((one) => (
            <EarlierSeason key={one.weighUpId} earlier={one} weighUp={weighUp} result={result} />
          ))}
        </>
      )}
    </FoldedSection>
  );
}

function OwnDecision({
  weighUp,
  result,
  decision,
  hasUnsaved,
}: DecisionPanelProps & { decision: Decision | null }) {
  const { t } = useTranslation('record');
  // Once it is typed into, the form stays, also where a decision recorded elsewhere comes in.
  const [isChanging, setIsChanging] = useState(false);
  const [isTakingBack, setIsTakingBack] = useState(false);
  const saving = useDecisionSaving(weighUp, () => setIsChanging(false));
  const rows = decision === null ? [] : pairThenAndNow(decision.said, weighUp, result);
  return (
    <>
      {decision !== null && <RecordedDecision decision={decision} rows={hasMoved(rows) ? rows : []} />}
      <PanelFailure error={saving.error} />
      {decision === null || isChanging ? (
        <DecisionFormFields
          {...{ weighUp, result, decision, hasUnsaved }}
          isBusy={saving.isPending}
          onTyped={() => setIsChanging(true)}
          replaced={hasMoved(rows) ? decision : null}
          onSave={(input) => saving.mutate(input)}
          onCancel={decision && (() => setIsChanging(false))}
        />
      ) : (
        <div className="flex flex-wrap gap-3">
          <Button onClick={() => setIsChanging(true)}>{t('decision.change')}</Button>
          <Button tone="quiet" onClick={() => setIsTakingBack(true)}>
            {t('decision.takeBack')}
          </Button>
        </div>
      )}
      {decision !== null && isTakingBack && (
        <TakeBackDialog
          decision={decision}
          saving={saving}
          onConfirm={() => saving.mutate(null, { onSettled: () => setIsTakingBack(false) })}
          onClose={() => setIsTakingBack(false)}
        />
      )}
    </>
  );
}

type TakeBackDialogProps = {
  decision: Decision;
  saving: ReturnType<typeof useDecisionSaving>;
  onConfirm: () => void;
  onClose: () => void;
};

/** What was said when it was decided cannot be had again once it is gone, so this is asked for twice. */
function TakeBackDialog({ decision, saving, onConfirm, onClose }: TakeBackDialogProps) {
  const { t } = useTranslation(['record', 'common']);
  const format = useFormat();
  return (
    <Dialog isOpen title={t('record:decision.takeBackTitle')} onClose={onClose}>
      <p>{t('record:decision.takeBackText', { date: format.date(decision.decidedAt) })}</p>
      <Actions>
        <Button onClick={onClose}>{t('common:cancel')}</Button>
        <Button tone="danger" isBusy={saving.isPending} onClick={onConfirm}>
          {t('record:decision.takeBack')}
        </Button>
      </Actions>
    </Dialog>
  );
}

/** Records under the revision on the page; where somebody saved in between, the page shows theirs and says so. */
function useDecisionSaving(weighUp: WeighUp, onSaved: () => void) {
  const { t } = useTranslation('record');
  const client = useQueryClient();
  const [query, own] = [decisionsQuery(weighUp.id), weighUpQuery(weighUp.id)];
  return useMutation({
    mutationFn: (decision: DecisionInput | null) =>
      callApi(recordDecision, {
        params: { weighUpId: weighUp.id },
        body: { revision: weighUp.revision, decision },
      }),
    onSuccess: (saved) => {
      client.setQueryData(query.queryKey, (held) => held && { ...held, decision: saved.decision });
      client.setQueryData(own.queryKey, (held) => held && { ...held, weighUp: saved.weighUp });
      void client.invalidateQueries({ queryKey: weighUpsQuery.queryKey });
      showToast(t(saved.decision === null ? 'decision.takenBack' : 'decision.recorded'));
      onSaved();
    },
    onError: (error) => {
      if (!isConflict(error)) return;
      void client.invalidateQueries({ queryKey: query.queryKey });
      void client.invalidateQueries({ queryKey: own.queryKey });
    },
  });
}

type EarlierSeasonProps = { earlier: EarlierDecision; weighUp: WeighUp; result: WeighUpResult };

function EarlierSeason({ earlier: { weighUpId, decision }, weighUp, result }: EarlierSeasonProps) {
  const { t } = useTranslation('record');
  const { said } = decision;
  const isOtherCurrent = said.currentVarietyId !== weighUp.currentVarietyId;
  return (
    <section className="flex flex-col gap-2">
      <h3>
        <Link to={fillPath(paths.weighUp, { weighUpId })}>
          {t('decision.earlier', { from: said.seasonFrom, to: said.seasonTo })}
        </Link>
      </h3>
      <RecordedDecision decision={decision} rows={pairThenAndNow(said, weighUp, result)} />
      {isOtherCurrent && (
        <p className="text-sm text-faded">{t('then.otherCurrent', { current: said.currentVarietyName })}</p>
      )}
    </section>
  );
}
