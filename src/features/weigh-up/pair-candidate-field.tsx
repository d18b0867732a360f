import { useTranslation } from 'react-i18next';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { Field } from '#src/components/field.tsx';
import { Select } from '#src/components/select.tsx';
import { useLanguage } from '#src/components/use-language.ts';
import { useUrlPatch } from '#src/url-state.ts';

type PairCandidateFieldProps = { candidates: readonly CandidateResult[]; chosenId: string | undefined };

/** The one candidate of a planned pair, chosen by name alone: no figure is shown before it is chosen. */
export function PairCandidateField({ candidates, chosenId }: PairCandidateFieldProps) {
  const { t } = useTranslation('weigh-up');
  const language = useLanguage();
  const patch = useUrlPatch();
  const byName = [...candidates].sort((a, b) => a.varietyName.localeCompare(b.varietyName, language));
  return (
    <Field label={t('question.pairCandidate')} hint={t('question.pairHint')} isRequired>
      <Select
        value={chosenId ?? ''}
        onChange={(event) => patch({ candidates: event.target.value })}
        placeholder={t('question.choosePair')}
        options={byName.map(({ varietyId, varietyName }) => ({ value: varietyId, label: varietyName }))}
      />
    </Field>
  );
}
