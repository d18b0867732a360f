import { memo } from 'react';
import { useFormState } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import type { Crop } from '#shared/catalogue.ts';
import { currencySign } from '#shared/format-number.ts';
import type { CurrentLevel, MoneyAssumptions } from '#shared/money.ts';
import type { WeighUp } from '#shared/weigh-up.ts';
import { useFormat } from '#src/components/use-format.ts';
import { useLanguage } from '#src/components/use-language.ts';
import { FieldGroup, FigureField } from './money-fields.tsx';
import { QualityFields } from './money-quality-fields.tsx';
import { SaveState } from './money-save-state.tsx';
import { SeedFields, type NamedVariety } from './money-seed-fields.tsx';
import { TonneFields } from './money-tonne-fields.tsx';
import type { ReckonedMoney } from './use-money-form.ts';
import type { MoneySaving } from './use-money-saving.ts';

type MoneyPanelProps = {
  weighUp: WeighUp;
  crop: Pick<Crop, 'traits'>;
  /** What the current variety gives in the trials used. */
  levels: readonly CurrentLevel[];
  /** The current variety first, then the candidates. */
  varieties: readonly NamedVariety[];
  money: ReckonedMoney;
  saving: MoneySaving;
};

/** Prices and costs; each edit is reckoned on the page at once and saved on demand. */
export function MoneyPanel({ weighUp, crop, levels, varieties, money, saving }: MoneyPanelProps) {
  const { form, assumptions } = money;
  return (
    <section aria-labelledby="money-title" className="rounded-lg border border-rule bg-card p-4 sm:p-5">
      <PanelHead sheetDate={weighUp.assumptions.priceSheetDate ?? null} />
      <form
        noValidate
        // A field that is gone to by key comes to stand above the foot that sticks over it.
        className="flex flex-col gap-4 [&_:is(input,select,summary)]:scroll-mb-56"
        onSubmit={(event) => void form.handleSubmit((typed) => saving.save(typed))(event)}
      >
        <MoneyFields
          {...{ form, crop, levels, varieties }}
          currency={assumptions.currency}
          seedCosts={assumptions.seedCosts}
        />
        <SaveState isDirty={money.isDirty} isValid={money.isValid} saving={saving} />
      </form>
    </section>
  );
}

const PanelHead = memo(function PanelHead({ sheetDate }: { sheetDate: string | null }) {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  return (
    <>
      <h2 id="money-title">{t('money.title')}</h2>
      <p className="text-sm text-faded">{t('money.lead')}</p>
      <p className="mb-4 text-sm text-faded">
        {sheetDate === null ? t('money.noSheet') : t('money.sheet', { date: format.date(sheetDate) })}
      </p>
    </>
  );
});

type FormPartProps = Pick<ReckonedMoney, 'form'> & { currency: string };

type MoneyFieldsProps = FormPartProps &
  Pick<MoneyPanelProps, 'crop' | 'levels' | 'varieties'> & {
    /** As last reckoned with: what follows from a seeding rate is said beside it. */
    seedCosts: MoneyAssumptions['seedCosts'];
  };

/** Every figure of the panel; each part is drawn anew for what stands in itself alone. */
const MoneyFields = memo(function MoneyFields(props: MoneyFieldsProps) {
  const { form, currency, crop, levels, varieties, seedCosts } = props;
  const { t } = useTranslation('weigh-up');
  return (
    <>
      <PriceFields form={form} currency={currency} />
      <FigureField form={form} name="areaHectares" label={t('money.area')} measure="ha" />
      <fieldset className="flex flex-col gap-3">
        <legend className="mb-1 text-sm font-semibold">{t('money.seeds')}</legend>
        {varieties.map((variety) => (
          <SeedFields
            key={variety.id}
            form={form}
            variety={variety}
            currency={currency}
            cost={seedCosts[variety.id]}
          />
        ))}
        <p className="text-sm text-faded">{t('money.unknownSeed')}</p>
      </fieldset>
      <FurtherGroups {...{ form, currency, crop, varieties, levels }} />
    </>
  );
});

