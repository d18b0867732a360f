import { useTranslation } from 'react-i18next';
import { Field } from '#src/components/field.tsx';
import { Select } from '#src/components/select.tsx';
import { trialChoices, type ChosenTrials } from './chosen-farm.ts';

type TrialChoiceFieldProps = {
  value: ChosenTrials;
  onChange: (chosen: ChosenTrials) => void;
  /** The nearest sites can only be found from a farm that has a place. */
  hasPlace: boolean;
};

/** Which trials answer the question: the region's own unless the advisor asks for others. */
export function TrialChoiceField({ value, onChange, hasPlace }: TrialChoiceFieldProps) {
  const { t } = useTranslation('weigh-up');
  return (
    <Field
      label={t('farm.trials')}
      hint={hasPlace ? t('farm.elsewhereHint') : `${t('farm.elsewhereHint')} ${t('farm.nearestHint')}`}
    >
      <Select
        value={value}
        onChange={(event) =>
          onChange(trialChoices.find((choice) => choice === event.target.value) ?? 'region')
        }
        options={trialChoices.map((choice) => ({
          value: choice,
          label: t(`farm.choice.${choice}`),
          isDisabled: choice === 'nearest' && !hasPlace,
        }))}
      />
    </Field>
  );
}
