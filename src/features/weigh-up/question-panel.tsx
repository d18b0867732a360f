import { useState } from 'react';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import type { QuestionKind } from '#shared/question-kind.ts';
import { changeWeighUp, type WeighUp } from '#shared/weigh-up.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { FoldedSection } from '#src/components/folded-section.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { PanelFailure } from './panel-failure.tsx';
import { QuestionChoice } from './question-choice.tsx';
import { useSavingBase, type SavingBase } from './use-saving-base.ts';
import { toInput } from './weigh-up-input.ts';
import { weighUpQuery } from './weigh-up-queries.ts';

type QuestionPanelProps = {
  weighUp: WeighUp;
  /** Numbers of the money panel that are not saved: a save from here would be met as somebody else's. */
  hasUnsaved: boolean;
};

/** How the candidates are compared: changed here, the question is weighed again. */
export function QuestionPanel({ weighUp, hasUnsaved }: QuestionPanelProps) {
  const { t } = useTranslation('weigh-up');
  const [touched, setTouched] = useState<QuestionKind | null>(null);
  const chosen = touched ?? weighUp.question;
  const saving = useQuestionSaving(
    useSavingBase(weighUp, touched !== null, ({ question }) => question),
    () => setTouched(null),
  );
  return (
    <FoldedSection id="question" title={t('question.panel')}>
      <p className="text-faded">{t('question.lead')}</p>
      <form
        className="flex flex-col gap-4"
        onSubmit={(event) => {
          event.preventDefault();
          saving.mutate(chosen);
        }}
      >
        <QuestionChoice value={chosen} onChange={setTouched} fixedCandidates={weighUp.candidateIds.length} />
        <PanelFailure error={saving.error} />
        {hasUnsaved && <p className="text-sm text-faded">{t('farm.saveFirst')}</p>}
        <Button
          type="submit"
          disabled={hasUnsaved || chosen === weighUp.question}
          isBusy={saving.isPending}
          className="self-start"
        >
          {saving.isPending ? t('question.saving') : t('question.save')}
        </Button>
      </form>
    </FoldedSection>
  );
}

function useQuestionSaving({ base, followConflict }: SavingBase, onSaved: () => void) {
  const { t } = useTranslation('weigh-up');
  const client = useQueryClient();
  return useMutation({
    mutationFn: (question: QuestionKind) =>
      callApi(changeWeighUp, {
        params: { weighUpId: base.id },
        body: { revision: base.revision, weighUp: { ...toInput(base), question } },
      }),
    onSuccess: (saved) => {
      onSaved();
      client.setQueryData(weighUpQuery(base.id).queryKey, saved);
      showToast(t('question.saved'));
    },
    onError: followConflict,
  });
}
