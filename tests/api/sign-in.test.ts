import type { verify as verifyHash } from '@node-rs/argon2';
import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test, vi } from 'vitest';
import { sessions, users } from '#drizzle/schema/accounts.ts';
import { testPassword, type ApiWorld } from './api-world.ts';

/** The real thing, counted. */
const verify = vi.fn<typeof verifyHash>();

let world: ApiWorld;
beforeAll(async () => {
  // Files share the modules that are loaded once: those here are loaded anew, around the one that counts.
  vi.resetModules();
  vi.doMock(import('@node-rs/argon2'), async (load) => {
    const real = await load();
    verify.mockImplementation(real.verify);
    return { ...real, verify };
  });
  const { openApiWorld } = await import('./api-world.ts');
  world = await openApiWorld('empty');
});
afterAll(async () => {
  await world.close();
  vi.doUnmock('@node-rs/argon2');
  vi.resetModules();
});

const wrong = { error: { code: 'wrong-credentials' } };

const cookieOf = (response: { headers: Record<string, string | string[] | undefined> }): string =>
  String(response.headers['set-cookie']).split(';')[0] ?? '';

test('the right password opens a session, says who it is and notes when', async () => {
  const { email, id } = await world.signInAs('advisor', { email: 'Wren@Example.org' });
  const agent = world.visitor();
  const reply = await agent
    .post('/api/session')
    .send({ email: '  wren@example.org ', password: testPassword });
  expect(reply.status).toBe(200);
  expect(reply.body).toEqual({
    me: { id, name: 'Test advisor', email, role: 'advisor', language: 'en', regionIds: [], phone: null },
  });
  expect(JSON.stringify(reply.body)).not.toContain('argon2');
  expect(String(reply.headers['set-cookie'])).toMatch(/HttpOnly; SameSite=Lax/);
  expect((await agent.get('/api/me')).body.me.id).toBe(id);
  const [row] = await world.database.db.select().from(users).where(eq(users.id, id));
  expect(row?.lastSignedInAt).not.toBeNull();
  expect(row?.passwordHash).toMatch(/^\$argon2id\$/);
});

test('a wrong password and an unknown address answer alike, and open nothing', async () => {
  const { email } = await world.signInAs('advisor');
  for (const body of [
    { email, password: 'not the password' },
    { email: 'nobody@example.org', password: testPassword },
  ]) {
    const agent = world.visitor();
    const reply = await agent.post('/api/session').send(body);
    expect(reply.status).toBe(401);
    expect(reply.body).toEqual(wrong);
    expect((await agent.get('/api/me')).body).toEqual({ me: null });
  }
});

test('an unknown address costs the same work as a wrong password', async () => {
  const { email } = await world.signInAs('advisor');
  const countChecks = async (address: string): Promise<number> => {
    verify.mockClear();
    await world.visitor().post('/api/session').send({ email: address, password: 'not the password' });
    return verify.mock.calls.length;
  };
  expect(await countChecks(email)).toBe(1);
  expect(await countChecks('stranger@example.org')).toBe(1);
  expect(String(verify.mock.calls[0]?.[0])).toMatch(/^\$argon2id\$v=19\$m=19456,t=2,p=1\$/);
});

test('nobody signed in is no error, and everything else asks to sign in', async () => {
  expect((await world.visitor().get('/api/me')).body).toEqual({ me: null });
  const reply = await world.visitor().get('/api/catalogue');
  expect(reply.status).toBe(401);
  expect(reply.body).toEqual({ error: { code: 'not-signed-in' } });
});

test('a session id planted before signing in opens nothing afterwards', async () => {
  const { email } = await world.signInAs('advisor');
  const planted = `gavelrow=s%3A${'a'.repeat(32)}.${'b'.repeat(43)}`;
  const first = await world
    .visitor()
    .post('/api/session')
    .set('Cookie', planted)
    .send({ email, password: testPassword });
  const own = cookieOf(first);
  expect(own).not.toBe(planted);
  const again = await world
    .visitor()
    .post('/api/session')
    .set('Cookie', own)
    .send({ email, password: testPassword });
  expect(cookieOf(again)).not.toBe(own);
  expect((await world.visitor().get('/api/me').set('Cookie', own)).body).toEqual({ me: null });
  expect((await world.visitor().get('/api/me').set('Cookie', cookieOf(again))).body.me.email).toBe(email);
});

test('signing out ends the session itself, not only the cookie', async () => {
  const { agent } = await world.signInAs('advisor');
  const before = await world.database.db.select().from(sessions);
  const reply = await agent.delete('/api/session');
  expect(reply.status).toBe(200);
  expect(reply.body).toEqual({});
  expect(String(reply.headers['set-cookie'])).toMatch(/gavelrow=;/);
  expect(await world.database.db.select().from(sessions)).toHaveLength(before.length - 1);
  expect((await agent.get('/api/me')).body).toEqual({ me: null });
});

test('signing out without having signed in is no error', async () => {
  expect((await world.visitor().delete('/api/session')).status).toBe(200);
});

test('only who knows the password learns that the account is suspended', async () => {
  const { email, id } = await world.signInAs('advisor');
  await world.database.db.update(users).set({ status: 'suspended' }).where(eq(users.id, id));
  const right = await world.visitor().post('/api/session').send({ email, password: testPassword });
  expect(right.status).toBe(403);
  expect(right.body).toEqual({ error: { code: 'account-suspended' } });
  const other = await world.visitor().post('/api/session').send({ email, password: 'something else' });
  expect(other.body).toEqual(wrong);
});

test('guessing is slowed down by address, and a right password does not count', async () => {
  const { email } = await world.signInAs('advisor');
  const other = await world.signInAs('advisor');
  for (let i = 0; i < 3; i += 1) await world.signIn(email);
  for (let i = 0; i < 10; i += 1) {
    const reply = await world
      .visitor()
      .post('/api/session')
      .send({ email, password: `guess ${i}` });
    expect(reply.status).toBe(401);
  }
  const refused = await world
    .visitor()
    .post('/api/session')
    .send({ email: email.toUpperCase(), password: testPassword });
  expect(refused.status).toBe(429);
  expect(refused.body).toEqual({ error: { code: 'too-many-attempts' } });
  expect(Number(refused.headers['retry-after'])).toBeGreaterThan(0);
  await world.signIn(other.email);
});

test('the language of the account is changed by its owner', async () => {
  const { agent } = await world.signInAs('agronomist');
  const reply = await agent.patch('/api/me').send({ language: 'fr' });
  expect(reply.body.me.language).toBe('fr');
  expect((await agent.get('/api/me')).body.me.language).toBe('fr');
  expect((await agent.patch('/api/me').send({ language: 'de' })).status).toBe(400);
});

test('the phone number of the account is written, changed and taken away by its owner', async () => {
  const { agent } = await world.signInAs('advisor');
  for (const phone of ['+1 (555) 0142', '555-0143', null]) {
    expect((await agent.patch('/api/me').send({ phone })).body.me).toMatchObject({ phone, language: 'en' });
    expect((await agent.get('/api/me')).body.me.phone).toBe(phone);
  }
  for (const phone of ['', '12', 'mobile', '555-0142<b>', '5'.repeat(31)]) {
    expect((await agent.patch('/api/me').send({ phone })).status).toBe(400);
  }
  expect((await agent.get('/api/me')).body.me.phone).toBe(null);
});
