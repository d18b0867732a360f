import { Controller, type Path } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { currencySign } from '#shared/format-number.ts';
import type { WeighUp } from '#shared/weigh-up.ts';
import { Button } from '#src/components/button.tsx';
import { Field } from '#src/components/field.tsx';
import { NumberInput } from '#src/components/number-input.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useLanguage } from '#src/components/use-language.ts';
import { useFieldErrorText } from '#src/use-field-error-text.ts';
import type { MoneyDraft } from './money-form.ts';
import { SaveConflict } from './save-conflict.tsx';
import type { MoneyFormApi, ReckonedMoney } from './use-money-form.ts';
import type { MoneySaving } from './use-money-saving.ts';

export type NamedVariety = { id: string; name: string };

type MoneyPanelProps = {
  weighUp: WeighUp;
  varieties: readonly NamedVariety[];
  money: ReckonedMoney;
  saving: MoneySaving;
};

/** Prices and costs; each edit is reckoned on the page at once and saved on demand. */
export function MoneyPanel({ weighUp, varieties, money, saving }: MoneyPanelProps) {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  const language = useLanguage();
  const { form, isValid } = money;
  const { currency, priceSheetDate } = weighUp.assumptions;
  const sign = currencySign(currency, language);
  const figure = (name: Path<MoneyDraft>, label: string, unit: string) => (
    <FigureField key={name} form={form} name={name} label={label} unit={unit} />
  );
  return (
    <section aria-labelledby="money-title" className="rounded-lg border border-rule bg-card p-4 sm:p-5">
      <h2 id="money-title">{t('money.title')}</h2>
      <p className="mb-4 text-sm text-faded">{t('money.lead')}</p>
      <form
        noValidate
        className="flex flex-col gap-4"
        onSubmit={(event) => void form.handleSubmit((typed) => saving.save(typed))(event)}
      >
        <fieldset>
          <legend className="mb-1 text-sm font-semibold">{t('money.price', { currency: sign })}</legend>
          <div className="grid grid-cols-3 gap-2">
            {figure('priceLow', t('money.low'), '')}
            {figure('priceMiddle', t('money.middle'), '')}
            {figure('priceHigh', t('money.high'), '')}
          </div>
        </fieldset>
        <div className="grid grid-cols-2 gap-2">
          {figure('haulagePerTonne', t('money.haulage'), `${sign}/t`)}
          {figure('dryingPerTonne', t('money.drying'), `${sign}/t`)}
        </div>
        {figure('areaHectares', t('money.area'), 'ha')}
        <fieldset className="flex flex-col gap-2">
          <legend className="mb-1 text-sm font-semibold">{t('money.seeds')}</legend>
          {varieties.map(({ id, name }) =>
            figure(`seedCosts.${id}.seedPerHectare`, t('money.seed', { name }), `${sign}/ha`),
          )}
          <p className="text-sm text-faded">{t('money.unknownSeed')}</p>
        </fieldset>
        <details>
          <summary className="tap-target flex items-center font-semibold text-action underline underline-offset-4">
            {t('money.moreCosts')}
          </summary>
          <div className="flex flex-col gap-2">
            {varieties.map(({ id, name }) => [
              figure(`seedCosts.${id}.treatmentPerHectare`, t('money.treatment', { name }), `${sign}/ha`),
              figure(`seedCosts.${id}.royaltyPerHectare`, t('money.royalty', { name }), `${sign}/ha`),
            ])}
          </div>
        </details>
        <p className="text-sm text-faded">
          {priceSheetDate ? t('money.sheet', { date: format.date(priceSheetDate) }) : t('money.noSheet')}
        </p>
        <SaveState form={form} isValid={isValid} saving={saving} />
      </form>
    </section>
  );
}

const prices = ['priceLow', 'priceMiddle', 'priceHigh'] as const;

type FigureFieldProps = { form: MoneyFormApi; name: Path<MoneyDraft>; label: string; unit: string };

function FigureField({ form, name, label, unit }: FigureFieldProps) {
  const fieldErrorText = useFieldErrorText();
  return (
    <Controller
      control={form.control}
      name={name}
      render={({ field: { value, onChange, onBlur, ref }, fieldState: { error } }) => (
        <Field label={label} error={fieldErrorText(error)}>
          <NumberInput
            value={typeof value === 'number' ? value : null}
            onValueChange={(figure) => {
              onChange(figure);
              // Prices are held against each other and against the costs per tonne, whichever is typed.
              if (name !== 'areaHectares') void form.trigger(prices);
            }}
            onBlur={onBlur}
            ref={ref}
            unit={unit}
          />
        </Field>
      )}
    />
  );
}

type SaveStateProps = { form: MoneyFormApi; isValid: boolean; saving: MoneySaving };

/** Whether the numbers on the page are the saved ones, and the steps to make them so. */
function SaveState({ form, isValid, saving }: SaveStateProps) {
  const { t } = useTranslation('weigh-up');
  const { isDirty } = form.formState;
  if (saving.conflict) return <SaveConflict saving={saving} />;
  // Sticks to the foot of the panel, which may be taller than the screen: unsaved numbers must not go unseen.
  const foot =
    isDirty || !isValid
      ? 'sticky bottom-0 -mx-4 border-t border-rule bg-card px-4 py-3 sm:-mx-5 sm:px-5'
      : '';
  return (
    <div className={`flex flex-col gap-2 ${foot}`}>
      <p role="status" className="text-sm">
        {!isValid ? t('money.invalid') : isDirty ? t('money.unsaved') : ''}
      </p>
      {saving.errorText && (
        <p role="alert" className="text-sm font-semibold text-stop">
          {saving.errorText}
        </p>
      )}
      {isDirty && (
        <div className="flex flex-wrap gap-2">
          <Button type="submit" tone="main" isBusy={saving.isSaving}>
            {t('money.save')}
          </Button>
          <Button tone="quiet" onClick={saving.reset}>
            {t('money.reset')}
          </Button>
        </div>
      )}
    </div>
  );
}