/** Label over control, a column each; what is wrong has the whole width under the three. */
const column = 'contents! [&>label]:row-start-1 [&>span]:row-start-2 [&>[id$=-error]]:col-span-full';
const ofThree = {
  low: `${column} [&>[id$=-error]]:row-start-3`,
  middle: `${column} [&>[id$=-error]]:row-start-4`,
  high: `${column} [&>[id$=-error]]:row-start-5`,
};

const PriceFields = memo(function PriceFields({ form, currency }: FormPartProps) {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  const sign = currencySign(currency, useLanguage());
  const unit = { currency, per: 't', isUnitHidden: true } as const;
  return (
    <fieldset>
      <legend className="mb-1 text-sm font-semibold">
        {t('money.price', { unit: `${sign}/${format.unit('t')}` })}
      </legend>
      <div className="grid grid-cols-3 gap-x-2 gap-y-1">
        <FigureField form={form} name="priceLow" label={t('money.low')} className={ofThree.low} {...unit} />
        <FigureField
          form={form}
          name="priceMiddle"
          label={t('money.middle')}
          className={ofThree.middle}
          {...unit}
        />
        <FigureField
          form={form}
          name="priceHigh"
          label={t('money.high')}
          className={ofThree.high}
          {...unit}
        />
      </div>
    </fieldset>
  );
});

type FurtherGroupsProps = FormPartProps & Pick<MoneyPanelProps, 'crop' | 'levels' | 'varieties'>;

/** Parts of a variety's costs that a group holds: an error in one of them opens it. */
const groupParts = {
  seed: ['treatmentPerHectare', 'royaltyPerHectare'],
  tonne: ['harvestMoisturePercent'],
  hectare: ['harvestPerHectare', 'strawPerHectare'],
} as const;

/** What is seldom touched, in groups that are folded and named. */
const FurtherGroups = memo(function FurtherGroups(props: FurtherGroupsProps) {
  const { form, currency, crop, varieties, levels } = props;
  const { t } = useTranslation('weigh-up');
  const { errors } = useFormState({ control: form.control });
  const isWrong = (group: keyof typeof groupParts) =>
    varieties.some(({ id }) => groupParts[group].some((part) => errors.seedCosts?.[id]?.[part]));
  const tonneParts = ['haulagePerTonne', 'harvestPerTonne', 'dryingPerTonne'] as const;
  const moistureParts = ['dryingPerPoint', 'standardMoisturePercent'] as const;
  const figure = (id: string, part: (typeof groupParts)['seed' | 'hectare'][number], label: string) => (
    <FigureField
      key={part + id}
      form={form}
      name={`seedCosts.${id}.${part}`}
      label={label}
      currency={currency}
      per="ha"
    />
  );
  return (
    <div className="flex flex-col">
      <FieldGroup title={t('money.moreCosts')} hasError={isWrong('seed')}>
        <p className="text-sm text-faded">{t('money.royaltyHint')}</p>
        {varieties.map(({ id, name }) => (
          <div key={id} className="grid grid-cols-2 items-end gap-2">
            {figure(id, 'treatmentPerHectare', t('money.treatment', { name }))}
            {figure(id, 'royaltyPerHectare', t('money.royalty', { name }))}
          </div>
        ))}
      </FieldGroup>
      <FieldGroup
        title={t('money.tonneCosts')}
        hasError={isWrong('tonne') || [...tonneParts, ...moistureParts].some((part) => errors[part])}
      >
        <TonneFields form={form} currency={currency} varieties={varieties} />
      </FieldGroup>
      <FieldGroup
        title={t('money.quality.title')}
        hasError={errors.qualityRules !== undefined || errors.currentLevels !== undefined}
      >
        <QualityFields
          form={form}
          currency={currency}
          currentName={varieties[0]?.name ?? ''}
          crop={crop}
          levels={levels}
        />
      </FieldGroup>
      <FieldGroup title={t('money.hectareParts')} hasError={isWrong('hectare')}>
        <p className="text-sm text-faded">{t('money.hectareLead')}</p>
        {varieties.map(({ id, name }) => (
          <div key={id} className="grid grid-cols-2 items-end gap-2">
            {figure(id, 'strawPerHectare', t('money.straw', { name }))}
            {figure(id, 'harvestPerHectare', t('money.harvest', { name }))}
          </div>
        ))}
      </FieldGroup>
    </div>
  );
});
