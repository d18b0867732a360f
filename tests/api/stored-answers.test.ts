import { randomUUID } from 'node:crypto';
import { and, eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { traits, varieties } from '#drizzle/schema/crops.ts';
import { plots } from '#drizzle/schema/trials.ts';
import { usualVariances } from '#drizzle/schema/usual-variances.ts';
import { storedAnswers } from '#drizzle/schema/weigh-ups.ts';
import type { WeighUpInput, WeighUpResult } from '#shared/weigh-up.ts';
import { openApiWorld, type ApiWorld, type SignedIn } from './api-world.ts';
import { askSmallQuestion } from './small-question.ts';
import {
  foundSmallWorld,
  idIn,
  noise,
  publishPlanted,
  republish,
  varietyNames,
  withdraw,
  type PlantedTrial,
  type SmallWorld,
} from './small-world.ts';

let world: ApiWorld;
let small: SmallWorld;
let advisor: SignedIn;
let weighUpId: string;
let lastTrial: string;

const planted = (site: string, season: number): PlantedTrial => ({
  ...{ site, season, entries: varietyNames },
  yieldOf: (entry, rep) =>
    5 + 0.3 * noise(entry.charCodeAt(0), season) + 0.3 * noise(rep, season, entry.length),
});

const question = (): WeighUpInput =>
  askSmallQuestion(small, {
    candidateIds: ['Birch', 'Cedar'].map((name) => idIn(small.varietyIds, name)),
  });

beforeAll(async () => {
  world = await openApiWorld('empty');
  const { db } = world.database;
  small = await foundSmallWorld(db);
  for (const site of ['elm', 'fir', 'gorse'])
    for (const season of [2023, 2024]) lastTrial = await publishPlanted(db, small, planted(site, season));
  advisor = await world.signInAs('advisor', { regionIds: Object.values(small.regionIds) });
  const made = await advisor.agent.post('/api/weigh-ups').send(question()).expect(200);
  weighUpId = made.body.weighUp.id;
});
afterAll(() => world.close());

const read = async (): Promise<WeighUpResult> =>
  (await advisor.agent.get(`/api/weigh-ups/${weighUpId}`).expect(200)).body.result;

const countStored = async (): Promise<number> =>
  (await world.database.db.select().from(storedAnswers)).length;

async function rank(regionId = small.regionIds.north): Promise<WeighUpResult> {
  const { cropId, currentVarietyId, seasonFrom, seasonTo } = question();
  const query = { cropId, regionId, currentVarietyId, seasonFrom, seasonTo };
  return (await advisor.agent.get('/api/candidates').query(query).expect(200)).body.result;
}

/** Whether a step leaves the stored answer of the weigh-up and of the list standing. */
async function outlives(step: () => Promise<unknown>): Promise<boolean[]> {
  const before = [await read(), await rank()];
  await step();
  const after = [await read(), await rank()];
  return after.map((one, i) => one.computedAt === before[i]?.computedAt);
}

test('a second reading gives the stored answer, to the last digit', async () => {
  const first = await read();
  const stored = await countStored();
  expect(await read()).toEqual(first);
  expect(await countStored()).toBe(stored);
  expect(await outlives(() => Promise.resolve())).toEqual([true, true]);
});

test('what is told is what is stored, and not weighed again', async () => {
  const { db } = world.database;
  const { candidates } = await read();
  await db
    .update(storedAnswers)
    .set({ answer: sql`jsonb_set(answer, '{candidates,0,varietyName}', '"Told from store"')` });
  expect((await read()).candidates[0]?.varietyName).toBe('Told from store');
  await db.delete(storedAnswers);
  expect((await read()).candidates[0]?.varietyName).toBe(candidates[0]?.varietyName);
});

test('a trial of another region, or of other seasons, leaves it untouched', async () => {
  const { db } = world.database;
  expect(await outlives(() => publishPlanted(db, small, planted('heath', 2024)))).toEqual([true, true]);
  expect(await outlives(() => publishPlanted(db, small, planted('elm', 2019)))).toEqual([true, true]);
});

test('a variety and a trait of another crop leave it untouched', async () => {
  const { db } = world.database;
  const cropId = small.otherCropId;
  const publish = async () => {
    await db.insert(varieties).values({ cropId, name: 'Snap' });
    await db.insert(traits).values({
      ...{ cropId, slug: 'yield', nameEn: 'Yield', nameFr: 'Rendement', unit: 't/ha' },
      ...{ kind: 'numeric', direction: 'higher' },
    });
  };
  expect(await outlives(publish)).toEqual([true, true]);
});

test('a trial published, corrected or withdrawn in the region makes it stale', async () => {
  const { db } = world.database;
  expect(await outlives(() => publishPlanted(db, small, planted('elm', 2025)))).toEqual([false, false]);
  await db
    .update(plots)
    .set({ excludedReason: 'hail' })
    .where(and(eq(plots.trialId, lastTrial), eq(plots.plotNumber, '101')));
  expect(await outlives(() => republish(db, lastTrial))).toEqual([false, false]);
  expect(await outlives(() => withdraw(db, lastTrial))).toEqual([false, false]);
  expect((await read()).trials).toHaveLength(6);
});

test('newer usual variances make it stale', async () => {
  const estimate = () =>
    world.database.db.insert(usualVariances).values({
      ...{ cropId: small.cropId, traitId: idIn(small.traitIds, 'yield') },
      ...{
        site: 0.02,
        season: 0.02,
        rest: 0.06,
        environments: 12,
        seasons: 3,
        entries: 12,
        engineVersion: '1',
      },
    });
  expect(await outlives(estimate)).toEqual([false, false]);
});

test('a price changes the money at once and the weighing not, until its break-even gap widens a margin', async () => {
  const first = await read();
  const { body } = await advisor.agent.get(`/api/weigh-ups/${weighUpId}`).expect(200);
  const save = async (revision: number, seedOfBirch: number): Promise<WeighUpResult> => {
    const costs = { treatmentPerHectare: 0, royaltyPerHectare: 0 };
    const seedCosts = {
      [idIn(small.varietyIds, 'Anchor')]: { seedPerHectare: 50, ...costs },
      [idIn(small.varietyIds, 'Birch')]: { seedPerHectare: seedOfBirch, ...costs },
    };
    const weighUp = { ...question(), assumptions: { ...question().assumptions, seedCosts } };
    const change = { revision, weighUp };
    return (await advisor.agent.put(`/api/weigh-ups/${weighUpId}`).send(change).expect(200)).body.result;
  };
  const cheap = await save(body.weighUp.revision, 55);
  expect(first.candidates[0]?.money).toBeNull();
  expect(cheap.candidates[0]?.money?.extraCostPerHectare).toBe(5);
  expect(cheap.computedAt).toBe(first.computedAt);
  const dear = await save(body.weighUp.revision + 1, 150);
  expect(dear.computedAt).not.toBe(first.computedAt);
});

test('answers that nobody has asked for in two months are forgotten when a new one comes', async () => {
  const { db } = world.database;
  await read();
  const old = randomUUID().replaceAll('-', '').repeat(2);
  await db.insert(storedAnswers).values({
    ...{ key: old, answer: {}, engineVersion: '1', lastUsedAt: sql`now() - interval '61 days'` },
  });
  const kept = randomUUID().replaceAll('-', '').repeat(2);
  await db.insert(storedAnswers).values({
    ...{ key: kept, answer: {}, engineVersion: '1', lastUsedAt: sql`now() - interval '59 days'` },
  });
  await rank(small.regionIds.south);
  const left = async (key: string) =>
    (await db.select().from(storedAnswers).where(eq(storedAnswers.key, key))).length;
  expect([await left(old), await left(kept)]).toEqual([0, 1]);
});
