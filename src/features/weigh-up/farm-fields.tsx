import { Controller } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import type { MoneyAssumptions } from '#shared/money.ts';
import { Field } from '#src/components/field.tsx';
import { MeasureInput, PriceInput } from '#src/components/measure-input.tsx';
import { TextInput } from '#src/components/text-input.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useFieldErrorText } from '#src/use-field-error-text.ts';
import { fallbackCurrency } from './new-weigh-up-form.ts';
import type { NewWeighUpFormApi } from './new-weigh-up-page.tsx';

/** For whom: names stand on the copy, the area turns a return per hectare into one for the farm, the usual yield tells where its fields stand. */
export function FarmFields({ form }: { form: NewWeighUpFormApi }) {
  const { t } = useTranslation('weigh-up');
  const fieldErrorText = useFieldErrorText();
  const { errors } = form.formState;
  return (
    <section className="flex flex-col gap-4">
      <h2>{t('new.farm')}</h2>
      <div className="grid gap-4 sm:grid-cols-[1fr_1fr_10rem]">
        <Field label={t('new.grower')} error={fieldErrorText(errors.growerName)} isRequired>
          <TextInput autoComplete="off" {...form.register('growerName')} />
        </Field>
        <Field label={t('new.farmName')} error={fieldErrorText(errors.farmName)} isRequired>
          <TextInput autoComplete="off" {...form.register('farmName')} />
        </Field>
        <Field label={t('new.area')} error={fieldErrorText(errors.areaHectares)} isRequired>
          <Controller
            control={form.control}
            name="areaHectares"
            render={({ field: { value, onChange, onBlur, ref } }) => (
              <MeasureInput value={value} onValueChange={onChange} onBlur={onBlur} ref={ref} unit="ha" />
            )}
          />
        </Field>
      </div>
      <Field
        label={t('farm.usualYield')}
        hint={t('farm.usualYieldHint')}
        error={fieldErrorText(errors.usualYield)}
        className="sm:max-w-sm"
      >
        <Controller
          control={form.control}
          name="usualYield"
          render={({ field: { value, onChange, onBlur, ref } }) => (
            <MeasureInput value={value} onValueChange={onChange} onBlur={onBlur} ref={ref} unit="t/ha" />
          )}
        />
      </Field>
    </section>
  );
}

type PriceFieldsProps = { form: NewWeighUpFormApi; defaults: MoneyAssumptions | null };

const prices = ['priceLow', 'priceMiddle', 'priceHigh'] as const;

/** The price range, from the sheet where there is one. */
export function PriceFields({ form, defaults }: PriceFieldsProps) {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  const fieldErrorText = useFieldErrorText();
  const { errors } = form.formState;
  return (
    <section className="flex flex-col gap-4">
      <h2>{t('new.prices')}</h2>
      <div className="grid gap-4 sm:max-w-xl sm:grid-cols-3">
        {prices.map((name) => (
          <Field key={name} label={t(`new.${name}`)} error={fieldErrorText(errors[name])} isRequired>
            <Controller
              control={form.control}
              name={name}
              render={({ field: { value, onChange, onBlur, ref } }) => (
                <PriceInput
                  value={value}
                  onValueChange={onChange}
                  onBlur={onBlur}
                  ref={ref}
                  currency={defaults?.currency ?? fallbackCurrency}
                  per="t"
                />
              )}
            />
          </Field>
        ))}
      </div>
      <p className="max-w-prose text-sm text-faded">
        {defaults?.priceSheetDate
          ? t('new.priceSheet', { date: format.date(defaults.priceSheetDate) })
          : t('new.noPriceSheet')}
      </p>
    </section>
  );
}
