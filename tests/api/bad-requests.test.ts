import { afterAll, beforeAll, expect, test } from 'vitest';
import { openApiWorld, testPassword, type ApiWorld, type SignedIn } from './api-world.ts';

let world: ApiWorld;
let chief: SignedIn;
beforeAll(async () => {
  world = await openApiWorld('empty');
  chief = await world.signInAs('administrator');
});
afterAll(() => world.close());

const outcome = (reply: { status: number; body: { error?: { code?: string } } }) => [
  reply.status,
  reply.body.error?.code,
];

test('JSON that is none is refused without a word about the server', async () => {
  const reply = await chief.agent
    .post('/api/accounts')
    .set('Content-Type', 'application/json')
    .send('{"name": "Ines",');
  expect(outcome(reply)).toEqual([400, 'invalid-input']);
  expect(JSON.stringify(reply.body)).not.toMatch(/SyntaxError|at position|node_modules/);
});

test.each([
  ['a list', '[]'],
  ['a word', '"accounts"'],
  ['nothing', 'null'],
])('%s in place of an object is refused', async (_case, text) => {
  const reply = await chief.agent.post('/api/accounts').set('Content-Type', 'application/json').send(text);
  expect(outcome(reply)).toEqual([400, 'invalid-input']);
});

test('a form in place of JSON is refused', async () => {
  const reply = await world
    .visitor()
    .post('/api/session')
    .type('form')
    .send({ email: chief.email, password: testPassword });
  expect(outcome(reply)).toEqual([400, 'invalid-input']);
});

test('a body that is too large is not read to its end', async () => {
  const reply = await chief.agent.post('/api/accounts').send({ name: 'x'.repeat(300 * 1024) });
  expect(outcome(reply)).toEqual([413, 'body-too-large']);
});

test.each([
  ['another site', { 'Sec-Fetch-Site': 'cross-site' }],
  ['another port of the same host', { 'Sec-Fetch-Site': 'same-site' }],
  ['another origin, from a browser that says only that', { Origin: 'https://elsewhere.example.org' }],
  ['an origin that hides itself', { Origin: 'null' }],
])('a change that %s starts is refused, whoever is signed in', async (_case, headers) => {
  const reply = await chief.agent.patch('/api/me').set(headers).send({ language: 'fr' });
  expect(outcome(reply)).toEqual([403, 'cross-site-request']);
  expect((await chief.agent.get('/api/me')).body.me.language).toBe('en');
});

test('a change from our own page goes through, and reading is not barred', async () => {
  const headers = { 'Sec-Fetch-Site': 'same-origin' };
  expect((await chief.agent.patch('/api/me').set(headers).send({ language: 'en' })).status).toBe(200);
  expect((await chief.agent.get('/api/me').set({ 'Sec-Fetch-Site': 'cross-site' })).status).toBe(200);
});

test.each([
  ['GET', '/api/nothing-here'],
  ['POST', '/api/catalogue'],
  ['GET', '/api/accounts/1/passwords'],
] as const)('%s %s is not found, as JSON', async (method, path) => {
  const reply = method === 'GET' ? await chief.agent.get(path) : await chief.agent.post(path).send({});
  expect(outcome(reply)).toEqual([404, 'not-found']);
});

test('a path that cannot be decoded is refused, not a failure of the server', async () => {
  const reply = await chief.agent.get('/api/trials/%E0%A4%A');
  expect(reply.status).toBe(400);
});

test('a query that repeats a name is refused where one value belongs', async () => {
  const reply = await chief.agent.get('/api/audit-events?before=1&before=2');
  expect(outcome(reply)).toEqual([400, 'invalid-input']);
});

test('text that a database cannot store is refused, not a failure of the server', async () => {
  const reply = await chief.agent.post('/api/accounts').send({
    name: 'Ines\u0000Torvald',
    email: 'ines@example.org',
    password: 'a long enough password',
    role: 'advisor',
    language: 'en',
    regionIds: [],
  });
  expect(outcome(reply)).toEqual([400, 'invalid-input']);
});

test('answers of the API are never kept by a cache and never sniffed for another type', async () => {
  const reply = await chief.agent.get('/api/me');
  expect(reply.headers['cache-control']).toBe('no-store');
  expect(reply.headers['x-content-type-options']).toBe('nosniff');
  expect(reply.headers['x-powered-by']).toBeUndefined();
});
