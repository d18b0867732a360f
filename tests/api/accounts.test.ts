import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { sessions, users } from '#drizzle/schema/accounts.ts';
import { auditEvents } from '#drizzle/schema/audit.ts';
import { regions } from '#drizzle/schema/geography.ts';
import type { Account } from '#shared/account.ts';
import { createFirstAdministrator } from '#server/accounts/first-administrator.ts';
import { openApiWorld, testPassword, type ApiWorld, type SignedIn } from './api-world.ts';
import { waitForBlocked } from './wait-for-blocked.ts';

let world: ApiWorld;
let chief: SignedIn;
let regionId: string;
beforeAll(async () => {
  world = await openApiWorld('empty');
  chief = await world.signInAs('administrator');
  const [region] = await world.database.db
    .insert(regions)
    .values({ slug: 'upper', nameEn: 'Upper', nameFr: 'Haut' })
    .returning({ id: regions.id });
  regionId = region?.id ?? '';
});
afterAll(() => world.close());

const newcomer = (email: string) => ({
  name: 'Ines Torvald',
  email,
  password: 'a long enough password',
  role: 'advisor',
  language: 'fr',
  regionIds: [regionId],
});

const listEvents = (subjectId: string) =>
  world.database.db
    .select()
    .from(auditEvents)
    .where(eq(auditEvents.subjectId, subjectId))
    .orderBy(auditEvents.id);

test('an administrator creates an account, which can sign in at once and stands in the list', async () => {
  const reply = await chief.agent.post('/api/accounts').send(newcomer('Ines@Example.org'));
  expect(reply.status).toBe(200);
  expect(reply.body.account).toMatchObject({
    email: 'ines@example.org',
    role: 'advisor',
    language: 'fr',
    status: 'active',
    regionIds: [regionId],
    lastSignedInAt: null,
  });
  expect(JSON.stringify(reply.body)).not.toMatch(/password/i);
  await world.signIn('ines@example.org', 'a long enough password');
  const list = await chief.agent.get('/api/accounts');
  expect(list.body.accounts.map((account: Account) => account.email)).toContain('ines@example.org');
  const [event] = await listEvents(reply.body.account.id);
  expect(event).toMatchObject({ action: 'account.created', actorId: chief.id });
  expect(JSON.stringify(event?.detail)).not.toMatch(/password/i);
});

test('an address is taken whatever its case, and nothing of the second account stays', async () => {
  await chief.agent.post('/api/accounts').send(newcomer('taken@example.org')).expect(200);
  const before = await world.database.db.$count(users);
  const reply = await chief.agent.post('/api/accounts').send(newcomer('TAKEN@example.org'));
  expect(reply.status).toBe(409);
  expect(reply.body).toEqual({ error: { code: 'email-taken' } });
  expect(await world.database.db.$count(users)).toBe(before);
});

test('a region that does not exist is refused by name, and no account stays behind', async () => {
  const reply = await chief.agent
    .post('/api/accounts')
    .send({ ...newcomer('nowhere@example.org'), regionIds: ['00000000-0000-4000-8000-000000000000'] });
  expect(reply.status).toBe(400);
  expect(reply.body.error).toMatchObject({
    code: 'invalid-input',
    issues: [{ path: 'regionIds', reason: 'invalid_value' }],
  });
  expect(await world.database.db.$count(users, eq(users.email, 'nowhere@example.org'))).toBe(0);
});

test('a short password and an address that is none are each marked', async () => {
  const reply = await chief.agent
    .post('/api/accounts')
    .send({ ...newcomer('not an address'), password: 'short' });
  expect(reply.status).toBe(400);
  expect(reply.body.error.issues.map((issue: { path: string }) => issue.path).sort()).toEqual([
    'email',
    'password',
  ]);
});

test('role, language and regions change, and the log says from what to what', async () => {
  const person = await world.signInAs('advisor');
  const reply = await chief.agent
    .patch(`/api/accounts/${person.id}`)
    .send({ role: 'agronomist', regionIds: [regionId] });
  expect(reply.body.account).toMatchObject({ role: 'agronomist', regionIds: [regionId] });
  expect((await person.agent.get('/api/me')).body.me).toMatchObject({
    role: 'agronomist',
    regionIds: [regionId],
  });
  expect((await listEvents(person.id)).at(-1)).toMatchObject({
    action: 'account.changed',
    detail: {
      role: { before: 'advisor', after: 'agronomist' },
      regionIds: { before: [], after: [regionId] },
    },
  });
});

test('a suspended account is signed out everywhere at once, and can be brought back', async () => {
  const person = await world.signInAs('advisor');
  const phone = await world.signIn(person.email);
  await chief.agent.patch(`/api/accounts/${person.id}`).send({ status: 'suspended' }).expect(200);
  const left = await world.database.db.$count(
    sessions,
    sql`${sessions.sess} -> 'passport' ->> 'user' = ${person.id}`,
  );
  expect(left).toBe(0);
  for (const agent of [person.agent, phone]) expect((await agent.get('/api/catalogue')).status).toBe(401);
  await chief.agent.patch(`/api/accounts/${person.id}`).send({ status: 'active' }).expect(200);
  expect((await person.agent.get('/api/catalogue')).status).toBe(401);
  await world.signIn(person.email);
  expect((await listEvents(person.id)).map((event) => event.action)).toEqual([
    'account.suspended',
    'account.brought-back',
  ]);
});

