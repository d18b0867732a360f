import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { places, sites } from '#drizzle/schema/geography.ts';
import type { CandidateResult, WeighUpInput, WeighUpResult } from '#shared/weigh-up.ts';
import { openApiWorld, type ApiWorld, type SignedIn } from './api-world.ts';
import { askSmallQuestion } from './small-question.ts';
import {
  foundSmallWorld,
  idIn,
  noise,
  publishPlanted,
  varietyNames,
  type PlantedTrial,
  type SmallWorld,
} from './small-world.ts';

let world: ApiWorld;
let small: SmallWorld;
let advisor: SignedIn;

/** Mean yields of the sites, t/ha; Birch gains half a tonne on Anchor for each tonne that a site yields. */
const level: Record<string, number> = { elm: 4, fir: 5, gorse: 6, heath: 5.5 };
const slope = 0.5;

const planted = (site: string, season: number): PlantedTrial => ({
  site,
  season,
  entries: varietyNames,
  yieldOf: (entry, rep) => {
    const ground = (level[site] ?? 5) + 0.2 * (season - 2024);
    const gain = entry === 'Birch' ? slope * (ground - 5) : 0;
    return ground + gain + 0.1 * noise(rep, season, site.charCodeAt(0), entry.charCodeAt(0));
  },
});

/** A line from north to south: 22 km between the sites of the north, 56 km to the south's, as far again to the coast. */
const latitudes: Record<string, number> = { elm: 50, fir: 50.2, gorse: 50.4, heath: 49.5 };

beforeAll(async () => {
  world = await openApiWorld('empty');
  const { db } = world.database;
  small = await foundSmallWorld(db);
  for (const [slug, latitude] of Object.entries(latitudes))
    await db.update(sites).set({ latitude }).where(eq(sites.slug, slug));
  await db.insert(places).values({
    id: randomUUID(),
    name: 'Haven',
    regionId: small.regionIds.coast,
    latitude: 49,
    longitude: -100,
    seasonRainMm: 250,
    heatSumDegreeDays: 1500,
    soilTexture: 'loam',
  });
  for (const site of ['elm', 'fir', 'gorse', 'heath'])
    for (const season of [2023, 2024, 2025]) await publishPlanted(db, small, planted(site, season));
  advisor = await world.signInAs('advisor', { regionIds: [small.regionIds.north, small.regionIds.coast] });
});
afterAll(() => world.close());

const variety = (name: string): string => idIn(small.varietyIds, name);

const question = (change: Partial<WeighUpInput> = {}): WeighUpInput => askSmallQuestion(small, change);

async function weigh(change: Partial<WeighUpInput> = {}): Promise<WeighUpResult> {
  const made = await advisor.agent.post('/api/weigh-ups').send(question(change)).expect(200);
  return (await advisor.agent.get(`/api/weigh-ups/${made.body.weighUp.id}`).expect(200)).body.result;
}

const farmAt = (farmLatitude: number) => ({ farmLatitude, farmLongitude: -100 });
const sitesOf = ({ trials }: WeighUpResult): string[] =>
  [...new Set(trials.map((one) => one.siteName))].sort();
const codes = (cautions: { code: string }[]): string[] => cautions.map((one) => one.code);
const birchIn = ({ candidates: [first] }: WeighUpResult): CandidateResult => {
  if (first === undefined) throw new Error('nothing was weighed');
  return first;
};

