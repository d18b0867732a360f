import { useTranslation } from 'react-i18next';
import { useSearchParams } from 'react-router-dom';
import { trialState } from '#shared/trial.ts';
import { Field } from '#src/components/field.tsx';
import { Select } from '#src/components/select.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useTrialWords } from '#src/components/trial-words.ts';
import type { Catalogue } from '#src/catalogue-query.ts';
import { useUrlPatch } from '#src/url-state.ts';
import { useMe } from '#src/session.ts';
import type { DeskFilter } from './desk-queries.ts';

/** The choice that the address holds; what it does not understand is left out. */
export function readDeskFilter(search: URLSearchParams): DeskFilter {
  const season = Number(search.get('season'));
  const state = trialState.safeParse(search.get('state'));
  const crop = search.get('crop');
  const region = search.get('region');
  return {
    ...(crop && { crop }),
    ...(region && { region }),
    ...(Number.isInteger(season) && season >= 1900 && season <= 2200 && { season }),
    ...(state.success && { state: state.data }),
  };
}

/** State, crop, region and season, kept in the address; only one's own regions are offered. */
export function DeskFilters({ catalogue }: { catalogue: Catalogue }) {
  const { t } = useTranslation(['desk', 'trials']);
  const format = useFormat();
  const words = useTrialWords();
  const me = useMe();
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const seasons = [...new Set(catalogue.crops.flatMap((crop) => crop.seasons))].sort((a, b) => b - a);
  const regions = catalogue.regions.filter((region) => me.regionIds.includes(region.id));
  const choice = (name: 'state' | 'crop' | 'region' | 'season') => ({
    value: search.get(name) ?? '',
    onChange: (event: { target: { value: string } }) => patch({ [name]: event.target.value }),
  });
  return (
    <form
      role="search"
      aria-label={t('desk:filters')}
      onSubmit={(event) => event.preventDefault()}
      className="mb-5 grid gap-3 sm:grid-cols-4"
    >
      <Field label={t('desk:state')}>
        <Select
          {...choice('state')}
          placeholder={t('desk:anyState')}
          options={trialState.options.map((state) => ({ value: state, label: words.state(state) }))}
        />
      </Field>
      <Field label={t('trials:crop')}>
        <Select
          {...choice('crop')}
          placeholder={t('trials:anyCrop')}
          options={catalogue.crops.map(({ slug, name }) => ({ value: slug, label: format.name(name) }))}
        />
      </Field>
      <Field label={t('trials:region')}>
        <Select
          {...choice('region')}
          placeholder={t('trials:anyRegion')}
          options={regions.map(({ slug, name }) => ({ value: slug, label: format.name(name) }))}
        />
      </Field>
      <Field label={t('trials:season')}>
        <Select
          {...choice('season')}
          placeholder={t('trials:anySeason')}
          options={seasons.map((season) => ({ value: String(season), label: String(season) }))}
        />
      </Field>
    </form>
  );
}
