import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { seedDemo, type SeededDemo } from '#server/demo/seed-demo.ts';
import { trialContent } from '#shared/trial-content.ts';
import { hashTrialContent } from '#server/trials/trial-content-hash.ts';
import type { CopyPageData } from '#tests/support/read-copy-page.ts';
import { makeRegion } from '#tests/support/factories.ts';
import { createTestDatabase } from '#tests/support/test-database.ts';
import { buildWorld, type Agent, type ApiWorld } from './api-world.ts';

let world: ApiWorld;
let demo: SeededDemo;
let agent: Agent;

beforeAll(async () => {
  world = buildWorld(await createTestDatabase());
  demo = await seedDemo(world.database.db);
  const agronomist = demo.accounts.find((account) => account.role === 'agronomist');
  agent = await world.signIn(agronomist?.email ?? '', agronomist?.password);
});
afterAll(() => world.close());

async function readNumber(query: ReturnType<typeof sql>): Promise<number> {
  const { rows } = await world.database.db.execute<{ count: number }>(query);
  return rows[0]?.count ?? -1;
}

describe('the seeded demo', () => {
  test('has an account of every role that can sign in with the password told', async () => {
    expect(new Set(demo.accounts.map((account) => account.role))).toEqual(
      new Set(['advisor', 'agronomist', 'administrator']),
    );
    expect(new Set(demo.accounts.map((account) => account.language))).toEqual(new Set(['en', 'fr']));
    for (const { email, password } of demo.accounts) await world.signIn(email, password);
  });

  test('publishes by the pipeline: every publication has its hash, fits and means', async () => {
    expect(await readNumber(sql`select count(*)::int as count from trials`)).toBe(76);
    expect(await readNumber(sql`select count(*)::int as count from trials where state = 'published'`)).toBe(
      72,
    );
    const { rows } = await world.database.db.execute<{ content: unknown; sha256: string }>(
      sql`select content, sha256 from trial_versions`,
    );
    // 72 published, one of them twice, one withdrawn by a second version.
    expect(rows).toHaveLength(75);
    for (const { content, sha256 } of rows)
      expect(hashTrialContent(trialContent.parse(content))).toBe(sha256);
    const without = sql`select count(*)::int as count from trial_versions v where action = 'publish' and not exists
      (select from version_fits f join traits t on t.id = f.trait_id
       where f.version_id = v.id and t.slug = 'yield' and f.residual_ms > 0)`;
    expect(await readNumber(without)).toBe(0);
    const loose = sql`select count(*)::int as count from entry_means m join traits t on t.id = m.trait_id
      where t.kind = 'numeric' and (m.variance is null or m.variance <= 0 or m.variety_id is null)`;
    expect(await readNumber(loose)).toBe(0);
  });

  test('shows its readers the odd trials for what they are', async () => {
    const { trials } = (await agent.get('/api/trials').expect(200)).body;
    expect(trials).toHaveLength(72);
    const weak = trials.filter((trial: { isWeak: boolean }) => trial.isWeak);
    expect(weak).toHaveLength(1);
    expect(weak[0].cvPercent).toBeGreaterThan(26);
    expect(weak[0].cvPercent).toBeLessThan(30);
    const corrected = trials.filter((trial: { version: number }) => trial.version === 2);
    expect(corrected).toHaveLength(1);
    const { body } = await agent.get(`/api/trials/${corrected[0].id}`).expect(200);
    expect(body.trial.versions).toHaveLength(2);
    expect(body.trial.versions[0].sha256).not.toBe(body.trial.versions[1].sha256);
  });

  test('cautions of the drift across the one field that has it', async () => {
    const query = '/api/trials?crop=winter-wheat&season=2025';
    const { trials } = (await agent.get(query).expect(200)).body;
    const cautioned: string[] = [];
    for (const trial of trials) {
      const { analysis } = (await agent.get(`/api/trials/${trial.id}/analysis`).expect(200)).body;
      if (analysis.cautions.some((caution: { code: string }) => caution.code === 'spatial-trend'))
        cautioned.push(trial.siteName);
    }
    expect(trials.length).toBeGreaterThan(4);
    expect(cautioned).toEqual(['Marrowfen']);
  });

  test('leaves the lost comma for the agronomist to find', async () => {
    const { trials } = (await agent.get('/api/desk/trials?state=draft').expect(200)).body;
    expect(trials).toHaveLength(1);
    const { analysis } = (await agent.get(`/api/desk/trials/${trials[0].id}/analysis`).expect(200)).body;
    const outlying = analysis.cautions.find((caution: { code: string }) => caution.code === 'outlying-plot');
    const plot = analysis.plots.find(
      (one: { plotNumber: string }) => one.plotNumber === outlying?.values.plot,
    );
    expect(plot.value).toBeGreaterThan(30);
  });

  test('has no trial on the Sarrow Coast, but a price sheet', async () => {
    const { trials } = (await agent.get('/api/trials?region=sarrow-coast').expect(200)).body;
    expect(trials).toEqual([]);
    const sheets = sql`select count(*)::int as count from price_sheets p join regions r on r.id = p.region_id
      where r.slug = 'sarrow-coast'`;
    expect(await readNumber(sheets)).toBe(3);
  });

  test('gives out a grower link that opens without an account', async () => {
    expect(demo.growerPath).toMatch(/^\/copy\/[\w-]+$/);
    const { body } = await world.visitor().get(`${demo.growerPath}/answer`).expect(200);
    const { weighUp, candidates } = (body as CopyPageData).answer;
    expect(weighUp.currentVarietyName).toBe('Tamberlow');
    expect(candidates).toHaveLength(5);
    const unpriced = candidates.find(({ varietyName }) => varietyName === 'Larkhollow');
    expect(unpriced?.money).toBeNull();
    const priced = candidates.find(({ varietyName }) => varietyName === 'Quillane');
    // Barley under 12 % of protein is paid for: a premium of up to 6 a tonne, seldom sure and seldom out of reach.
    const quality = priced?.money?.quality;
    if (!quality || quality === 'unknown') throw new Error('protein is not reckoned');
    expect(quality.candidate).toBeGreaterThan(0);
    expect(quality.candidate).toBeLessThan(6);
    expect(priced?.money?.badReturn).toBeLessThan(priced?.money?.goodReturn ?? NaN);
  });

  test('states for every seed cost the rate that it follows from', async () => {
    const off = sql`select count(*)::int as count from seed_costs where abs(seed_per_hectare - seed_price_per_kg
      * target_plants_m2 * thousand_kernel_weight_g / (germination_percent * (1 - mortality_percent / 100))) > 0.06
      or seed_price_per_kg is null or cleaning_per_tonne is null or harvest_moisture_percent is null`;
    expect(await readNumber(off)).toBe(0);
  });
});

describe('seeding again', () => {
  test('leaves a filled database as it is', async () => {
    const before = await readNumber(sql`select count(*)::int as count from trial_versions`);
    const again = await seedDemo(world.database.db);
    expect(again).toEqual({ isFresh: false, accounts: demo.accounts, growerPath: null });
    expect(await readNumber(sql`select count(*)::int as count from trial_versions`)).toBe(before);
    expect(await readNumber(sql`select count(*)::int as count from weigh_ups`)).toBe(1);
  });

  test('tells no accounts of a database that is not the demo', async () => {
    const database = await createTestDatabase();
    await makeRegion(database.db);
    expect(await seedDemo(database.db)).toEqual({ isFresh: false, accounts: [], growerPath: null });
    await database.close();
  });
});
