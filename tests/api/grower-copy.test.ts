import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { auditEvents } from '#drizzle/schema/audit.ts';
import { growerCopies } from '#drizzle/schema/weigh-ups.ts';
import { openApiWorld, type ApiWorld, type SignedIn } from './api-world.ts';
import {
  foundSmallWorld,
  idIn,
  noise,
  publishPlanted,
  republish,
  varietyNames,
  withdraw,
  type SmallWorld,
} from './small-world.ts';

let world: ApiWorld;
let small: SmallWorld;
let advisor: SignedIn;
const trialIds: string[] = [];
beforeAll(async () => {
  world = await openApiWorld('empty');
  const { db } = world.database;
  small = await foundSmallWorld(db);
  for (const season of [2022, 2023, 2024, 2025])
    trialIds.push(
      await publishPlanted(db, small, {
        site: 'elm',
        season,
        entries: varietyNames,
        yieldOf: (entry, rep) => 5 + 0.4 * noise(rep, season, entry.charCodeAt(0)),
      }),
    );
  advisor = await world.signInAs('advisor', { regionIds: [small.regionIds.north] });
});
afterAll(() => world.close());

const unknown = { error: { code: 'link-unknown' } };

async function makeWeighUp(person: SignedIn = advisor): Promise<string> {
  const variety = (name: string): string => idIn(small.varietyIds, name);
  const reply = await person.agent
    .post('/api/weigh-ups')
    .send({
      cropId: small.cropId,
      regionId: small.regionIds.north,
      seasonFrom: 2022,
      seasonTo: 2025,
      growerName: 'Ada Quern',
      farmName: 'Long Furlong',
      areaHectares: 42,
      currentVarietyId: variety('Anchor'),
      candidateIds: [variety('Birch'), variety('Cedar')],
      assumptions: {
        currency: 'CAD',
        priceLow: 220,
        priceMiddle: 260,
        priceHigh: 300,
        haulagePerTonne: 15,
        dryingPerTonne: 5,
        seedCosts: {},
        priceSheetDate: null,
      },
    })
    .expect(200);
  return reply.body.weighUp.id;
}

type Made = { weighUpId: string; copyId: string; token: string };

async function makeCopy(weighUpId?: string): Promise<Made> {
  const id = weighUpId ?? (await makeWeighUp());
  const reply = await advisor.agent
    .post(`/api/weigh-ups/${id}/grower-copies`)
    .send({ language: 'fr' })
    .expect(200);
  return { weighUpId: id, copyId: reply.body.copy.id, token: reply.body.path.replace('/copy/', '') };
}

const open = (token: string) => world.visitor().get(`/api/copies/${token}`);
const list = async (weighUpId: string) =>
  (await advisor.agent.get(`/api/weigh-ups/${weighUpId}/grower-copies`).expect(200)).body.copies;

test('a copy opens by its link alone, in the grower’s language, with the figures of the weigh-up', async () => {
  const { weighUpId, token } = await makeCopy();
  const reply = await open(token).expect(200);
  const live = (await advisor.agent.get(`/api/weigh-ups/${weighUpId}`).expect(200)).body;
  expect(reply.body.language).toBe('fr');
  expect(reply.body.laterChanges).toEqual([]);
  expect(reply.body.snapshot.weighUp).toEqual(live.weighUp);
  expect(reply.body.snapshot.result.candidates).toEqual(live.result.candidates);
  expect(reply.body.snapshot).toMatchObject({
    format: 1,
    advisorName: 'Test advisor',
    advisorEmail: advisor.email,
  });
  expect(reply.body.snapshot.traits.map((trait: { slug: string }) => trait.slug)).toEqual([
    'yield',
    'protein',
    'lodging',
  ]);
});

test('the link is long, random and never stored; what is stored is its hash', async () => {
  const { copyId, token } = await makeCopy();
  const other = await makeCopy();
  // 128 bits at least, at six bits a character.
  expect(token).toMatch(/^[A-Za-z0-9_-]{22,}$/);
  expect(other.token).not.toBe(token);
  const [row] = await world.database.db.select().from(growerCopies).where(eq(growerCopies.id, copyId));
  expect(JSON.stringify(row)).not.toContain(token);
  expect(row?.tokenHash).toMatch(/^[0-9a-f]{64}$/);
  const { rows } = await world.database.db.execute(sql`select detail::text as text from audit_events`);
  expect(JSON.stringify(rows)).not.toContain(token);
});

test('neither search engines nor other sites learn of the link, opened or refused', async () => {
  const { token } = await makeCopy();
  for (const reply of [await open(token), await open('x'.repeat(32))]) {
    expect(reply.headers['x-robots-tag']).toBe('noindex, nofollow');
    expect(reply.headers['referrer-policy']).toBe('no-referrer');
    expect(reply.headers['cache-control']).toBe('no-store');
    expect(reply.headers['set-cookie']).toBeUndefined();
  }
});

test('openings are counted, refused ones not', async () => {
  const { weighUpId, token } = await makeCopy();
  expect(await list(weighUpId)).toMatchObject([{ openings: 0, lastOpenedAt: null }]);
  await open(token).expect(200);
  await open(token).expect(200);
  await open(`${token}x`).expect(404);
  const [copy] = await list(weighUpId);
  expect(copy.openings).toBe(2);
  expect(copy.lastOpenedAt).not.toBeNull();
});

