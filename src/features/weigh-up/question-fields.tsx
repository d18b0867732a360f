import { useTranslation } from 'react-i18next';
import type { Crop } from '#shared/catalogue.ts';
import { Field } from '#src/components/field.tsx';
import { Select, type SelectOption } from '#src/components/select.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useLanguage } from '#src/components/use-language.ts';
import type { Catalogue } from '#src/catalogue-query.ts';
import { useMe } from '#src/session.ts';
import { useFieldErrorText } from '#src/use-field-error-text.ts';
import { useUrlPatch } from '#src/url-state.ts';
import { listKnownPlaces, writeFarmParameter } from './chosen-farm.ts';
import { PlaceField } from './place-field.tsx';
import { QuestionChoice } from './question-choice.tsx';
import type { QuestionDraft } from './question-draft.ts';
import { TrialChoiceField } from './trial-choice-field.tsx';

type QuestionFieldsProps = { draft: QuestionDraft; catalogue: Catalogue };

/** Crop, region, seasons, current variety, the farm's place, the trials that answer and what is asked of them: kept in the address, so that a question can be reloaded and sent. */
export function QuestionFields({ draft, catalogue }: QuestionFieldsProps) {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  const patch = useUrlPatch();
  const { crop, region } = draft;
  const me = useMe();
  // Elsewhere the server refuses; a region that the address names all the same stays in view with its refusal.
  const regions = catalogue.regions.filter(({ id }) => me.regionIds.includes(id) || id === region?.id);
  const language = useLanguage();
  // The catalogue has the order of one language; a reader looks by the letters of the own.
  const inOrder = (options: SelectOption[]) =>
    options.sort((a, b) => a.label.localeCompare(b.label, language));
  const regionLabel = (name: string, count: number) =>
    crop === undefined
      ? name
      : count === 0
        ? t('new.regionWithout', { region: name })
        : t('new.regionTrials', { region: name, count });
  return (
    <div className="grid gap-4 sm:grid-cols-2">
      <Field label={t('new.crop')} isRequired>
        <Select
          value={crop?.slug ?? ''}
          onChange={(event) =>
            patch({ crop: event.target.value, current: null, candidates: null, from: null, to: null })
          }
          placeholder={t('new.chooseCrop')}
          options={inOrder(
            catalogue.crops.map(({ slug, name }) => ({ value: slug, label: format.name(name) })),
          )}
        />
      </Field>
      <Field label={t('new.region')} isRequired>
        <Select
          value={region?.slug ?? ''}
          onChange={(event) => patch({ region: event.target.value, candidates: null })}
          placeholder={t('new.chooseRegion')}
          options={inOrder(
            regions.map(({ slug, name, publishedTrials }) => ({
              value: slug,
              label: regionLabel(format.name(name), publishedTrials[crop?.slug ?? ''] ?? 0),
            })),
          )}
        />
      </Field>
      {crop && <SeasonFields draft={draft} crop={crop} />}
      {crop && <CurrentVarietyField draft={draft} crop={crop} />}
      {crop && <FarmAndTrialsFields draft={draft} catalogue={catalogue} />}
      <div className="sm:col-span-2">
        <QuestionChoice
          value={draft.kind}
          onChange={(kind) => patch({ question: kind === 'several' ? null : kind })}
        />
      </div>
    </div>
  );
}

/** Where the farm lies, and whether trials beyond the region may answer. */
function FarmAndTrialsFields({ draft, catalogue }: QuestionFieldsProps) {
  const patch = useUrlPatch();
  return (
    <>
      <PlaceField
        catalogue={catalogue}
        value={draft.farm}
        onChange={(farm) => patch({ farm: writeFarmParameter(farm, listKnownPlaces(catalogue)) })}
      />
      <TrialChoiceField
        value={draft.trials}
        onChange={(chosen) => patch({ trials: chosen === 'region' ? null : chosen })}
        hasPlace={draft.farm !== null}
      />
    </>
  );
}

type CropFieldProps = { draft: QuestionDraft; crop: Crop };

function SeasonFields({ draft: { seasonFrom, seasonTo }, crop }: CropFieldProps) {
  const { t } = useTranslation('weigh-up');
  const fieldErrorText = useFieldErrorText();
  const patch = useUrlPatch();
  const options = crop.seasons.map((season) => ({ value: String(season), label: String(season) }));
  const isTurned = seasonFrom > seasonTo;
  return (
    <div className="grid grid-cols-2 gap-3">
      <Field label={t('new.seasonFrom')}>
        <Select
          value={String(seasonFrom)}
          onChange={(event) => patch({ from: event.target.value })}
          options={options}
        />
      </Field>
      <Field
        label={t('new.seasonTo')}
        error={isTurned ? fieldErrorText({ type: 'custom', message: 'season-order' }) : undefined}
      >
        <Select
          value={String(seasonTo)}
          onChange={(event) => patch({ to: event.target.value })}
          options={options}
        />
      </Field>
    </div>
  );
}

/** Checks first: they stand in most trials, so gaps from them are the surest. */
function CurrentVarietyField({ draft, crop }: CropFieldProps) {
  const { t } = useTranslation('weigh-up');
  const language = useLanguage();
  const patch = useUrlPatch();
  const varieties = [...crop.varieties].sort(
    (a, b) => Number(b.isCheck) - Number(a.isCheck) || a.name.localeCompare(b.name, language),
  );
  return (
    <Field label={t('new.current')} hint={t('new.currentHint')} isRequired>
      <Select
        value={draft.currentVarietyId}
        onChange={(event) => patch({ current: event.target.value })}
        placeholder={t('new.chooseCurrent')}
        options={varieties.map(({ id, name, isCheck }) => ({
          value: id,
          label: isCheck ? t('new.check', { name }) : name,
        }))}
      />
    </Field>
  );
}
