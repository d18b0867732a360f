import { describe, expect, it } from 'vitest';
import type { Catalogue } from '#src/catalogue-query.ts';
import {
  listKnownPlaces,
  parseCoordinates,
  readFarmParameter,
  readTypedPlace,
  writeFarmParameter,
} from '#src/features/weigh-up/chosen-farm.ts';
import { readQuestion, toCandidateQuestion } from '#src/features/weigh-up/question-draft.ts';
import { idOf } from '#tests/client/support/weigh-up-factory.ts';

const ground = {
  latitude: 47.55,
  longitude: -38.62,
  seasonRainMm: 322,
  heatSumDegreeDays: 1375,
  soilTexture: 'loam',
};

const catalogue: Catalogue = {
  regions: [
    {
      id: idOf(70),
      slug: 'coast',
      name: { en: 'Coast', fr: 'Côte' },
      publishedTrials: {},
    },
  ],
  sites: [
    {
      ...ground,
      id: idOf(1),
      slug: 'haverlin',
      name: 'Haverlin',
      regionId: idOf(70),
      elevationM: 500,
      soilPh: 6,
    },
  ],
  places: [
    { ...ground, id: idOf(2), name: 'Penhollow', regionId: idOf(70), latitude: 47.1 },
    { ...ground, id: idOf(3), name: 'Haverlin', regionId: idOf(71), latitude: 46.1 },
  ],
  crops: [
    {
      id: idOf(80),
      slug: 'oats',
      name: { en: 'Oats', fr: 'Avoine' },
      eppoCode: 'AVESA',
      standardMoisturePercent: 13.5,
      bushelWeightLb: 34,
      cvLimitPercent: 15,
      traits: [],
      varieties: [{ id: idOf(5), name: 'Brindle', aliases: [], isCheck: true, firstSeason: null }],
      seasons: [2026, 2025],
    },
  ],
};
const places = listKnownPlaces(catalogue);
const labelOf = ({ kind, name }: { kind: string; name: string }) => `${name} (${kind})`;

describe('coordinates', () => {
  it.each([
    ['47.55, -38.62', 47.55, -38.62],
    ['47.55,-38.62', 47.55, -38.62],
    ['47.55 \u221238.62', 47.55, -38.62],
    ['47,55 -38,62', 47.55, -38.62],
    ['47,55; -38,62', 47.55, -38.62],
    ['47, -38', 47, -38],
  ])('are read from %s', (text, latitude, longitude) => {
    expect(parseCoordinates(text)).toEqual({ latitude, longitude });
  });

  it.each(['47,55', '47.55', 'Penhollow', '91, 0', '0, 181', '', '47.55, -38.62, 3'])(
    'are not made of %s',
    (text) => {
      expect(parseCoordinates(text)).toBeNull();
    },
  );
});

describe('a typed place', () => {
  const read = (text: string) => readTypedPlace(text, places, labelOf);

  it('is found by its label or by a name that it alone has', () => {
    expect(read('haverlin (SITE)')).toMatchObject({ latitude: 47.55, soilTexture: 'loam' });
    expect(read(' penhollow ')).toMatchObject({ latitude: 47.1, seasonRainMm: 322 });
    expect(read('Haverlin')).toBeNull();
    expect(read('Nowhere')).toBeNull();
  });

  it('is a bare point by its coordinates, unless a known place lies there', () => {
    expect(read('47.9, -38')).toEqual({
      latitude: 47.9,
      longitude: -38,
      seasonRainMm: null,
      heatSumDegreeDays: null,
      soilTexture: null,
    });
    expect(read('47.1, -38.62')).toMatchObject({ name: 'Penhollow' });
  });

  it('comes back from the address as it went in', () => {
    for (const text of ['Penhollow', '47.9, -38']) {
      const farm = read(text);
      expect(readFarmParameter(writeFarmParameter(farm, places), places)).toEqual(farm);
    }
    expect(readFarmParameter('nonsense', places)).toBeNull();
    expect(writeFarmParameter(null, places)).toBeNull();
  });
});

describe('the question in the address', () => {
  const read = (more: string) =>
    readQuestion(new URLSearchParams(`crop=oats&region=coast&current=${idOf(5)}${more}`), catalogue);

  it('asks a region without trials only where others may answer', () => {
    expect(toCandidateQuestion(read(''))).toBeNull();
    expect(toCandidateQuestion(read('&trials=neighbours'))).toMatchObject({
      trialChoice: 'region',
      includeNeighbours: true,
      farmLatitude: undefined,
    });
  });

  it('asks the nearest sites only of a farm that has a place', () => {
    expect(read('&trials=nearest').trials).toBe('region');
    expect(toCandidateQuestion(read(`&trials=nearest&farm=${idOf(2)}`))).toMatchObject({
      trialChoice: 'nearest',
      includeNeighbours: false,
      farmLatitude: 47.1,
      farmSeasonRainMm: 322,
      farmSoilTexture: 'loam',
    });
  });
});
