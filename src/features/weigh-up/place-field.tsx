import { useId, useMemo, useState, type Ref } from 'react';
import { useTranslation } from 'react-i18next';
import { formatNumber } from '#shared/format-number.ts';
import { findRegion, type Catalogue } from '#src/catalogue-query.ts';
import { Field } from '#src/components/field.tsx';
import { TextInput } from '#src/components/text-input.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useLanguage } from '#src/components/use-language.ts';
import {
  findKnownPlace,
  listKnownPlaces,
  readTypedPlace,
  type ChosenFarm,
  type KnownPlace,
} from './chosen-farm.ts';

type PlaceFieldProps = {
  catalogue: Catalogue;
  value: ChosenFarm | null;
  onChange: (farm: ChosenFarm | null) => void;
  ref?: Ref<HTMLInputElement>;
};

/** Most decimals of a degree that a farm is written with: about ten metres. */
const mostDecimals = 4;

/** Where the farm lies: found by name among towns and trial sites, or typed as coordinates. */
export function PlaceField({ catalogue, value, onChange, ref }: PlaceFieldProps) {
  const { t } = useTranslation('weigh-up');
  const listId = useId();
  const places = useMemo(() => listKnownPlaces(catalogue), [catalogue]);
  const labelOf = usePlaceLabel(catalogue);
  const writePoint = usePointWriter();
  // What is typed stays as typed until the field is left; what no place answers to stays for correction.
  const [typed, setTyped] = useState<string | null>(null);
  const [isUnknown, setUnknown] = useState(false);
  const known = findKnownPlace(places, value);
  const written = known ? labelOf(known) : value ? writePoint(value) : '';
  const settle = (text: string) => {
    const found = text.trim() === '' ? null : readTypedPlace(text, places, labelOf);
    const isLost = text.trim() !== '' && found === null;
    setUnknown(isLost);
    if (isLost) return;
    setTyped(null);
    if (found?.latitude !== value?.latitude || found?.longitude !== value?.longitude) onChange(found);
  };
  return (
    <Field
      label={t('farm.place')}
      hint={t('farm.placeHint')}
      error={isUnknown ? t('farm.placeUnknown') : undefined}
    >
      <TextInput
        list={listId}
        autoComplete="off"
        ref={ref}
        value={typed ?? written}
        onChange={(event) => {
          const text = event.target.value;
          setTyped(text);
          setUnknown(false);
          // Picked from the list: no need to leave the field first.
          if (places.some((place) => labelOf(place) === text)) settle(text);
        }}
        onBlur={(event) => settle(event.target.value)}
        onKeyDown={(event) => {
          if (event.key === 'Enter') settle(event.currentTarget.value);
        }}
      />
      <datalist id={listId}>
        {places.map((place) => (
          <option key={place.id} value={labelOf(place)} />
        ))}
      </datalist>
    </Field>
  );
}

function usePlaceLabel(catalogue: Catalogue): (place: KnownPlace) => string {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  return ({ kind, name, regionId }) => {
    const region = findRegion(catalogue, regionId);
    return t(`farm.${kind}`, { name, region: region ? format.name(region.name) : '' });
  };
}

/** Coordinates as the language writes figures, and as the field reads them back. */
function usePointWriter(): (farm: ChosenFarm) => string {
  const language = useLanguage();
  const write = (degrees: number) => {
    const places = (degrees.toString().split('.')[1] ?? '').length;
    return formatNumber(degrees, language, { decimals: Math.min(places, mostDecimals) });
  };
  return ({ latitude, longitude }) =>
    `${write(latitude)}${language === 'fr' ? ' ' : ', '}${write(longitude)}`;
}
