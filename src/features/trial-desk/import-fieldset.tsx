import { useWatch, type UseFormReturn } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { z } from 'zod';
import { importFields, type ImportFields } from '#shared/trial-desk.ts';
import { trialDesigns } from '#shared/trial.ts';
import type { Catalogue } from '#src/catalogue-query.ts';
import { Field } from '#src/components/field.tsx';
import { Select } from '#src/components/select.tsx';
import { TextInput } from '#src/components/text-input.tsx';
import { useTrialWords } from '#src/components/trial-words.ts';
import { useFormat } from '#src/components/use-format.ts';
import { useMe } from '#src/session.ts';
import { useFieldErrorText } from '#src/use-field-error-text.ts';

/** The contract's fields as a form holds them: a season is typed as text. */
export const importForm = importFields.extend({
  season: z
    .string()
    .transform((text): unknown => text)
    .pipe(importFields.shape.season),
});
export type ImportDraft = z.input<typeof importForm>;

type ImportFieldsetProps = {
  form: UseFormReturn<ImportDraft, unknown, ImportFields>;
  catalogue: Catalogue;
};

/** What the file itself does not say about its trial. */
export function ImportFieldset({ form, catalogue }: ImportFieldsetProps) {
  const { t } = useTranslation('desk');
  const format = useFormat();
  const words = useTrialWords();
  const fieldErrorText = useFieldErrorText();
  const { register, formState } = form;
  const { errors } = formState;
  const crop = useWatch({ control: form.control, name: 'crop' });
  const traits = catalogue.crops.find(({ slug }) => slug === crop)?.traits ?? [];
  const siteOptions = useSiteOptions(catalogue);
  const choose = t('importPage.choose');
  return (
    <fieldset className="grid gap-4 sm:grid-cols-2">
      <legend className="mb-3 text-lg font-bold">{t('importPage.about')}</legend>
      <Field label={t('importPage.crop')} error={fieldErrorText(errors.crop)} isRequired>
        <Select
          {...register('crop')}
          placeholder={choose}
          options={catalogue.crops.map(({ slug, name }) => ({ value: slug, label: format.name(name) }))}
        />
      </Field>
      <Field label={t('importPage.site')} error={fieldErrorText(errors.site)} isRequired>
        <Select {...register('site')} placeholder={choose} options={siteOptions} />
      </Field>
      <Field label={t('importPage.season')} error={fieldErrorText(errors.season)} isRequired>
        <TextInput inputMode="numeric" autoComplete="off" {...register('season')} />
      </Field>
      <Field label={t('importPage.design')} error={fieldErrorText(errors.design)} isRequired>
        <Select
          {...register('design')}
          placeholder={choose}
          options={trialDesigns.map((design) => ({ value: design, label: words.design(design) }))}
        />
      </Field>
      <Field
        label={t('importPage.name')}
        hint={t('importPage.nameHint')}
        error={fieldErrorText(errors.name)}
        isRequired
        className="sm:col-span-2"
      >
        <TextInput autoComplete="off" {...register('name')} />
      </Field>
      <Field
        label={t('importPage.trait')}
        hint={t('importPage.traitHint')}
        error={fieldErrorText(errors.trait)}
      >
        <Select
          {...register('trait')}
          options={
            traits.length > 0
              ? traits.map(({ slug, name }) => ({ value: slug, label: format.name(name) }))
              : [{ value: 'yield', label: choose }]
          }
        />
      </Field>
      <Field label={t('importPage.unit')} hint={t('importPage.unitHint')} error={fieldErrorText(errors.unit)}>
        <Select
          {...register('unit')}
          options={importFields.shape.unit
            .unwrap()
            .options.map((unit) => ({ value: unit, label: t(`importPage.units.${unit}`) }))}
        />
      </Field>
    </fieldset>
  );
}

/** Only sites of one's own regions: elsewhere the server refuses. */
function useSiteOptions({ sites, regions }: Catalogue) {
  const { t } = useTranslation('desk');
  const format = useFormat();
  const me = useMe();
  return sites
    .filter((site) => me.regionIds.includes(site.regionId))
    .map((site) => {
      const region = regions.find(({ id }) => id === site.regionId);
      const label = region
        ? t('importPage.siteOf', { site: site.name, region: format.name(region.name) })
        : site.name;
      return { value: site.slug, label };
    });
}
