import { Controller, useWatch, type Control } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { roles, type Role } from '#shared/account.ts';
import { languages, type Language } from '#shared/language.ts';
import type { Region } from '#shared/catalogue.ts';
import { Checkbox } from '#src/components/checkbox.tsx';
import { Field } from '#src/components/field.tsx';
import { Select } from '#src/components/select.tsx';
import { useFormat } from '#src/components/use-format.ts';

/** What an account may do, for whom, in which language. */
export type Rights = { role: Role; language: Language; regionIds: string[] };

type RightsFieldsProps = { control: Control<Rights>; regions: readonly Region[] };

/** Role, language and regions; shared by making an account and changing one. */
export function RightsFields({ control, regions }: RightsFieldsProps) {
  const { t } = useTranslation(['accounts', 'common']);
  const format = useFormat();
  const role = useWatch({ control, name: 'role' });
  const regionIds = useWatch({ control, name: 'regionIds' });
  return (
    <>
      <Field label={t('accounts:fields.role')} hint={t(`accounts:fields.roleHint.${role}`)}>
        <Controller
          control={control}
          name="role"
          render={({ field }) => (
            <Select
              {...field}
              options={roles.map((value) => ({ value, label: t(`common:role.${value}`) }))}
            />
          )}
        />
      </Field>
      <Field label={t('accounts:fields.language')}>
        <Controller
          control={control}
          name="language"
          render={({ field }) => (
            <Select
              {...field}
              options={languages.map((value) => ({ value, label: t(`common:languageName.${value}`) }))}
            />
          )}
        />
      </Field>
      <Controller
        control={control}
        name="regionIds"
        render={({ field: { value, onChange } }) => (
          <fieldset>
            <legend className="text-sm font-semibold">{t('accounts:fields.regions')}</legend>
            {regions.map((region) => (
              <Checkbox
                key={region.id}
                label={format.name(region.name)}
                checked={value.includes(region.id)}
                onChange={(event) =>
                  onChange(
                    event.target.checked ? [...value, region.id] : value.filter((id) => id !== region.id),
                  )
                }
              />
            ))}
            {role === 'agronomist' && regionIds.length === 0 && (
              <p className="text-sm text-faded">{t('accounts:fields.noRegion')}</p>
            )}
          </fieldset>
        )}
      />
    </>
  );
}
