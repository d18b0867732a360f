import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { weighUpCandidates, weighUps } from '#drizzle/schema/weigh-ups.ts';
import { openApiWorld, type ApiWorld, type SignedIn } from './api-world.ts';
import { askSmallQuestion } from './small-question.ts';
import { foundSmallWorld, idIn, publishLevelSeasons, type SmallWorld } from './small-world.ts';

let world: ApiWorld;
let small: SmallWorld;
let advisor: SignedIn;
beforeAll(async () => {
  world = await openApiWorld('empty');
  small = await foundSmallWorld(world.database.db);
  await publishLevelSeasons(world.database.db, small, [2024, 2025]);
  advisor = await world.signInAs('advisor', { regionIds: [small.regionIds.north] });
});
afterAll(() => world.close());

const variety = (name: string): string => idIn(small.varietyIds, name);
const unknownId = '00000000-0000-4000-8000-000000000000';

const question = (change: Record<string, unknown> = {}) => ({
  ...askSmallQuestion(small, {
    seasonFrom: 2024,
    growerName: ' Ada Quern ',
    candidateIds: [variety('Dogwood'), variety('Birch')],
  }),
  ...change,
});

const make = async (person: SignedIn = advisor): Promise<string> =>
  (await person.agent.post('/api/weigh-ups').send(question()).expect(200)).body.weighUp.id;

test('a weigh-up is stored as asked, candidates in the advisor’s order, and read back with its answer', async () => {
  const made = await advisor.agent.post('/api/weigh-ups').send(question()).expect(200);
  expect(made.body.weighUp).toMatchObject({
    revision: 1,
    ownerName: 'Test advisor',
    cropName: { en: 'barley', fr: 'barley (fr)' },
    regionName: { en: 'north', fr: 'north (fr)' },
    growerName: 'Ada Quern',
    currentVarietyName: 'Anchor',
    candidateIds: [variety('Dogwood'), variety('Birch')],
    assumptions: question().assumptions,
  });
  expect(made.body.weighUp).not.toHaveProperty('ownerId');
  const read = await advisor.agent.get(`/api/weigh-ups/${made.body.weighUp.id}`).expect(200);
  expect(read.body.weighUp).toEqual(made.body.weighUp);
  expect(read.body.result.candidates.map((one: { varietyName: string }) => one.varietyName)).toEqual([
    'Dogwood',
    'Birch',
  ]);
});

test('the list is one’s own, last changed first', async () => {
  const person = await world.signInAs('agronomist', { regionIds: [small.regionIds.north] });
  const first = await make(person);
  const second = await make(person);
  await person.agent
    .put(`/api/weigh-ups/${first}`)
    .send({ revision: 1, weighUp: question({ growerName: 'Bo' }) })
    .expect(200);
  const { weighUps: lines } = (await person.agent.get('/api/weigh-ups').expect(200)).body;
  expect(lines.map((line: { id: string }) => line.id)).toEqual([first, second]);
  expect(lines[0]).toMatchObject({ growerName: 'Bo', currentVarietyName: 'Anchor', candidates: 2 });
});

test('a change counts the revision up; who looked at an older one is refused, and nothing is stored by half', async () => {
  const id = await make();
  const changed = await advisor.agent
    .put(`/api/weigh-ups/${id}`)
    .send({
      revision: 1,
      weighUp: question({ candidateIds: [variety('Elder')], areaHectares: 7 }),
    })
    .expect(200);
  expect(changed.body.weighUp).toMatchObject({
    revision: 2,
    areaHectares: 7,
    candidateIds: [variety('Elder')],
  });
  expect(changed.body.result.candidates).toHaveLength(1);
  const late = await advisor.agent.put(`/api/weigh-ups/${id}`).send({ revision: 1, weighUp: question() });
  expect([late.status, late.body.error.code]).toEqual([409, 'revision-conflict']);
  const wrong = await advisor.agent
    .put(`/api/weigh-ups/${id}`)
    .send({ revision: 2, weighUp: question({ candidateIds: [small.otherVarietyId], areaHectares: 9 }) });
  expect([wrong.status, wrong.body.error.code]).toEqual([422, 'variety-not-of-crop']);
  const read = (await advisor.agent.get(`/api/weigh-ups/${id}`)).body.weighUp;
  expect(read).toMatchObject({ revision: 2, areaHectares: 7, candidateIds: [variety('Elder')] });
});

test('two saves of the same revision at the same moment: one is stored, the other told', async () => {
  const id = await make();
  const replies = await Promise.all(
    ['One', 'Two'].map((growerName) =>
      advisor.agent.put(`/api/weigh-ups/${id}`).send({ revision: 1, weighUp: question({ growerName }) }),
    ),
  );
  expect(replies.map((reply) => reply.status).sort()).toEqual([200, 409]);
});

test('somebody else’s weigh-up answers like one that does not exist', async () => {
  const id = await make();
  const other = await world.signInAs('advisor', { regionIds: [small.regionIds.north] });
  const strange = await other.agent.get(`/api/weigh-ups/${id}`);
  const absent = await other.agent.get(`/api/weigh-ups/${unknownId}`);
  expect([strange.status, strange.body]).toEqual([404, { error: { code: 'not-found' } }]);
  expect([absent.status, absent.body]).toEqual([404, { error: { code: 'not-found' } }]);
  const change = await other.agent.put(`/api/weigh-ups/${id}`).send({ revision: 1, weighUp: question() });
  expect(change.status).toBe(404);
  for (const path of [`/api/weigh-ups/${id}/grower-copies`])
    expect((await other.agent.get(path)).status).toBe(404);
});

