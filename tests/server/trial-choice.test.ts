import { describe, expect, test } from 'vitest';
import { chooseTrials, findNeighbours, type EvidenceScope } from '#server/weigh-up/trial-choice.ts';

const scope = (change: Partial<EvidenceScope> = {}): EvidenceScope => ({
  cropId: 'barley',
  regionId: 'north',
  seasonFrom: 2020,
  seasonTo: 2025,
  ...change,
});

const at = (latitude: number) => ({ latitude, longitude: 0 });
/** One site a region, a degree of latitude (111 km) or less apart. */
const geography = {
  sites: [
    { regionId: 'north', ...at(50) },
    { regionId: 'middle', ...at(49.2) },
    { regionId: 'south', ...at(48) },
  ],
  towns: [
    { regionId: 'coast', ...at(47.5) },
    { regionId: 'moor', ...at(60) },
  ],
};

const trial = (siteId: string, regionId: string, latitude: number) => ({
  siteId,
  regionId,
  place: at(latitude),
});
const trials = [
  trial('n1', 'north', 50),
  trial('m1', 'middle', 49.2),
  trial('n1', 'north', 50),
  trial('s1', 'south', 48),
];

const sitesOf = (chosen: readonly { siteId: string }[]) => chosen.map(({ siteId }) => siteId);

describe('neighbouring regions', () => {
  test('have a site within 100 km of a site of the region', () => {
    expect([...findNeighbours(scope(), geography)]).toEqual(['middle']);
    expect([...findNeighbours(scope({ regionId: 'middle' }), geography)]).toEqual(['north']);
  });

  test('of a region without sites are found from its towns, and from the farm', () => {
    expect([...findNeighbours(scope({ regionId: 'coast' }), geography)]).toEqual(['south']);
    expect([...findNeighbours(scope({ regionId: 'moor' }), geography)]).toEqual([]);
    const farm = { farmLatitude: 49.6, farmLongitude: 0 };
    expect([...findNeighbours(scope({ regionId: 'moor', ...farm }), geography)]).toEqual(['north', 'middle']);
  });
});

describe('the choice of trials', () => {
  test('is the region by default', () => {
    expect(sitesOf(chooseTrials(trials, scope(), geography))).toEqual(['n1', 'n1']);
  });

  test('takes in the neighbours on request, in the order given', () => {
    expect(sitesOf(chooseTrials(trials, scope({ includeNeighbours: true }), geography))).toEqual([
      'n1',
      'm1',
      'n1',
    ]);
  });

  test('takes the nearest sites with all their trials, none beyond 250 km, whatever the region', () => {
    const near = (farmLatitude: number) =>
      sitesOf(
        chooseTrials(
          trials,
          scope({ trialChoice: 'nearest', farmLatitude, farmLongitude: 0, regionId: 'coast' }),
          geography,
        ),
      );
    expect(near(49)).toEqual(['n1', 'm1', 'n1', 's1']);
    expect(near(47.5)).toEqual(['m1', 's1']);
    expect(near(10)).toEqual([]);
  });

  test('takes no more than six sites, the nearest', () => {
    const many = Array.from({ length: 9 }, (_, i) => trial(`site ${i}`, 'north', 50 + i / 10));
    const asked = scope({ trialChoice: 'nearest', farmLatitude: 50.9, farmLongitude: 0 });
    expect(sitesOf(chooseTrials(many, asked, geography))).toEqual([3, 4, 5, 6, 7, 8].map((i) => `site ${i}`));
  });

  test('is empty for the nearest of a farm that nobody has placed', () => {
    expect(chooseTrials(trials, scope({ trialChoice: 'nearest' }), geography)).toEqual([]);
  });
});
