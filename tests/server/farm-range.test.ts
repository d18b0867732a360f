import { describe, expect, test } from 'vitest';
import type { CautionCode } from '#shared/caution.ts';
import { distanceKm, type FarmPlace } from '#server/weigh-up/farm-place.ts';
import { cautionFarm, measureFarmRange, type NamedSite } from '#server/weigh-up/farm-range.ts';

const site = (name: string, change: Partial<NamedSite>): NamedSite => ({
  name,
  latitude: 47,
  longitude: -38,
  seasonRainMm: 300,
  heatSumDegreeDays: 1500,
  soilTexture: 'loam',
  ...change,
});

/** Rain 260 to 340 mm, heat 1400 to 1600 °C·d, sandy loam to silt loam. */
const sites = [
  site('Ashby', { seasonRainMm: 260, heatSumDegreeDays: 1600, soilTexture: 'sandy-loam' }),
  site('Brook', { latitude: 47.3 }),
  site('Combe', { seasonRainMm: 340, heatSumDegreeDays: 1400, soilTexture: 'silt-loam', longitude: -37.6 }),
];

/** A farm in the midst of them. */
const farm = (change: Partial<FarmPlace> = {}): FarmPlace => ({
  latitude: 47.1,
  longitude: -38,
  seasonRainMm: 300,
  heatSumDegreeDays: 1500,
  soilTexture: 'loam',
  ...change,
});

const codes = (change: Partial<FarmPlace> = {}, among: readonly NamedSite[] = sites): CautionCode[] =>
  cautionFarm(farm(change), among).map(({ code }) => code);

const valuesOf = (code: CautionCode, change: Partial<FarmPlace>, among: readonly NamedSite[] = sites) =>
  cautionFarm(farm(change), among).find((one) => one.code === code)?.values;

describe('great-circle distance', () => {
  test('is a ninetieth of the quarter meridian for a degree of latitude', () => {
    // 6371.0088 km × π/2 / 90, closed form
    expect(distanceKm({ latitude: 46, longitude: -38 }, { latitude: 47, longitude: -38 })).toBeCloseTo(
      111.19508,
      5,
    );
  });

  test('shrinks with the cosine of the latitude along a parallel, nearly, and knows the date line', () => {
    const at = (longitude: number) => ({ latitude: 60, longitude });
    expect(distanceKm(at(0), at(1))).toBeCloseTo(111.19508 * 0.5, 2);
    expect(distanceKm(at(179.5), at(-179.5))).toBeCloseTo(distanceKm(at(0), at(1)), 9);
  });

  test('is half the circumference between antipodes', () => {
    expect(distanceKm({ latitude: 0, longitude: 0 }, { latitude: 0, longitude: 180 })).toBeCloseTo(
      Math.PI * 6371.0088,
      6,
    );
  });
});

test('a farm in the midst of the sites is told nothing', () => {
  expect(codes()).toEqual([]);
});

test('without sites there is nothing to hold it against', () => {
  expect(measureFarmRange(farm(), [])).toBeNull();
  expect(codes({}, [])).toEqual([]);
});

describe('place', () => {
  test('a farm over 100 km from every site is told how far', () => {
    // Straight south of Ashby: 1.5 degrees of latitude.
    expect(valuesOf('farm-far', { latitude: 45.5 })).toMatchObject({ site: 'Ashby', count: 3 });
    expect(valuesOf('farm-far', { latitude: 45.5 })?.distance).toBeCloseTo(166.79, 1);
  });

  test('a farm 89 km from the nearest is not', () => {
    expect(codes({ latitude: 46.2 })).not.toContain('farm-far');
  });
});

describe('rain', () => {
  test('is compared with the driest and the wettest site', () => {
    expect(valuesOf('farm-drier', { seasonRainMm: 200 })).toEqual({ difference: 60, count: 3 });
    expect(valuesOf('farm-wetter', { seasonRainMm: 380 })).toEqual({ difference: 40, count: 3 });
  });

  test('within the range, or a little outside, says nothing', () => {
    for (const seasonRainMm of [235, 260, 340, 365, null])
      expect(codes({ seasonRainMm }).filter((code) => /drier|wetter/.test(code))).toEqual([]);
  });
});

describe('heat', () => {
  test('is compared with the coolest and the warmest site', () => {
    expect(valuesOf('farm-cooler', { heatSumDegreeDays: 1300 })).toEqual({ difference: 100, count: 3 });
    expect(valuesOf('farm-warmer', { heatSumDegreeDays: 1700 })).toEqual({ difference: 100, count: 3 });
  });

  test('within the range, or a little outside, says nothing', () => {
    for (const heatSumDegreeDays of [1325, 1400, 1600, 1675, null])
      expect(codes({ heatSumDegreeDays }).filter((code) => /cooler|warmer/.test(code))).toEqual([]);
  });
});

describe('soil', () => {
  test('two steps from every site is told, with the side', () => {
    expect(valuesOf('farm-heavier-soil', { soilTexture: 'clay' })).toEqual({ count: 3 });
    const heavy = sites.map((one) => ({ ...one, soilTexture: 'clay' }));
    expect(codes({ soilTexture: 'loam' }, heavy)).toContain('farm-lighter-soil');
    const apart = [site('Dell', { soilTexture: 'sand' }), site('Eyre', { soilTexture: 'clay' })];
    expect(codes({ soilTexture: 'loam' }, apart)).toContain('farm-other-soil');
  });

  test('one step from a site, or unknown, says nothing', () => {
    for (const soilTexture of ['sand', 'sandy-loam', 'clay-loam', null] as const)
      expect(codes({ soilTexture }).filter((code) => /soil/.test(code))).toEqual([]);
  });
});

describe('likeness', () => {
  test('is the root mean square of the differences in standard deviations over what is known', () => {
    // Standard deviations of the three sites: rain 40, heat 100, soil 1 (steps 1, 2 and 3). The farm lies at Brook, so
    // Brook is at 0, and Ashby and Combe one standard deviation away in each.
    const range = measureFarmRange(farm(), sites);
    expect(range).toMatchObject({ sites: 3, similarSites: 3, nearestSite: 'Ashby' });
    expect(range?.standardisedDistance).toBeCloseTo(2 / 3, 12);
    // Rain alone: 80 mm from Brook is 2, from Combe 1, from Ashby 3.
    const wet = farm({ seasonRainMm: 380, heatSumDegreeDays: null, soilTexture: null });
    expect(measureFarmRange(wet, sites)).toMatchObject({ similarSites: 1, standardisedDistance: 2 });
  });

  test('a farm like fewer than one site in four is told so', () => {
    expect(valuesOf('farm-unlike-sites', { seasonRainMm: 420 })).toMatchObject({ similar: 0, count: 3 });
    expect(codes({ seasonRainMm: 320 })).not.toContain('farm-unlike-sites');
  });

  test('sites that are all alike still allow a usual difference, and nothing known gives no likeness', () => {
    const same = [site('Fold', {}), site('Glen', {})];
    expect(measureFarmRange(farm({ seasonRainMm: 330 }), same)?.similarSites).toBe(2);
    const unknown = farm({ seasonRainMm: null, heatSumDegreeDays: null, soilTexture: null });
    expect(measureFarmRange(unknown, sites)).toMatchObject({
      similarSites: null,
      standardisedDistance: null,
    });
    expect(cautionFarm(unknown, sites)).toEqual([]);
  });
});