describe('which trials answer', () => {
  test('those of the region, where nothing else is asked', async () => {
    const result = await weigh();
    expect(sitesOf(result)).toEqual(['ELM', 'FIR', 'GORSE']);
    expect(result.trials.every(({ inRegion }) => inRegion === true)).toBe(true);
    expect(codes(result.cautions)).not.toContain('trials-from-elsewhere');
    expect(codes(result.cautions)).not.toContain('no-trial-in-region');
  });

  test('those of neighbouring regions as well, on request, each marked', async () => {
    const result = await weigh({ includeNeighbours: true });
    expect(sitesOf(result)).toEqual(['ELM', 'FIR', 'GORSE', 'HEATH']);
    const elsewhere = result.trials.filter(({ inRegion }) => inRegion === false);
    expect(elsewhere.map(({ siteName, regionName }) => [siteName, regionName?.en])).toEqual(
      Array.from({ length: 3 }, () => ['HEATH', 'south']),
    );
    const lines = birchIn(result).trials;
    expect(lines.filter(({ inRegion }) => inRegion === false)).toHaveLength(3);
    expect(result.cautions).toContainEqual({
      code: 'trials-from-elsewhere',
      severity: 'warning',
      values: { count: 3, regions: [{ en: 'south', fr: 'south (fr)' }] },
    });
    expect(codes(result.cautions)).not.toContain('no-trial-in-region');
  });

  test('those of the sites nearest the farm, whatever region they lie in', async () => {
    // From 47.8: HEATH 189 km, ELM 245 km, the others beyond 250 km.
    const result = await weigh({ trialChoice: 'nearest', ...farmAt(47.8) });
    expect(sitesOf(result)).toEqual(['ELM', 'HEATH']);
    expect(result.farmRange?.nearestSite).toBe('HEATH');
    expect(result.farmRange?.nearestKm).toBeCloseTo(1.7 * 111.19508, 3);
  });
});

describe('a region without trials', () => {
  const coast = () => ({ regionId: small.regionIds.coast });

  test('gets no verdict', async () => {
    const result = await weigh(coast());
    expect([result.answer, result.candidates]).toEqual(['no-trials', []]);
    expect(result.cautions).toContainEqual({ code: 'no-trial-in-region', severity: 'stop', values: {} });
  });

  test('shows its neighbours’ estimates only on request, says so, and is given no verdict by them', async () => {
    const result = await weigh({ ...coast(), includeNeighbours: true });
    expect([result.answer, sitesOf(result)]).toEqual(['weighed', ['HEATH']]);
    expect(result.cautions[0]).toEqual({
      code: 'no-trial-in-region',
      severity: 'stop',
      values: { context: 'elsewhere', regions: [{ en: 'south', fr: 'south (fr)' }] },
    });
    expect(result.candidates.map(({ verdict, money }) => [verdict, money])).toEqual(
      result.candidates.map(() => ['thin', null]),
    );
    expect(result.candidates.some(({ gap }) => gap !== null)).toBe(true);
    const nearest = await weigh({ ...coast(), trialChoice: 'nearest', ...farmAt(49) });
    expect(nearest.candidates.every(({ verdict }) => verdict === 'thin')).toBe(true);
    expect(nearest.cautions[0]).toMatchObject({
      severity: 'stop',
      values: { regions: [{ en: 'north' }, { en: 'south' }] },
    });
  });

  test('stays without a verdict where nothing lies near', async () => {
    const result = await weigh({ ...coast(), trialChoice: 'nearest', ...farmAt(-30) });
    expect(result.answer).toBe('no-trials');
  });
});

describe('the farm', () => {
  test('far off, drier and on heavier ground than the sites is told so with numbers', async () => {
    const farm = {
      ...farmAt(48.9),
      farmSeasonRainMm: 190,
      farmHeatSumDegreeDays: 1500,
      farmSoilTexture: 'clay',
    };
    const { cautions, farmRange } = await weigh({ ...farm, farmSoilTexture: 'clay' });
    const values = (code: string) => cautions.find((one) => one.code === code)?.values;
    expect(values('farm-far')).toMatchObject({ site: 'ELM', count: 3 });
    expect(values('farm-drier')).toEqual({ difference: 60, count: 3 });
    expect(values('farm-heavier-soil')).toEqual({ count: 3 });
    expect(values('farm-unlike-sites')).toMatchObject({ similar: 0, count: 3 });
    expect(codes(cautions)).not.toContain('farm-cooler');
    expect(farmRange).toMatchObject({ sites: 3, similarSites: 0, nearestSite: 'ELM' });
  });

  test('beside the sites is told nothing, and one that nobody has placed has no range', async () => {
    const farm = { ...farmAt(50.1), farmSeasonRainMm: 255, farmHeatSumDegreeDays: 1520 };
    const near = await weigh({ ...farm, farmSoilTexture: 'loam' });
    expect(codes(near.cautions).filter((code) => code.startsWith('farm-'))).toEqual([]);
    expect(near.farmRange).toMatchObject({ similarSites: 3 });
    expect((await weigh()).farmRange).toBeNull();
  });

  test('is kept with the question, and forgotten when it is saved without', async () => {
    const farm = { ...farmAt(50.1), farmSeasonRainMm: 255, usualYield: 4.8, includeNeighbours: true };
    const made = (await advisor.agent.post('/api/weigh-ups').send(question(farm)).expect(200)).body.weighUp;
    expect(made).toMatchObject({ ...farm, farmSoilTexture: null, trialChoice: 'region' });
    const body = { revision: made.revision, weighUp: question() };
    const saved = (await advisor.agent.put(`/api/weigh-ups/${made.id}`).send(body).expect(200)).body.weighUp;
    expect(saved).toMatchObject({ farmLatitude: null, usualYield: null, includeNeighbours: false });
  });

  test.each([
    ['half a place', { farmLatitude: 50 }, 'half-a-place'],
    ['the nearest sites of no place', { trialChoice: 'nearest' as const }, 'nearest-needs-farm'],
    ['a place off the globe', farmAt(91), 'too_big'],
    ['a yield of nothing', { usualYield: 0 }, 'too_small'],
  ])('%s is refused', async (_, change, reason) => {
    const { body } = await advisor.agent.post('/api/weigh-ups').send(question(change)).expect(400);
    expect(body.error.issues.map((issue: { reason: string }) => issue.reason)).toContain(reason);
  });
});

