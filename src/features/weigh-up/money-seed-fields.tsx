import { memo } from 'react';
import { useWatch } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { currencySign } from '#shared/format-number.ts';
import { seedBasis, type SeedBasis, type SeedCost } from '#shared/money.ts';
import { budgetSeed, findSeedingRate } from '#shared/seed-budget.ts';
import { useFormat } from '#src/components/use-format.ts';
import { useLanguage } from '#src/components/use-language.ts';
import { ChoiceField, FigureField } from './money-fields.tsx';
import type { MoneyFormApi } from './use-money-form.ts';

export type NamedVariety = { id: string; name: string };

type SeedFieldsProps = {
  form: MoneyFormApi;
  variety: NamedVariety;
  currency: string;
  /** The last numbers that fitted: what follows from them is said beside the fields. */
  cost: SeedCost | undefined;
};

/** What the seed of one variety costs, on the basis that its owner knows it by. */
export const SeedFields = memo(function SeedFields({ form, variety, currency, cost }: SeedFieldsProps) {
  const { id, name } = variety;
  const { t } = useTranslation('weigh-up');
  const sign = currencySign(currency, useLanguage());
  const basis = useWatch({ control: form.control, name: `seedCosts.${id}.basis` });
  const at = `seedCosts.${id}` as const;
  return (
    <fieldset className="flex flex-col gap-2 border-l-4 border-rule pl-3">
      <legend className="sr-only">{name}</legend>
      <div className="grid grid-cols-[minmax(0,5fr)_minmax(0,6fr)] items-end gap-2">
        {basis === 'flat' && (
          <FigureField
            form={form}
            name={`${at}.seedPerHectare`}
            label={t('money.seed', { name })}
            currency={currency}
            per="ha"
          />
        )}
        {basis === 'rate' && (
          <FigureField
            form={form}
            name={`${at}.seedPricePerKg`}
            label={t('money.seed', { name })}
            plain={`${sign}/kg`}
          />
        )}
        {basis === 'saved' && (
          <FigureField
            form={form}
            name={`${at}.cleaningPerTonne`}
            label={t('money.cleaning', { name })}
            currency={currency}
            per="t"
          />
        )}
        <ChoiceField
          form={form}
          name={`${at}.basis`}
          label={t('money.basisOf', { name })}
          options={seedBasis.options.map((value) => ({ value, label: t(`money.basis.${value}`) }))}
        />
      </div>
      {basis !== 'flat' && <RateFields form={form} id={id} name={name} />}
      {basis !== 'flat' && <SeedOutcome basis={basis} name={name} currency={currency} cost={cost} />}
    </fieldset>
  );
});

/** What the kg/ha follow from. */
function RateFields({ form, id, name }: { form: MoneyFormApi; id: string; name: string }) {
  const { t } = useTranslation('weigh-up');
  const at = `seedCosts.${id}` as const;
  return (
    <div className="grid grid-cols-2 items-end gap-2">
      <FigureField
        form={form}
        name={`${at}.targetPlantsM2`}
        label={t('money.plants', { name })}
        plain={t('money.plantsUnit')}
      />
      <FigureField
        form={form}
        name={`${at}.thousandKernelWeightG`}
        label={t('money.kernelWeight', { name })}
        plain="g"
      />
      <FigureField
        form={form}
        name={`${at}.germinationPercent`}
        label={t('money.germination', { name })}
        plain="%"
      />
      <FigureField
        form={form}
        name={`${at}.mortalityPercent`}
        label={t('money.mortality', { name })}
        plain="%"
      />
    </div>
  );
}

type SeedOutcomeProps = { basis: SeedBasis; name: string; currency: string; cost: SeedCost | undefined };

/** The kg/ha that follow and what they cost, or what is missing for them. */
function SeedOutcome({ basis, name, currency, cost }: SeedOutcomeProps) {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  const rate = cost === undefined ? null : findSeedingRate(cost);
  const budget = budgetSeed(cost);
  if (rate === null || budget === null || cost?.basis !== basis) {
    return <p className="text-sm">{t('money.rateOpen', { name })}</p>;
  }
  const kg = format.quantity(rate, 'kg/ha');
  const amount = format.moneyPer(budget.seed, currency, 'ha', { decimals: 2 });
  return (
    <p role="status" className="text-sm">
      {t(basis === 'saved' ? 'money.savedFollows' : 'money.rateFollows', { kg, amount })}
    </p>
  );
}
