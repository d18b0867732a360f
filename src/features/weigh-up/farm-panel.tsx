import { useEffect } from 'react';
import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { Controller, useForm, useWatch, type UseFormReturn } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { soilTextures } from '#shared/farm.ts';
import { changeWeighUp, type WeighUp } from '#shared/weigh-up.ts';
import { callApi } from '#src/api-client.ts';
import { catalogueQuery } from '#src/catalogue-query.ts';
import { Button } from '#src/components/button.tsx';
import { Field } from '#src/components/field.tsx';
import { FoldedSection } from '#src/components/folded-section.tsx';
import { MeasureInput } from '#src/components/measure-input.tsx';
import { Select } from '#src/components/select.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { fieldIssues } from '#src/field-issues.ts';
import { useFieldErrorText } from '#src/use-field-error-text.ts';
import type { ChosenFarm } from './chosen-farm.ts';
import { farmForm, toFarmDraft, toInputWithFarm, type FarmDraft, type FarmForm } from './farm-form.ts';
import { PanelFailure } from './panel-failure.tsx';
import { PlaceField } from './place-field.tsx';
import { TrialChoiceField } from './trial-choice-field.tsx';
import { useSavingBase, type SavingBase } from './use-saving-base.ts';
import { weighUpQuery } from './weigh-up-queries.ts';

type FarmFormApi = UseFormReturn<FarmDraft, unknown, FarmForm>;

type FarmPanelProps = {
  weighUp: WeighUp;
  /** Numbers of the money panel that are not saved: a save from here would be met as somebody else's. */
  hasUnsaved: boolean;
};

/** Where the farm lies, what it usually yields and which trials answer: changed here, the question is weighed again. */
export function FarmPanel({ weighUp, hasUnsaved }: FarmPanelProps) {
  const { t } = useTranslation('weigh-up');
  const form = useForm<FarmDraft, unknown, FarmForm>({
    resolver: zodResolver(farmForm, fieldIssues),
    defaultValues: toFarmDraft(weighUp),
  });
  const saved = useSavingBase(weighUp, form.formState.isDirty, toFarmDraft);
  const { base } = saved;
  // Saved elsewhere meanwhile, with its prices say: what is not touched here follows.
  useEffect(() => form.reset(toFarmDraft(base), { keepDirtyValues: true }), [form, base]);
  const saving = useFarmSaving(saved, form);
  return (
    <FoldedSection id="farm" title={t('farm.title')}>
      <p className="text-faded">{t('farm.lead')}</p>
      <form
        noValidate
        className="flex flex-col gap-4"
        onSubmit={(event) => void form.handleSubmit((typed) => saving.mutate(typed))(event)}
      >
        <PlaceAndTrials form={form} />
        <FigureField form={form} name="usualYield" label={t('farm.usualYield')} unit="t/ha">
          {t('farm.usualYieldHint')}
        </FigureField>
        <GroundFields form={form} />
        <PanelFailure error={saving.error} />
        {hasUnsaved && <p className="text-sm text-faded">{t('farm.saveFirst')}</p>}
        <Button type="submit" disabled={hasUnsaved} isBusy={saving.isPending} className="self-start">
          {saving.isPending ? t('farm.saving') : t('farm.save')}
        </Button>
      </form>
    </FoldedSection>
  );
}

function useFarmSaving({ base, followConflict }: SavingBase, form: FarmFormApi) {
  const { t } = useTranslation('weigh-up');
  const client = useQueryClient();
  return useMutation({
    mutationFn: (typed: FarmForm) =>
      callApi(changeWeighUp, {
        params: { weighUpId: base.id },
        body: { revision: base.revision, weighUp: toInputWithFarm(base, typed) },
      }),
    onSuccess: (saved) => {
      form.reset(toFarmDraft(saved.weighUp));
      client.setQueryData(weighUpQuery(base.id).queryKey, saved);
      showToast(t('farm.saved'));
    },
    onError: followConflict,
  });
}

function PlaceAndTrials({ form }: { form: FarmFormApi }) {
  const catalogue = useQuery(catalogueQuery);
  const [latitude, longitude] = useWatch({ control: form.control, name: ['latitude', 'longitude'] });
  const ground = useWatch({
    control: form.control,
    name: ['seasonRainMm', 'heatSumDegreeDays', 'soilTexture'],
  });
  const farm: ChosenFarm | null =
    latitude === null || longitude === null
      ? null
      : {
          latitude,
          longitude,
          seasonRainMm: ground[0],
          heatSumDegreeDays: ground[1],
          soilTexture: ground[2],
        };
  const place = (chosen: ChosenFarm | null) => {
    const asTyped = { shouldDirty: true };
    form.setValue('latitude', chosen?.latitude ?? null, asTyped);
    form.setValue('longitude', chosen?.longitude ?? null, asTyped);
    form.setValue('seasonRainMm', chosen?.seasonRainMm ?? null, asTyped);
    form.setValue('heatSumDegreeDays', chosen?.heatSumDegreeDays ?? null, asTyped);
    form.setValue('soilTexture', chosen?.soilTexture ?? null, asTyped);
    if (chosen === null && form.getValues('trials') === 'nearest') form.setValue('trials', 'region', asTyped);
  };
  return (
    <div className="grid gap-4 sm:grid-cols-2">
      {catalogue.data && <PlaceField catalogue={catalogue.data} value={farm} onChange={place} />}
      <Controller
        control={form.control}
        name="trials"
        render={({ field: { value, onChange } }) => (
          <TrialChoiceField value={value} onChange={onChange} hasPlace={farm !== null} />
        )}
      />
    </div>
  );
}

/** Rain, heat and soil: what the farm is held against the sites by. */
function GroundFields({ form }: { form: FarmFormApi }) {
  const { t } = useTranslation('weigh-up');
  return (
    <fieldset>
      <legend className="text-sm font-semibold">{t('farm.ground')}</legend>
      <p className="mb-2 text-sm text-faded">{t('farm.groundHint')}</p>
      <div className="grid gap-4 sm:grid-cols-3">
        <FigureField form={form} name="seasonRainMm" label={t('farm.rain')} unit="mm" />
        <FigureField form={form} name="heatSumDegreeDays" label={t('farm.heat')} unit={t('farm.heatUnit')} />
        <Controller
          control={form.control}
          name="soilTexture"
          render={({ field: { value, onChange, onBlur, ref } }) => (
            <Field label={t('farm.soil')}>
              <Select
                value={value ?? ''}
                onChange={(event) => onChange(event.target.value === '' ? null : event.target.value)}
                onBlur={onBlur}
                ref={ref}
                placeholder={t('farm.soilUnknown')}
                options={soilTextures.map((texture) => ({
                  value: texture,
                  label: t(`farm.texture.${texture}`),
                }))}
              />
            </Field>
          )}
        />
      </div>
    </fieldset>
  );
}

type FigureFieldProps = {
  form: FarmFormApi;
  name: 'seasonRainMm' | 'heatSumDegreeDays' | 'usualYield';
  label: string;
  unit: string;
  /** The hint. */
  children?: string;
};

function FigureField({ form, name, label, unit, children }: FigureFieldProps) {
  const fieldErrorText = useFieldErrorText();
  return (
    <Controller
      control={form.control}
      name={name}
      render={({ field: { value, onChange, onBlur, ref }, fieldState: { error } }) => (
        <Field label={label} hint={children} error={fieldErrorText(error)}>
          <MeasureInput value={value} onValueChange={onChange} onBlur={onBlur} ref={ref} unit={unit} />
        </Field>
      )}
    />
  );
}