test.each([
  ['invented', 'A'.repeat(32)],
  ['cut short', 'A'],
  ['no link at all', '%27%20or%20true--'],
  ['far too long', 'A'.repeat(400)],
])('a link that is %s is unknown', async (_case, token) => {
  const reply = await open(token);
  expect([reply.status, reply.body]).toEqual([404, unknown]);
});

test('a revoked link is gone at once and stays gone, and the log knows who closed it', async () => {
  const { weighUpId, copyId, token } = await makeCopy();
  const revoked = await advisor.agent.delete(`/api/grower-copies/${copyId}`).expect(200);
  expect(revoked.body.copy.revokedAt).not.toBeNull();
  const reply = await open(token);
  expect([reply.status, reply.body]).toEqual([410, { error: { code: 'link-revoked' } }]);
  const again = await advisor.agent.delete(`/api/grower-copies/${copyId}`).expect(200);
  expect(again.body.copy.revokedAt).toBe(revoked.body.copy.revokedAt);
  expect((await list(weighUpId))[0].openings).toBe(0);
  const events = await world.database.db
    .select()
    .from(auditEvents)
    .where(eq(auditEvents.subjectId, copyId))
    .orderBy(auditEvents.id);
  expect(events.map((event) => [event.action, event.actorId])).toEqual([
    ['grower-copy.made', advisor.id],
    ['grower-copy.revoked', advisor.id],
  ]);
});

test('an expired link says so', async () => {
  const { copyId, token } = await makeCopy();
  await world.database.db.execute(sql`update grower_copies
    set created_at = now() - interval '2 days', expires_at = now() - interval '1 second' where id = ${copyId}`);
  const reply = await open(token);
  expect([reply.status, reply.body]).toEqual([410, { error: { code: 'link-expired' } }]);
});

test('a link lives a year unless told otherwise, and never longer than three', async () => {
  const { weighUpId } = await makeCopy();
  const [copy] = await list(weighUpId);
  const days = (Date.parse(copy.expiresAt) - Date.parse(copy.createdAt)) / 86_400_000;
  expect(days).toBeCloseTo(365, 1);
  const make = (validDays: number) =>
    advisor.agent.post(`/api/weigh-ups/${weighUpId}/grower-copies`).send({ language: 'en', validDays });
  expect((await make(1096)).status).toBe(400);
  expect((await make(0)).status).toBe(400);
  expect((await make(30)).status).toBe(200);
});

test('frozen figures stay when the weigh-up changes', async () => {
  const { weighUpId, token } = await makeCopy();
  const before = (await open(token)).body.snapshot;
  const { weighUp } = (await advisor.agent.get(`/api/weigh-ups/${weighUpId}`)).body;
  await advisor.agent
    .put(`/api/weigh-ups/${weighUpId}`)
    .send({ revision: 1, weighUp: { ...weighUp, growerName: 'Somebody else', areaHectares: 1 } })
    .expect(200);
  expect((await open(token)).body.snapshot).toEqual(before);
});

test('frozen figures stay when a trial is corrected or withdrawn, and the copy says what became of it', async () => {
  const { db } = world.database;
  const { weighUpId, token } = await makeCopy();
  const before = (await open(token)).body.snapshot;
  const [, corrected, withdrawn] = trialIds;
  if (corrected === undefined || withdrawn === undefined) throw new Error('there are four trials');
  await db.execute(sql`update plots set excluded_reason = 'drowned'
    where trial_id = ${corrected} and plot_number = '102'`);
  await republish(db, corrected);
  await withdraw(db, withdrawn);
  const after = (await open(token)).body;
  expect(after.snapshot).toEqual(before);
  const changes = [
    { trialId: corrected, siteName: 'ELM', season: 2023, change: 'corrected' },
    { trialId: withdrawn, siteName: 'ELM', season: 2024, change: 'withdrawn' },
  ];
  expect(after.laterChanges).toHaveLength(2);
  expect(after.laterChanges).toEqual(expect.arrayContaining(changes));
  expect((await list(weighUpId))[0].laterChanges).toEqual(expect.arrayContaining(changes));
  const live = (await advisor.agent.get(`/api/weigh-ups/${weighUpId}`)).body.result;
  expect(live.trials).toHaveLength(3);
  const newer = await makeCopy(weighUpId);
  expect((await open(newer.token)).body.laterChanges).toEqual([]);
});

test('somebody else neither makes, sees nor revokes copies of a weigh-up', async () => {
  const { weighUpId, copyId, token } = await makeCopy();
  const other = await world.signInAs('agronomist', { regionIds: [small.regionIds.north] });
  const replies = [
    await other.agent.get(`/api/weigh-ups/${weighUpId}/grower-copies`),
    await other.agent.post(`/api/weigh-ups/${weighUpId}/grower-copies`).send({ language: 'en' }),
    await other.agent.delete(`/api/grower-copies/${copyId}`),
  ];
  for (const reply of replies)
    expect([reply.status, reply.body]).toEqual([404, { error: { code: 'not-found' } }]);
  await open(token).expect(200);
});

test('the snapshot holds nothing of the account but the name and address of the advisor', async () => {
  const { copyId } = await makeCopy();
  const [row] = await world.database.db.select().from(growerCopies).where(eq(growerCopies.id, copyId));
  expect(JSON.stringify(row?.snapshot)).not.toContain(advisor.id);
});