test('new questions are asked in one’s own regions only', async () => {
  const south = { regionId: small.regionIds.south };
  const made = await advisor.agent.post('/api/weigh-ups').send(question(south));
  expect([made.status, made.body.error.code]).toEqual([403, 'region-not-yours']);
  const id = await make();
  const moved = await advisor.agent
    .put(`/api/weigh-ups/${id}`)
    .send({ revision: 1, weighUp: question(south) });
  expect([moved.status, moved.body.error.code]).toEqual([403, 'region-not-yours']);
  const { cropId, currentVarietyId, seasonFrom, seasonTo } = question();
  const candidates = await advisor.agent
    .get('/api/candidates')
    .query({ cropId, currentVarietyId, seasonFrom, seasonTo, ...south });
  expect([candidates.status, candidates.body.error.code]).toEqual([403, 'region-not-yours']);
});

test('what was weighed before a region was taken away stays readable', async () => {
  const person = await world.signInAs('advisor', { regionIds: [small.regionIds.north] });
  const id = await make(person);
  const chief = await world.signInAs('administrator');
  await chief.agent.patch(`/api/accounts/${person.id}`).send({ regionIds: [] }).expect(200);
  await person.agent.get(`/api/weigh-ups/${id}`).expect(200);
  const change = await person.agent.put(`/api/weigh-ups/${id}`).send({ revision: 1, weighUp: question() });
  expect(change.body.error.code).toBe('region-not-yours');
});

test.each<[string, Record<string, unknown>, string, string?]>([
  ['text where an area belongs', { areaHectares: 'large' }, 'areaHectares', 'invalid_type'],
  ['an area of nothing', { areaHectares: 0 }, 'areaHectares', 'too_small'],
  ['no grower', { growerName: '   ' }, 'growerName', 'too_small'],
  ['seasons the wrong way round', { seasonFrom: 2025, seasonTo: 2024 }, 'seasonTo', 'season-order'],
  ['no candidate', { candidateIds: [] }, 'candidateIds', 'too_small'],
  ['a crop that does not exist', { cropId: unknownId }, 'cropId', 'invalid_value'],
])('%s is refused and marked', async (_case, change, path, reason) => {
  const before = await world.database.db.$count(weighUps);
  const reply = await advisor.agent.post('/api/weigh-ups').send(question(change));
  expect(reply.status).toBe(400);
  expect(reply.body.error).toMatchObject({ code: 'invalid-input', issues: [{ path, reason }] });
  expect(await world.database.db.$count(weighUps)).toBe(before);
});

test('a candidate chosen twice, or weighed against itself, is refused by name', async () => {
  const twice = await advisor.agent
    .post('/api/weigh-ups')
    .send(question({ candidateIds: [variety('Birch'), variety('Birch')] }));
  expect(twice.body.error.issues).toMatchObject([{ path: 'candidateIds', reason: 'candidate-twice' }]);
  const itself = await advisor.agent
    .post('/api/weigh-ups')
    .send(question({ candidateIds: [variety('Anchor')] }));
  expect(itself.body.error.issues).toMatchObject([{ path: 'candidateIds', reason: 'candidate-is-current' }]);
});

test('a variety of another crop is refused, and nothing of the weigh-up is stored', async () => {
  const before = [
    await world.database.db.$count(weighUps),
    await world.database.db.$count(weighUpCandidates),
  ];
  const reply = await advisor.agent
    .post('/api/weigh-ups')
    .send(question({ candidateIds: [variety('Birch'), small.otherVarietyId] }));
  expect([reply.status, reply.body.error.code]).toEqual([422, 'variety-not-of-crop']);
  expect([
    await world.database.db.$count(weighUps),
    await world.database.db.$count(weighUpCandidates),
  ]).toEqual(before);
});

test('prices out of order are refused by name', async () => {
  const { assumptions } = question();
  const reply = await advisor.agent
    .post('/api/weigh-ups')
    .send(question({ assumptions: { ...assumptions, priceLow: 900 } }));
  expect(reply.body.error.issues).toMatchObject([{ path: 'assumptions.priceMiddle', reason: 'price-order' }]);
});

test('a cost that nobody pays is refused where it stands; one that was saved before there were limits still opens', async () => {
  const dear = { seedPerHectare: 999_999, treatmentPerHectare: 0, royaltyPerHectare: 0 };
  const assumptions = { ...question().assumptions, seedCosts: { [variety('Birch')]: dear } };
  const refused = await advisor.agent.post('/api/weigh-ups').send(question({ assumptions }));
  expect(refused.status).toBe(400);
  expect(refused.body.error.issues).toMatchObject([
    { path: `assumptions.seedCosts.${variety('Birch')}.seedPerHectare`, reason: 'over-crop-worth' },
  ]);
  const weighUpId = await make();
  await world.database.db.update(weighUps).set({ assumptions }).where(eq(weighUps.id, weighUpId));
  const opened = await advisor.agent.get(`/api/weigh-ups/${weighUpId}`).expect(200);
  expect(opened.body.weighUp.assumptions.seedCosts).toEqual({ [variety('Birch')]: dear });
  const next = await advisor.agent.post(`/api/weigh-ups/${weighUpId}/duplicates`).expect(200);
  expect(next.body.weighUp.assumptions.seedCosts).toEqual({ [variety('Birch')]: dear });
});
