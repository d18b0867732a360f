import { memo } from 'react';
import { useFieldArray, useWatch } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import type { Crop, Trait } from '#shared/catalogue.ts';
import type { CurrentLevel } from '#shared/money.ts';
import { Button } from '#src/components/button.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { ChoiceField, FigureField } from './money-fields.tsx';
import { listPaidTraits } from './money-form.ts';
import type { MoneyFormApi } from './use-money-form.ts';

type QualityFieldsProps = {
  form: MoneyFormApi;
  currency: string;
  currentName: string;
  crop: Pick<Crop, 'traits'>;
  /** What the current variety gives in the trials used. */
  levels: readonly CurrentLevel[];
};

/** No more rules than this can be kept. */
const mostRules = 12;

/** What buyers add to the price or take off it by the level of a trait, and where the current variety stands. */
export const QualityFields = memo(function QualityFields(props: QualityFieldsProps) {
  const { form, currency, currentName, crop, levels } = props;
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  const rules = useFieldArray({ control: form.control, name: 'qualityRules' });
  const typed = useWatch({ control: form.control, name: 'qualityRules' });
  const traits = listPaidTraits(crop);
  const [first] = traits;
  const unitOf = (slug: string) => traits.find((trait) => trait.slug === slug)?.unit ?? '';
  const paid = traits.filter(({ slug }) => typed.some((rule) => rule.traitSlug === slug));
  if (first === undefined) return <p className="text-sm">{t('money.quality.noTraits')}</p>;
  return (
    <>
      <p className="text-sm text-faded">{t('money.quality.lead')}</p>
      {rules.fields.map((field, i) => (
        <fieldset key={field.id} className="grid grid-cols-2 items-end gap-2 border-l-4 border-rule pl-3">
          <legend className="sr-only">{t('money.quality.rule', { number: i + 1 })}</legend>
          <ChoiceField
            form={form}
            name={`qualityRules.${i}.traitSlug`}
            label={t('money.quality.trait')}
            options={traits.map(({ slug, name }) => ({ value: slug, label: format.name(name) }))}
          />
          <ChoiceField
            form={form}
            name={`qualityRules.${i}.side`}
            label={t('money.quality.side')}
            options={(['at-least', 'under'] as const).map((value) => ({
              value,
              label: t(`money.quality.${value}`),
            }))}
          />
          <FigureField
            form={form}
            name={`qualityRules.${i}.limit`}
            label={t('money.quality.limit')}
            plain={unitOf(typed[i]?.traitSlug ?? '')}
          />
          <FigureField
            form={form}
            name={`qualityRules.${i}.perTonne`}
            label={t('money.quality.amount')}
            currency={currency}
            per="t"
          />
          <Button tone="quiet" className="col-span-2 justify-self-start" onClick={() => rules.remove(i)}>
            {t('money.quality.remove', { number: i + 1 })}
          </Button>
        </fieldset>
      ))}
      {rules.fields.length < mostRules && (
        <Button
          className="self-start"
          onClick={() =>
            rules.append({ traitSlug: first.slug, side: 'at-least', limit: null, perTonne: null })
          }
        >
          {t('money.quality.add')}
        </Button>
      )}
      {paid.map((trait) => (
        <FigureField
          key={trait.slug}
          form={form}
          name={`currentLevels.${trait.slug}`}
          label={t('money.quality.level', { trait: format.name(trait.name), name: currentName })}
          hint={sayLevel(trait)}
          plain={trait.unit}
        />
      ))}
    </>
  );

  /** What the trials say of a trait, which counts as long as nothing is typed. */
  function sayLevel({ slug, unit }: Trait): string {
    const level = levels.find(({ traitSlug }) => traitSlug === slug);
    if (level === undefined || level.spread === null) return t('money.quality.levelUnknown');
    return t('money.quality.levelHint', {
      mean: format.quantity(level.mean, unit, { decimals: 1 }),
      spread: format.quantity(level.spread, unit, { decimals: 1 }),
      count: level.trials,
    });
  }
});
