import { useTranslation } from 'react-i18next';
import type { BilingualName } from '#shared/catalogue.ts';
import { Field } from '#src/components/field.tsx';
import { Select } from '#src/components/select.tsx';
import { TextInput } from '#src/components/text-input.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useUrlPatch } from '#src/url-state.ts';
import type { FilterChoices, WeighUpFilter } from './weigh-up-filter.ts';

type WeighUpFiltersProps = { filter: WeighUpFilter; choices: FilterChoices };

/** Search and filters of the list, all kept in the address. */
export function WeighUpFilters({ filter, choices }: WeighUpFiltersProps) {
  const { t } = useTranslation(['record', 'weigh-up']);
  const format = useFormat();
  const patch = useUrlPatch();
  const named = (names: readonly BilingualName[]) =>
    names
      .map((name) => ({ value: name.en, label: format.name(name) }))
      .sort((a, b) => a.label.localeCompare(b.label));
  return (
    <form
      role="search"
      onSubmit={(event) => event.preventDefault()}
      className="mb-4 grid grid-cols-2 gap-4 sm:grid-cols-3 lg:grid-cols-6"
    >
      <Field label={t('weigh-up:list.search')} className="col-span-2 sm:col-span-3 lg:col-span-6 lg:max-w-md">
        <TextInput
          type="search"
          value={filter.search}
          onChange={(event) => patch({ q: event.target.value })}
        />
      </Field>
      <FilterField name="crop" value={filter.crop} options={named(choices.crops)} />
      <FilterField name="region" value={filter.region} options={named(choices.regions)} />
      <FilterField
        name="season"
        value={filter.season}
        options={choices.seasons.map((season) => ({ value: String(season), label: String(season) }))}
      />
      <FilterField
        name="decided"
        value={filter.decided === 'all' ? '' : filter.decided}
        options={[
          { value: 'yes', label: t('record:list.decidedYes') },
          { value: 'no', label: t('record:list.decidedNo') },
        ]}
      />
      <Field label={t('record:list.shown')}>
        <Select
          value={filter.shown}
          onChange={(event) => patch({ shown: event.target.value === 'archived' ? 'archived' : null })}
          options={[
            { value: 'open', label: t('record:list.current') },
            { value: 'archived', label: t('record:list.archived') },
          ]}
        />
      </Field>
    </form>
  );
}

type FilterFieldProps = {
  name: 'crop' | 'region' | 'season' | 'decided';
  value: string;
  options: { value: string; label: string }[];
};

function FilterField({ name, value, options }: FilterFieldProps) {
  const { t } = useTranslation('record');
  const patch = useUrlPatch();
  return (
    <Field label={t(`list.${name}`)}>
      <Select
        value={value}
        onChange={(event) => patch({ [name]: event.target.value })}
        placeholder={t('list.all')}
        options={options}
      />
    </Field>
  );
}
