import { soilTexture, type SoilTexture } from '#shared/farm.ts';
import type { Catalogue } from '#src/catalogue-query.ts';

/** Where a farm lies: a place of the catalogue, or a point with what was said of it. */
export type ChosenFarm = {
  latitude: number;
  longitude: number;
  seasonRainMm: number | null;
  heatSumDegreeDays: number | null;
  soilTexture: SoilTexture | null;
};

/** A town or trial site that may be named for a farm, with its normals. */
export type KnownPlace = ChosenFarm & { id: string; kind: 'site' | 'town'; name: string; regionId: string };

export function listKnownPlaces({ sites, places }: Catalogue): KnownPlace[] {
  const known = (kind: KnownPlace['kind'], place: Catalogue['places'][number]): KnownPlace => ({
    kind,
    id: place.id,
    name: place.name,
    regionId: place.regionId,
    latitude: place.latitude,
    longitude: place.longitude,
    seasonRainMm: place.seasonRainMm,
    heatSumDegreeDays: place.heatSumDegreeDays,
    soilTexture: soilTexture.nullable().catch(null).parse(place.soilTexture),
  });
  return [...places.map((town) => known('town', town)), ...sites.map((site) => known('site', site))].sort(
    (a, b) => a.name.localeCompare(b.name),
  );
}

/** The place of the catalogue that lies where the farm does. */
export function findKnownPlace(
  places: readonly KnownPlace[],
  farm: Pick<ChosenFarm, 'latitude' | 'longitude'> | null,
): KnownPlace | undefined {
  return places.find((place) => place.latitude === farm?.latitude && place.longitude === farm.longitude);
}

const separated = /^(-?\d+(?:[.,]\d+)?)\s*[;\s]\s*(-?\d+(?:[.,]\d+)?)$/;
/** With a comma between them, decimals need a point or the comma a space: `47,55` is one figure. */
const withComma = /^(-?\d+\.\d+)\s*,\s*(-?\d+\.\d+)$|^(-?\d+(?:\.\d+)?),\s+(-?\d+(?:\.\d+)?)$/;

/** Reads `47.55, -38.62`, `47,55 −38,62` or `47.55;-38.62`; null for anything else, or a point off the globe. */
export function parseCoordinates(text: string): { latitude: number; longitude: number } | null {
  const plain = text.trim().replaceAll('\u2212', '-');
  const found = separated.exec(plain) ?? withComma.exec(plain);
  const [first, second] = found?.slice(1).filter((part) => part !== undefined) ?? [];
  if (first === undefined || second === undefined) return null;
  const latitude = Number(first.replace(',', '.'));
  const longitude = Number(second.replace(',', '.'));
  return Math.abs(latitude) <= 90 && Math.abs(longitude) <= 180 ? { latitude, longitude } : null;
}

/** A point of which nothing but its coordinates is known. */
const barePoint = (point: { latitude: number; longitude: number }): ChosenFarm => ({
  ...point,
  seasonRainMm: null,
  heatSumDegreeDays: null,
  soilTexture: null,
});

/**
 * Finds what a person typed: a label of the list, a name that only one place has, or coordinates.
 * @returns null where it is none of them
 */
export function readTypedPlace(
  text: string,
  places: readonly KnownPlace[],
  labelOf: (place: KnownPlace) => string,
): ChosenFarm | null {
  const typed = text.trim().toLocaleLowerCase();
  const labelled = places.find((place) => labelOf(place).toLocaleLowerCase() === typed);
  if (labelled) return labelled;
  const named = places.filter(({ name }) => name.toLocaleLowerCase() === typed);
  if (named.length === 1 && named[0]) return named[0];
  const point = parseCoordinates(text);
  return point && (findKnownPlace(places, point) ?? barePoint(point));
}

/** The farm as the address holds it: the id of a known place, or `latitude,longitude`. */
export function writeFarmParameter(farm: ChosenFarm | null, places: readonly KnownPlace[]): string | null {
  if (farm === null) return null;
  return findKnownPlace(places, farm)?.id ?? `${farm.latitude},${farm.longitude}`;
}

export function readFarmParameter(value: string | null, places: readonly KnownPlace[]): ChosenFarm | null {
  if (value === null) return null;
  const known = places.find(({ id }) => id === value);
  if (known) return known;
  const point = parseCoordinates(value.replace(',', ' '));
  return point && barePoint(point);
}

/** What is chosen of the trials; the contract keeps it as two fields. */
export const trialChoices = ['region', 'neighbours', 'nearest'] as const;
export type ChosenTrials = (typeof trialChoices)[number];

export const toTrialFields = (chosen: ChosenTrials) => ({
  trialChoice: chosen === 'nearest' ? ('nearest' as const) : ('region' as const),
  includeNeighbours: chosen === 'neighbours',
});

export function readTrialFields(from: { trialChoice: string; includeNeighbours: boolean }): ChosenTrials {
  if (from.trialChoice === 'nearest') return 'nearest';
  return from.includeNeighbours ? 'neighbours' : 'region';
}
