import { useId } from 'react';
import { useTranslation } from 'react-i18next';
import { questionKinds, type QuestionKind } from '#shared/question-kind.ts';

type QuestionChoiceProps = {
  value: QuestionKind;
  onChange: (kind: QuestionKind) => void;
  /** Candidates kept, where they can no longer be left out to make a pair. */
  fixedCandidates?: number;
};

/** How the candidates are compared: what was asked decides it, and each way says what it takes and gives. */
export function QuestionChoice({ value, onChange, fixedCandidates }: QuestionChoiceProps) {
  const { t } = useTranslation('weigh-up');
  const name = useId();
  const isRefused = (kind: QuestionKind) =>
    kind === 'pair' && fixedCandidates !== undefined && fixedCandidates !== 1;
  return (
    <fieldset className="min-w-0">
      <legend className="mb-1 text-sm font-semibold">{t('question.title')}</legend>
      <div className="grid gap-2">
        {questionKinds.map((kind) => (
          <label
            key={kind}
            className="tap-target flex items-start gap-3 rounded-md border border-rule px-3 py-2 has-checked:border-action has-checked:bg-card"
          >
            <input
              type="radio"
              name={name}
              value={kind}
              checked={value === kind}
              disabled={isRefused(kind)}
              onChange={() => onChange(kind)}
              aria-describedby={`${name}-${kind}`}
              className="mt-0.5 size-5 shrink-0 accent-action"
            />
            <span className="min-w-0">
              <span className="block font-semibold">{t(`question.${kind}.name`)}</span>
              <span id={`${name}-${kind}`} className="block text-sm text-faded">
                {t(`question.${kind}.says`)}
                {isRefused(kind) && ` ${t('question.pairNeedsOne', { number: fixedCandidates })}`}
              </span>
            </span>
          </label>
        ))}
      </div>
    </fieldset>
  );
}
