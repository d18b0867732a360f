import { useTranslation } from 'react-i18next';
import { useSearchParams } from 'react-router-dom';
import type { TrialFilter } from '#shared/trial.ts';
import { Field } from '#src/components/field.tsx';
import { Select } from '#src/components/select.tsx';
import { useFormat } from '#src/components/use-format.ts';
import type { Catalogue } from '#src/catalogue-query.ts';
import { useUrlPatch } from '#src/url-state.ts';

/** The choice that the address holds; what it does not understand is left out. */
export function readTrialFilter(search: URLSearchParams): TrialFilter {
  const season = Number(search.get('season'));
  return {
    ...(search.get('crop') && { crop: search.get('crop') ?? undefined }),
    ...(search.get('region') && { region: search.get('region') ?? undefined }),
    ...(Number.isInteger(season) && season >= 1900 && season <= 2200 && { season }),
  };
}

/** Crop, region and season, kept in the address. */
export function TrialFilters({ catalogue }: { catalogue: Catalogue }) {
  const { t } = useTranslation('trials');
  const format = useFormat();
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const seasons = [...new Set(catalogue.crops.flatMap((crop) => crop.seasons))].sort((a, b) => b - a);
  return (
    <form
      role="search"
      aria-label={t('filters')}
      onSubmit={(event) => event.preventDefault()}
      className="mb-5 grid gap-3 sm:grid-cols-3"
    >
      <Field label={t('crop')}>
        <Select
          value={search.get('crop') ?? ''}
          onChange={(event) => patch({ crop: event.target.value })}
          placeholder={t('anyCrop')}
          options={catalogue.crops.map((crop) => ({ value: crop.slug, label: format.name(crop.name) }))}
        />
      </Field>
      <Field label={t('region')}>
        <Select
          value={search.get('region') ?? ''}
          onChange={(event) => patch({ region: event.target.value })}
          placeholder={t('anyRegion')}
          options={catalogue.regions.map((region) => ({
            value: region.slug,
            label: format.name(region.name),
          }))}
        />
      </Field>
      <Field label={t('season')}>
        <Select
          value={search.get('season') ?? ''}
          onChange={(event) => patch({ season: event.target.value })}
          placeholder={t('anySeason')}
          options={seasons.map((season) => ({ value: String(season), label: String(season) }))}
        />
      </Field>
    </form>
  );
}