describe('low- and high-yielding fields', () => {
  test('the gap is read off the line at the usual yield where the trials carry it', async () => {
    const birch = birchIn(await weigh({ usualYield: 4.6 }));
    // All five entries make the mean, and Birch alone leaves the ground's level: its gap is slope·(ground − 5) and the
    // mean ground + a fifth of that, so at a mean of 4.6 the ground stands at 5 − 0.4/1.1.
    const expected = (slope * (4.6 - 5)) / (1 + slope / 5);
    expect(birch.gapAtUsualYield).toMatchObject({ usualYield: 4.6, isCarried: true });
    expect(birch.gapAtUsualYield?.estimate).toBeCloseTo(expected, 1);
    expect(birch.gapLine).toMatchObject({ trials: 9 });
    expect(birch.gapLine?.slope).toBeCloseTo(slope / (1 + slope / 5), 1);
    expect(codes(birch.cautions)).not.toContain('usual-yield-outside-trials');
  });

  test('a usual yield beyond the trials is not read, and said', async () => {
    const birch = birchIn(await weigh({ usualYield: 9 }));
    expect(birch.gapAtUsualYield).toMatchObject({ isCarried: false });
    const values = birch.cautions.find((one) => one.code === 'usual-yield-outside-trials')?.values;
    expect(values).toMatchObject({ variety: 'Birch', yield: 9 });
  });

  test('too few trials for a line is said, and only where a usual yield was given', async () => {
    const few = { seasonFrom: 2024, seasonTo: 2024 };
    const asked = birchIn(await weigh({ ...few, usualYield: 5 }));
    expect(asked.gapAtUsualYield).toBeNull();
    expect(codes(asked.cautions)).toContain('no-yield-line');
    expect(codes(birchIn(await weigh(few)).cautions)).not.toContain('no-yield-line');
  });
});

describe('the list of candidates', () => {
  const list = (change: Record<string, unknown>) =>
    advisor.agent.get('/api/candidates').query({
      cropId: small.cropId,
      regionId: small.regionIds.coast,
      currentVarietyId: variety('Anchor'),
      seasonFrom: 2023,
      seasonTo: 2025,
      ...change,
    });

  test('is made of the same trials as the weigh-up', async () => {
    expect((await list({}).expect(200)).body.result.answer).toBe('no-trials');
    const { result } = (await list({ includeNeighbours: 'true' }).expect(200)).body;
    expect(sitesOf(result)).toEqual(['HEATH']);
    const nearest = (await list({ trialChoice: 'nearest', ...farmAt(49) }).expect(200)).body.result;
    expect(sitesOf(nearest)).toEqual(['ELM', 'FIR', 'GORSE', 'HEATH']);
    expect(nearest.candidates).toHaveLength(varietyNames.length - 1);
    await list({ trialChoice: 'nearest' }).expect(400);
  });

  test('the catalogue names towns and where they lie', async () => {
    const { body } = await advisor.agent.get('/api/catalogue').expect(200);
    expect(body.places).toMatchObject([{ name: 'Haven', latitude: 49, soilTexture: 'loam' }]);
  });
});