test('nobody suspends or demotes themselves', async () => {
  await world.signInAs('administrator');
  for (const change of [{ status: 'suspended' }, { role: 'advisor' }]) {
    const reply = await chief.agent.patch(`/api/accounts/${chief.id}`).send(change);
    expect(reply.status).toBe(409);
    expect(reply.body).toEqual({ error: { code: 'own-account' } });
  }
  const language = await chief.agent.patch(`/api/accounts/${chief.id}`).send({ language: 'fr' });
  expect(language.status).toBe(200);
});

test('the last active administrator stays, also when two suspend each other at the same moment', async () => {
  const other = await world.signInAs('administrator');
  const { db } = world.database;
  await db
    .update(users)
    .set({ status: 'suspended' })
    .where(
      sql`${users.role} = 'administrator' and ${users.id} not in (${chief.id}::uuid, ${other.id}::uuid)`,
    );
  // The log is held shut, so that both have looked and neither is done before both go on.
  const holder = await world.database.pool.connect();
  await holder.query('begin; lock table audit_events in access exclusive mode');
  const suspensions = Promise.all([
    chief.agent.patch(`/api/accounts/${other.id}`).send({ status: 'suspended' }),
    other.agent.patch(`/api/accounts/${chief.id}`).send({ status: 'suspended' }),
  ]);
  await waitForBlocked(db, 2);
  await holder.query('rollback');
  holder.release();
  const replies = await suspensions;
  expect(replies.filter((reply) => reply.status === 200)).toHaveLength(1);
  expect(await db.$count(users, sql`role = 'administrator' and status = 'active'`)).toBe(1);
  await db.update(users).set({ status: 'active' }).where(eq(users.id, chief.id));
  await db.delete(sessions);
  await db.update(users).set({ status: 'suspended' }).where(eq(users.id, other.id));
  chief = { ...chief, agent: await world.signIn(chief.email) };
  const alone = await chief.agent.patch(`/api/accounts/${chief.id}`).send({ role: 'advisor' });
  expect(alone.body).toEqual({ error: { code: 'last-administrator' } });
});

test('an account that does not exist, and an id that is none, are not found', async () => {
  for (const id of ['00000000-0000-4000-8000-000000000000', 'nonsense', '1']) {
    const reply = await chief.agent.patch(`/api/accounts/${id}`).send({ language: 'fr' });
    expect(reply.status).toBe(404);
    expect(reply.body).toEqual({ error: { code: 'not-found' } });
  }
});

test('a change that changes nothing leaves no line in the log', async () => {
  const person = await world.signInAs('advisor');
  await chief.agent.patch(`/api/accounts/${person.id}`).send({ language: 'en' }).expect(200);
  await chief.agent.patch(`/api/accounts/${person.id}`).send({}).expect(200);
  expect(await listEvents(person.id)).toEqual([]);
});

test('fields that the contract does not name are neither stored nor shown', async () => {
  const person = await world.signInAs('advisor');
  await chief.agent
    .patch(`/api/accounts/${person.id}`)
    .send({ language: 'fr', email: 'stolen@example.org', passwordHash: 'x' })
    .expect(200);
  await world.signIn(person.email, testPassword);
});

test('the log is read newest first, page by page, and the database refuses to change it', async () => {
  const person = await world.signInAs('advisor');
  const event = {
    actorId: chief.id,
    action: 'account.changed',
    subjectKind: 'account',
    subjectId: person.id,
  };
  await world.database.db.insert(auditEvents).values(Array.from({ length: 110 }, () => event));
  const first = await chief.agent.get('/api/audit-events');
  expect(first.body.events).toHaveLength(100);
  expect(first.body.events[0]).toMatchObject({
    actorName: 'Test administrator',
    action: 'account.changed',
    subjectKind: 'account',
    subjectId: person.id,
  });
  const ids = first.body.events.map((event: { id: number }) => event.id);
  expect(ids).toEqual([...ids].sort((a, b) => b - a));
  const second = await chief.agent.get('/api/audit-events').query({ before: ids.at(-1) });
  expect(second.body.events[0].id).toBeLessThan(ids.at(-1));
  await expect(world.database.db.execute(sql`delete from audit_events`)).rejects.toThrow();
});

test('the first administrator is made by the command, and only where there is none', async () => {
  const fresh = await openApiWorld('empty');
  const typed = {
    name: 'Ama Verrin',
    email: 'ama@example.org',
    password: 'a long enough password',
    language: 'en',
  };
  const { db } = fresh.database;
  await expect(createFirstAdministrator(db, { ...typed, password: 'short' })).rejects.toMatchObject({
    code: 'invalid-input',
    issues: [{ path: 'password' }],
  });
  const made = await createFirstAdministrator(db, typed);
  expect(made).toMatchObject({ role: 'administrator', status: 'active' });
  await fresh.signIn(typed.email, typed.password);
  await expect(createFirstAdministrator(db, { ...typed, email: 'other@example.org' })).rejects.toMatchObject({
    code: 'state-conflict',
  });
  await fresh.close();
});
