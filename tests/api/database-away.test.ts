import { sql } from 'drizzle-orm';
import type pg from 'pg';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { weighUps } from '#drizzle/schema/weigh-ups.ts';
import { connectDatabase, isDatabaseAway, openSocketWithin } from '#server/db.ts';
import { say } from '#tests/support/say.ts';
import { createTestDatabase, type TestDatabase } from '#tests/support/test-database.ts';
import { buildWorld, testPassword, type ApiWorld, type SignedIn } from './api-world.ts';
import { openDatabaseProxy, type DatabaseProxy } from './database-proxy.ts';
import { askSmallQuestion } from './small-question.ts';
import { foundSmallWorld, idIn, type SmallWorld } from './small-world.ts';
import { waitForBlocked } from './wait-for-blocked.ts';

let direct: TestDatabase;
let proxy: DatabaseProxy;
let world: ApiWorld;
let small: SmallWorld;
let advisor: SignedIn;

beforeAll(async () => {
  direct = await createTestDatabase();
  proxy = await openDatabaseProxy(direct.url);
  const through = connectDatabase(proxy.url, () => undefined);
  world = buildWorld({ ...through, url: proxy.url });
  small = await foundSmallWorld(direct.db);
  advisor = await world.signInAs('advisor', { regionIds: [small.regionIds.north] });
});
afterAll(async () => {
  await world.close();
  await proxy.close();
  await direct.close();
});

/** The API on the line that can be cut, with connections of its own. */
async function withPool(
  waits: { reach: number; turn: number },
  work: (visitor: ReturnType<ApiWorld['visitor']>, pool: pg.Pool) => Promise<void>,
): Promise<void> {
  const through = connectDatabase(proxy.url, () => undefined, waits);
  try {
    await work(buildWorld({ ...through, url: proxy.url }).visitor(), through.pool);
  } finally {
    await through.close();
  }
}

const away = { error: { code: 'database-away' } };

const question = (growerName: string) => askSmallQuestion(small, { seasonFrom: 2024, growerName });

test('while the database is away every answer is 503 with when to try again; afterwards all is as before', async () => {
  await advisor.agent.get('/api/catalogue').expect(200);
  proxy.cut();
  for (const reply of [
    await advisor.agent.get('/api/catalogue'),
    await advisor.agent.get('/api/weigh-ups'),
    await world.visitor().post('/api/session').send({ email: advisor.email, password: testPassword }),
    await world.visitor().get('/api/health'),
  ]) {
    expect([reply.status, reply.body]).toEqual([503, away]);
    expect(Number(reply.headers['retry-after'])).toBeGreaterThan(0);
  }
  const copy = await world
    .visitor()
    .get(`/copy/${'A'.repeat(32)}?lang=fr`)
    .expect(503);
  expect(copy.headers['content-type']).toMatch(/^text\/html/);
  expect(copy.text).toContain(say('fr', 'copy:failed.away.title'));
  proxy.restore();
  await advisor.agent.get('/api/catalogue').expect(200);
  await world.signIn(advisor.email);
});

test('failed sign-ins while the database was away do not count as guesses', async () => {
  proxy.cut();
  for (let i = 0; i < 12; i += 1)
    await world
      .visitor()
      .post('/api/session')
      .send({ email: advisor.email, password: testPassword })
      .expect(503);
  proxy.restore();
  await world.signIn(advisor.email);
});

test('a save that loses the database on its way stores nothing by half', async () => {
  const made = await advisor.agent.post('/api/weigh-ups').send(question('Before')).expect(200);
  const id: string = made.body.weighUp.id;
  // A lock on the candidates stops the save in its middle: the head is written, the candidates are not.
  const holder = await direct.pool.connect();
  await holder.query('begin; lock table weigh_up_candidates in access exclusive mode');
  const saving = advisor.agent
    .put(`/api/weigh-ups/${id}`)
    .send({ revision: 1, weighUp: question('After') })
    .then((reply) => reply);
  await waitForBlocked(direct.db, 1);
  proxy.cut();
  const reply = await saving;
  expect([reply.status, reply.body]).toEqual([503, away]);
  await holder.query('rollback');
  holder.release();
  proxy.restore();
  const read = (await advisor.agent.get(`/api/weigh-ups/${id}`).expect(200)).body.weighUp;
  expect(read).toMatchObject({
    revision: 1,
    growerName: 'Before',
    candidateIds: [idIn(small.varietyIds, 'Birch')],
  });
});

test('a connection that the server of the database ends is replaced without a restart', async () => {
  await advisor.agent.get('/api/weigh-ups').expect(200);
  await direct.db.execute(sql`select pg_terminate_backend(pid) from pg_stat_activity
    where datname = current_database() and pid <> pg_backend_pid()`);
  const replies = [];
  for (let i = 0; i < 3; i += 1) replies.push((await advisor.agent.get('/api/weigh-ups')).status);
  expect(replies.at(-1)).toBe(200);
  for (const status of replies) expect([200, 503]).toContain(status);
  expect(await direct.db.$count(weighUps)).toBeGreaterThan(0);
});

test('a database that is reached but slow to answer is waited for', async () => {
  await withPool({ reach: 200, turn: 10_000 }, async (visitor) => {
    proxy.delay(600);
    await visitor.get('/api/health').expect(200);
    proxy.delay(0);
  });
});

test('where all connections stay taken the answer is that too much is asked, not that the data are away', async () => {
  await withPool({ reach: 3000, turn: 2500 }, async (visitor, pool) => {
    const taken = await Promise.all(Array.from({ length: pool.options.max ?? 0 }, () => pool.connect()));
    const reply = await visitor.get('/api/health');
    expect([reply.status, reply.body]).toEqual([503, { error: { code: 'busy' } }]);
    expect(Number(reply.headers['retry-after'])).toBeGreaterThan(0);
    for (const client of taken) client.release();
    await visitor.get('/api/health').expect(200);
  });
});

test('a server that no line reaches is given up after the short wait, however long a turn may take', async () => {
  const socket = openSocketWithin(50);
  const failed = new Promise((resolve) => socket.once('error', resolve));
  expect(isDatabaseAway(await failed)).toBe(true);
});
