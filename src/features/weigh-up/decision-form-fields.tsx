import { zodResolver } from '@hookform/resolvers/zod';
import { Controller, useForm, useWatch } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import type { Decision, DecisionInput } from '#shared/decision.ts';
import type { WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import { Button } from '#src/components/button.tsx';
import { Field } from '#src/components/field.tsx';
import { MeasureInput } from '#src/components/measure-input.tsx';
import { Select } from '#src/components/select.tsx';
import { TextArea } from '#src/components/text-input.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { fieldIssues } from '#src/field-issues.ts';
import { useFieldErrorText } from '#src/use-field-error-text.ts';
import { decisionFormOn, hasArea, toDecisionDraft, type DecisionDraft } from './decision-form.ts';

type DecisionFormFieldsProps = {
  weighUp: WeighUp;
  result: WeighUpResult;
  decision: Decision | null;
  /** The decision whose record of what was said is lost when this one is recorded, as the evidence has moved since. */
  replaced: Decision | null;
  /** The numbers on the page are not the saved ones, which would be kept with the decision. */
  hasUnsaved: boolean;
  isBusy: boolean;
  onTyped: () => void;
  onSave: (decision: DecisionInput) => void;
  /** null where there is nothing to go back to. */
  onCancel: (() => void) | null;
};

/** What was chosen, on how many hectares, and why. */
export function DecisionFormFields(props: DecisionFormFieldsProps) {
  const { weighUp, result, decision, replaced, hasUnsaved, isBusy, onTyped, onSave, onCancel } = props;
  const format = useFormat();
  const { t } = useTranslation(['record', 'weigh-up', 'common']);
  const fieldErrorText = useFieldErrorText();
  const form = useForm<DecisionDraft, unknown, DecisionInput>({
    resolver: zodResolver(decisionFormOn(weighUp.areaHectares), fieldIssues),
    defaultValues: toDecisionDraft(decision, weighUp),
  });
  const { errors } = form.formState;
  const chosen = useWatch({ control: form.control, name: 'chosen' });
  const options = [
    ...result.candidates.map(({ varietyId, varietyName }) => ({ value: varietyId, label: varietyName })),
    { value: 'current', label: t('record:decision.stays', { name: weighUp.currentVarietyName }) },
    { value: 'other', label: t('record:decision.other') },
    { value: 'undecided', label: t('record:decision.undecided') },
  ];
  return (
    <form
      noValidate
      className="flex max-w-prose flex-col gap-4"
      onChange={onTyped}
      onSubmit={(event) => void form.handleSubmit(onSave)(event)}
    >
      <div className="grid gap-4 sm:grid-cols-[minmax(0,1fr)_10rem]">
        <Field label={t('record:decision.chosen')} error={fieldErrorText(errors.chosen)} isRequired>
          <Select {...form.register('chosen')} placeholder={t('record:decision.choose')} options={options} />
        </Field>
        {hasArea(chosen) && (
          <Field
            label={t('record:decision.area')}
            error={fieldErrorText(errors.areaHectares)}
            isRequired={chosen !== 'other'}
          >
            <Controller
              control={form.control}
              name="areaHectares"
              render={({ field: { value, onChange, onBlur, ref } }) => (
                <MeasureInput value={value} onValueChange={onChange} onBlur={onBlur} ref={ref} unit="ha" />
              )}
            />
          </Field>
        )}
      </div>
      <Field
        label={t('record:decision.reason')}
        hint={t('record:decision.reasonHint')}
        error={fieldErrorText(errors.reason)}
        isRequired
      >
        <TextArea {...form.register('reason')} maxLength={1000} />
      </Field>
      {replaced !== null && (
        <p className="text-sm">{t('record:decision.replaces', { date: format.date(replaced.decidedAt) })}</p>
      )}
      {hasUnsaved && <p className="text-sm font-semibold">{t('record:decision.saveFirst')}</p>}
      <div className="flex flex-wrap gap-3">
        <Button type="submit" isBusy={isBusy} disabled={hasUnsaved}>
          {t('record:decision.record')}
        </Button>
        {onCancel && (
          <Button tone="quiet" onClick={onCancel}>
            {t('common:cancel')}
          </Button>
        )}
      </div>
    </form>
  );
}
