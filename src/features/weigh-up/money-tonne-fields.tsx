import { memo } from 'react';
import { useTranslation } from 'react-i18next';
import { FigureField } from './money-fields.tsx';
import type { NamedVariety } from './money-seed-fields.tsx';
import type { MoneyFormApi } from './use-money-form.ts';

type TonneFieldsProps = { form: MoneyFormApi; currency: string; varieties: readonly NamedVariety[] };

/** What goes off the price of a tonne: haulage, harvest, drying whatever the moisture and by it. */
export const TonneFields = memo(function TonneFields({ form, currency, varieties }: TonneFieldsProps) {
  const { t } = useTranslation('weigh-up');
  return (
    <>
      <div className="grid grid-cols-2 items-end gap-2">
        <FigureField
          form={form}
          name="haulagePerTonne"
          label={t('money.haulage')}
          currency={currency}
          per="t"
        />
        <FigureField
          form={form}
          name="harvestPerTonne"
          label={t('money.harvestPerTonne')}
          currency={currency}
          per="t"
        />
        <FigureField
          form={form}
          name="dryingPerTonne"
          label={t('money.drying')}
          currency={currency}
          per="t"
        />
        <FigureField
          form={form}
          name="dryingPerPoint"
          label={t('money.dryingPerPoint')}
          currency={currency}
          per="t"
        />
      </div>
      <FigureField
        form={form}
        name="standardMoisturePercent"
        label={t('money.standardMoisture')}
        hint={t('money.standardMoistureHint')}
        plain="%"
      />
      <p className="text-sm text-faded">{t('money.moistureLead')}</p>
      <div className="grid grid-cols-2 items-end gap-2">
        {varieties.map(({ id, name }) => (
          <FigureField
            key={id}
            form={form}
            name={`seedCosts.${id}.harvestMoisturePercent`}
            label={t('money.moisture', { name })}
            plain="%"
          />
        ))}
      </div>
    </>
  );
});
