import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { storedAnswers } from '#drizzle/schema/weigh-ups.ts';
import type { WeighUpInput, WeighUpResult } from '#shared/weigh-up.ts';
import { openApiWorld, type ApiWorld, type SignedIn } from './api-world.ts';
import { foundSmallWorld, idIn, noise, publishPlanted, varietyNames } from './small-world.ts';

const seasons = { first: 2012, last: 2025 };
const trialCount = 40;

let world: ApiWorld;
let advisor: SignedIn;
let weighUpId: string;

beforeAll(async () => {
  world = await openApiWorld('empty');
  const { db } = world.database;
  const small = await foundSmallWorld(db);
  const span = seasons.last - seasons.first + 1;
  const places = ['elm', 'fir', 'gorse'].flatMap((site) =>
    Array.from({ length: span }, (_, year) => ({ site, season: seasons.first + year })),
  );
  for (const { site, season } of places.slice(0, trialCount))
    await publishPlanted(db, small, {
      ...{ site, season, entries: varietyNames },
      yieldOf: (entry, rep) =>
        5 + 0.4 * noise(entry.charCodeAt(0)) + 0.3 * noise(rep, season, entry.length, site.length),
      proteinOf: (entry, rep) =>
        12 + 0.5 * noise(entry.charCodeAt(0), 2) + 0.3 * noise(rep, season, entry.length, site.length),
    });
  advisor = await world.signInAs('advisor', { regionIds: [small.regionIds.north] });
  const seed = { seedPerHectare: 60, treatmentPerHectare: 0, royaltyPerHectare: 0 };
  const question: WeighUpInput = {
    ...{ cropId: small.cropId, regionId: small.regionIds.north },
    ...{ seasonFrom: seasons.first, seasonTo: seasons.last },
    ...{ growerName: 'Ada Quern', farmName: 'Long Furlong', areaHectares: 42 },
    currentVarietyId: idIn(small.varietyIds, 'Anchor'),
    candidateIds: ['Birch', 'Cedar', 'Dogwood'].map((name) => idIn(small.varietyIds, name)),
    assumptions: {
      ...{ currency: 'CAD', priceLow: 220, priceMiddle: 260, priceHigh: 300 },
      ...{ haulagePerTonne: 15, dryingPerTonne: 5, priceSheetDate: null },
      qualityRules: [{ traitSlug: 'protein', side: 'at-least', limit: 12, perTonne: 6 }],
      seedCosts: Object.fromEntries([...small.varietyIds.values()].map((id) => [id, seed])),
    },
  };
  const made = await advisor.agent.post('/api/weigh-ups').send(question).expect(200);
  weighUpId = made.body.weighUp.id;
}, 120_000);
afterAll(() => world.close());

const read = async (): Promise<{ result: WeighUpResult; milliseconds: number }> => {
  const from = performance.now();
  const { body } = await advisor.agent.get(`/api/weigh-ups/${weighUpId}`).expect(200);
  return { result: body.result, milliseconds: performance.now() - from };
};

test('a weigh-up of forty trials answers from what is stored, and weighs nothing', async () => {
  const { db } = world.database;
  await db.delete(storedAnswers);
  const cold = await read();
  expect(cold.result.trials).toHaveLength(trialCount);
  expect(cold.result.candidates.map(({ money }) => money?.quality)).not.toContain('unknown');
  const [kept] = await db.select().from(storedAnswers);
  // A name that no weighing could give: only what is stored has it.
  await db
    .update(storedAnswers)
    .set({ answer: sql`jsonb_set(answer, '{candidates,0,varietyName}', '"Told from store"')` });
  const warm: number[] = [];
  for (let i = 0; i < 7; i += 1) {
    const { result, milliseconds } = await read();
    expect(result.candidates[0]?.varietyName).toBe('Told from store');
    expect(result.computedAt).toBe(cold.result.computedAt);
    expect(result.candidates.slice(1)).toEqual(cold.result.candidates.slice(1));
    warm.push(milliseconds);
  }
  expect(await db.select().from(storedAnswers)).toHaveLength(1);
  expect(kept?.key).toHaveLength(64);
  const median = warm.toSorted((a, b) => a - b)[3] ?? NaN;
  console.info(
    `GET of a weigh-up of ${trialCount} trials: weighed ${cold.milliseconds.toFixed(0)} ms, from store ${median.toFixed(0)} ms (median of ${warm.length})`,
  );
}, 120_000);
