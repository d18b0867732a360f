import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import type { TrialLine } from '#shared/trial.ts';
import { openApiWorld, type Agent, type ApiWorld } from './api-world.ts';
import {
  foundSmallWorld,
  noise,
  plantTrial,
  publishPlanted,
  republish,
  withdraw,
  type PlantedTrial,
  type SmallWorld,
} from './small-world.ts';

let world: ApiWorld;
let small: SmallWorld;
let advisor: Agent;
const ids: Record<'first' | 'weak' | 'south' | 'draft' | 'withdrawn' | 'corrected', string> = {
  first: '',
  weak: '',
  south: '',
  draft: '',
  withdrawn: '',
  corrected: '',
};

const planted = (site: string, season: number, scatter: number): PlantedTrial => ({
  site,
  season,
  entries: ['Anchor', 'Birch', 'Cedar'],
  yieldOf: (entry, rep) => 5 + 0.1 * entry.length + scatter * noise(entry.length, rep, season, site.length),
  proteinOf: (entry, rep) => 11 + noise(rep, entry.length),
});

beforeAll(async () => {
  world = await openApiWorld('empty');
  const { db } = world.database;
  small = await foundSmallWorld(db);
  ids.first = await publishPlanted(db, small, planted('elm', 2024, 0.4));
  ids.weak = await publishPlanted(db, small, planted('fir', 2024, 5));
  ids.south = await publishPlanted(db, small, planted('heath', 2025, 0.4));
  ids.draft = await plantTrial(db, small, planted('gorse', 2024, 0.4));
  ids.withdrawn = await publishPlanted(db, small, planted('gorse', 2025, 0.4));
  await withdraw(db, ids.withdrawn);
  ids.corrected = await publishPlanted(db, small, planted('elm', 2026, 0.4));
  await db.execute(sql`update plots set excluded_reason = 'drowned'
    where trial_id = ${ids.corrected} and plot_number = '101'`);
  await republish(db, ids.corrected);
  // The advisor works in no region with trials: what is published is for everybody.
  advisor = (await world.signInAs('advisor')).agent;
});
afterAll(() => world.close());

const listed = async (query: Record<string, string | number> = {}): Promise<TrialLine[]> =>
  (await advisor.get('/api/trials').query(query).expect(200)).body.trials;

test('the catalogue counts published trials, drafts and withdrawn ones not among them', async () => {
  const { body } = await advisor.get('/api/catalogue').expect(200);
  const published = Object.fromEntries(
    body.regions.map((region: { slug: string; publishedTrials: unknown }) => [
      region.slug,
      region.publishedTrials,
    ]),
  );
  expect(published).toEqual({
    north: { barley: 3, pea: 0 },
    south: { barley: 1, pea: 0 },
    coast: { barley: 0, pea: 0 },
  });
  const barley = body.crops.find((crop: { slug: string }) => crop.slug === 'barley');
  expect(barley.seasons).toEqual([2026, 2025, 2024]);
  expect(barley.name).toEqual({ en: 'barley', fr: 'barley (fr)' });
  expect(barley.traits.map((trait: { slug: string }) => trait.slug)).toEqual(['yield', 'protein', 'lodging']);
  expect(barley.varieties.map((variety: { name: string }) => variety.name)).toEqual([
    'Anchor',
    'Birch',
    'Cedar',
    'Dogwood',
    'Elder',
  ]);
  expect(body.sites).toHaveLength(4);
});

test('the list holds what is published, newest season first, with the figures of yield', async () => {
  const trials = await listed();
  expect(trials.map((trial) => trial.id)).toEqual([ids.corrected, ids.south, ids.first, ids.weak]);
  const [corrected, , first, weak] = trials;
  expect(first).toMatchObject({
    state: 'published',
    version: 1,
    entries: 3,
    plots: 12,
    isWeak: false,
    siteName: 'ELM',
  });
  expect(corrected?.version).toBe(2);
  expect(weak?.isWeak).toBe(true);
  expect(weak?.cvPercent).toBeGreaterThan(15);
  const { rows } = await world.database.db.execute<{ mean: number }>(sql`select avg(value) as mean
    from observations join plots on plots.id = plot_id join traits on traits.id = trait_id
    where trial_id = ${ids.first} and slug = 'yield'`);
  expect(first?.meanYield).toBeCloseTo(rows[0]?.mean ?? NaN, 10);
});

test.each([
  [{ region: 'south' }, 1],
  [{ crop: 'pea' }, 0],
  [{ crop: 'barley', season: 2024 }, 2],
  [{ region: 'no such region' }, 0],
])('the list is narrowed by %o', async (query, count) => {
  expect(await listed(query)).toHaveLength(count);
});

