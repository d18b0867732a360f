import { afterAll, beforeAll, expect, test } from 'vitest';
import { auditEvents } from '#drizzle/schema/audit.ts';
import type { UsualOfCrop } from '#shared/usual-variance.ts';
import { makeVariety } from '#tests/support/factories.ts';
import { openApiWorld, type ApiWorld, type SignedIn } from './api-world.ts';
import { foundSmallWorld, idIn, noise, publishPlanted, type SmallWorld } from './small-world.ts';

let world: ApiWorld;
let small: SmallWorld;
let advisor: SignedIn;
let agronomist: SignedIn;

const names = Array.from({ length: 12 }, (_, i) => `V${i}`);
const sites = ['elm', 'fir', 'gorse', 'heath'];
const seasons = [2023, 2024, 2025];

beforeAll(async () => {
  world = await openApiWorld('empty');
  const { db } = world.database;
  small = await foundSmallWorld(db);
  const made = await Promise.all(names.map((name) => makeVariety(db, small.cropId, { name })));
  small = { ...small, varietyIds: new Map(made.map((row) => [row.name, row.id])) };
  for (const [s, site] of sites.entries()) {
    for (const season of seasons) {
      await publishPlanted(db, small, {
        ...{ site, season, entries: names, reps: 2 },
        // Each variety has its own way with a site, a season and both.
        yieldOf: (entry, rep) =>
          5 +
          0.8 * noise(names.indexOf(entry), s + 1) +
          0.6 * noise(names.indexOf(entry), season) +
          0.5 * noise(names.indexOf(entry), season, s) +
          0.2 * noise(names.indexOf(entry), season, s, rep + 1),
      });
    }
  }
  advisor = await world.signInAs('advisor', { regionIds: [small.regionIds.north] });
  agronomist = await world.signInAs('agronomist', { regionIds: [small.regionIds.north] });
});
afterAll(() => world.close());

async function listUsual(): Promise<UsualOfCrop['traits'][number]> {
  const { crops } = (await advisor.agent.get('/api/usual-variances').expect(200)).body;
  const crop = crops.find((one: UsualOfCrop) => one.cropId === small.cropId);
  return crop.traits.find((trait: { traitSlug: string }) => trait.traitSlug === 'yield');
}

const estimate = async (cropId: string) =>
  (await agronomist.agent.post('/api/usual-variances').send({ cropId }).expect(200)).body;

async function listCandidates() {
  const query = {
    cropId: small.cropId,
    regionId: small.regionIds.north,
    currentVarietyId: idIn(small.varietyIds, 'V0'),
    seasonFrom: 2023,
    seasonTo: 2025,
  };
  return (await advisor.agent.get('/api/candidates').query(query).expect(200)).body.result;
}

const contextOf = (result: { cautions: { code: string; values: { context?: string } }[] }) =>
  result.cautions.find((caution) => caution.code === 'rests-on-usual-variance')?.values.context;

test('before an estimate the crop’s default holds, and says so: 3, 2.5 and 5 % of 5 t/ha (domain.md)', async () => {
  const { estimates, cropDefault, mean } = await listUsual();
  expect(estimates).toEqual([]);
  expect(cropDefault?.site).toBeCloseTo(0.15, 12);
  expect(cropDefault?.season).toBeCloseTo(0.125, 12);
  expect(cropDefault?.rest).toBeCloseTo(0.25, 12);
  expect(mean).toBeGreaterThan(4);
  const result = await listCandidates();
  expect(result).toMatchObject({ usualVariancesFrom: 'crop-default', usualVariancesAt: null });
  expect(contextOf(result)).toBe('crop-default');
});

test('a crop with too few trials is told what it has and what it needs, and nothing is stored', async () => {
  const { outcomes, needs } = await estimate(small.otherCropId);
  expect(needs).toEqual({ environments: 10, seasons: 3, entries: 12 });
  // The other crop of the small world has no measured trait at all.
  expect(outcomes).toEqual([]);
  const barley = await estimate(small.cropId);
  expect(barley.outcomes).toContainEqual({
    ...{ traitSlug: 'protein', outcome: 'not-enough', environments: 0, seasons: 0, entries: 0 },
  });
});

test('the organisation’s own variances come before the default, with who, when and how sure', async () => {
  const [newest] = (await listUsual()).estimates;
  expect(newest).toMatchObject({ environments: 12, seasons: 3, entries: 12, estimatedBy: 'Test agronomist' });
  if (newest === undefined) throw new Error('it was estimated');
  for (const term of ['site', 'season', 'rest'] as const) {
    const interval = newest.intervals[term];
    expect(newest.sd[term]).toBeGreaterThan(0);
    if (interval === null) continue;
    expect(interval.low).toBeLessThan(newest.sd[term]);
    expect(interval.high).toBeGreaterThan(newest.sd[term]);
  }
  const result = await listCandidates();
  expect(result).toMatchObject({
    usualVariancesFrom: 'own-trials',
    usualVariancesAt: newest.estimatedAt,
  });
  expect(contextOf(result)).toBe('own-trials');
});

test('estimating again makes the newest count and keeps the older one as history', async () => {
  const before = (await listUsual()).estimates;
  await estimate(small.cropId);
  const after = (await listUsual()).estimates;
  expect(after).toHaveLength(before.length + 1);
  expect(after.slice(1)).toEqual(before);
  expect((await listCandidates()).usualVariancesAt).toBe(after[0]?.estimatedAt);
});

test('it stands in the audit log', async () => {
  const events = await world.database.db.select().from(auditEvents);
  expect(events.filter((event) => event.action === 'usual-variances.estimated').at(-1)).toMatchObject({
    actorId: agronomist.id,
    subjectKind: 'crop',
    subjectId: small.cropId,
    detail: { traits: ['yield'], trials: 12 },
  });
});

test('an advisor reads them and estimates none; an unknown crop is not found', async () => {
  await advisor.agent.post('/api/usual-variances').send({ cropId: small.cropId }).expect(403);
  const unknown = { cropId: small.regionIds.north };
  const reply = await agronomist.agent.post('/api/usual-variances').send(unknown).expect(404);
  expect(reply.body.error.code).toBe('not-found');
});