test('text where a season belongs is refused and says where', async () => {
  const reply = await advisor.get('/api/trials').query({ season: 'last year' });
  expect(reply.status).toBe(400);
  expect(reply.body.error).toMatchObject({ code: 'invalid-input', issues: [{ path: 'season' }] });
});

test('a trial tells its head, its traits and its history', async () => {
  const { trial } = (await advisor.get(`/api/trials/${ids.corrected}`).expect(200)).body;
  expect(trial).toMatchObject({
    state: 'published',
    version: 2,
    traitSlugs: ['yield', 'protein'],
    alpha: 0.05,
  });
  expect(trial.versions).toMatchObject([
    { number: 2, action: 'publish', reason: 'corrected' },
    { number: 1, action: 'publish', reason: 'first results' },
  ]);
  expect(trial.versions[0].sha256).toMatch(/^[0-9a-f]{64}$/);
  expect(trial.versions[0].sha256).not.toBe(trial.versions[1].sha256);
});

test('a withdrawn trial is out of the list and still readable, and says that it is withdrawn', async () => {
  const { trial } = (await advisor.get(`/api/trials/${ids.withdrawn}`).expect(200)).body;
  expect(trial).toMatchObject({ state: 'withdrawn', version: 1 });
  expect(trial.versions.map((version: { action: string }) => version.action)).toEqual([
    'withdraw',
    'publish',
  ]);
  await advisor.get(`/api/trials/${ids.withdrawn}/analysis`).expect(200);
});

test('a draft is for nobody but the desk', async () => {
  for (const role of ['advisor', 'agronomist', 'administrator'] as const) {
    const { agent } = await world.signInAs(role);
    for (const path of [`/api/trials/${ids.draft}`, `/api/trials/${ids.draft}/analysis`]) {
      const reply = await agent.get(path);
      expect([reply.status, reply.body.error.code]).toEqual([404, 'not-found']);
    }
  }
});

test('the analysis is that of the published version, excluded plots and all', async () => {
  const { analysis } = (await advisor.get(`/api/trials/${ids.corrected}/analysis`).expect(200)).body;
  expect(analysis).toMatchObject({
    trialId: ids.corrected,
    traitSlug: 'yield',
    source: 'published',
    version: 2,
    plotsUsed: 11,
    plotsExcluded: 1,
  });
  expect(analysis.means).toHaveLength(3);
  expect(analysis.pairsTotal).toBe(3);
});

// Gomez & Gomez's relation for complete blocks: LSD = t(1 − α/2, df) · √(2 MS / r); t(.975, 6) = 2.446912, t(.95, 6) = 1.943180.
test.each([
  [0.05, 2.446912],
  [0.1, 1.94318],
])('the LSD at alpha %f is that of the textbook', async (alpha, t) => {
  const { analysis } = (await advisor.get(`/api/trials/${ids.first}/analysis`).query({ alpha }).expect(200))
    .body;
  expect(analysis.residualDf).toBe(6);
  expect(analysis.lsd.mean).toBeCloseTo(t * Math.sqrt((2 * analysis.residualMs) / 4), 5);
});

test.each([
  ['a trait the crop does not have', { trait: 'sweetness' }, 404, 'trait-without-data'],
  ['an alpha that nobody prints', { alpha: 0.2 }, 400, 'invalid-input'],
  ['text for alpha', { alpha: 'five' }, 400, 'invalid-input'],
  ['an unknown comparison', { comparison: 'duncan' }, 400, 'invalid-input'],
])('%s is refused', async (_case, query, status, code) => {
  const reply = await advisor.get(`/api/trials/${ids.first}/analysis`).query(query);
  expect([reply.status, reply.body.error.code]).toEqual([status, code]);
});

test('a trait of the crop without values in this trial is told as such, not as a failure', async () => {
  const reply = await advisor.get(`/api/trials/${ids.first}/analysis`).query({ trait: 'lodging' });
  expect(reply.status).toBe(200);
  expect(reply.body.analysis.kind).toBe('none');
  expect(reply.body.analysis.outcomes).not.toHaveLength(0);
});

test.each(['nonsense', '00000000-0000-4000-8000-000000000000', '%27%3B--'])(
  'a trial of the id %s is not found',
  async (id) => {
    for (const path of [`/api/trials/${id}`, `/api/trials/${id}/analysis`]) {
      const reply = await advisor.get(path);
      expect([reply.status, reply.body.error.code]).toEqual([404, 'not-found']);
    }
  },
);
