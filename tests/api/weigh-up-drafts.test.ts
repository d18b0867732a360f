import { afterAll, beforeAll, expect, test } from 'vitest';
import type { DraftContent, WeighUpDraft } from '#shared/weigh-up-draft.ts';
import { openRecordWorld, type RecordWorld } from './record-world.ts';

let record: RecordWorld;
beforeAll(async () => {
  record = await openRecordWorld();
});
afterAll(() => record.world.close());

const content = (change: Partial<DraftContent> = {}): DraftContent => ({
  question: 'crop=barley&region=north',
  growerName: 'Ada',
  farmName: '',
  areaHectares: null,
  usualYield: null,
  priceLow: null,
  priceMiddle: 255.5,
  priceHigh: null,
  ...change,
});

const create = async (): Promise<WeighUpDraft> =>
  (await record.advisor.agent.post('/api/weigh-up-drafts').send({ content: content() }).expect(200)).body
    .draft;

const list = async (agent = record.advisor.agent): Promise<WeighUpDraft[]> =>
  (await agent.get('/api/weigh-up-drafts').expect(200)).body.drafts;

const save = ({ id }: WeighUpDraft, revision: number, agent = record.advisor.agent) =>
  agent.put(`/api/weigh-up-drafts/${id}`).send({ revision, content: content({ farmName: 'Low Field' }) });

test('a draft is kept, written on, listed newest first and deleted', async () => {
  const [first, second] = [await create(), await create()];
  const { draft } = (await save(first, 1).expect(200)).body;
  expect(draft).toMatchObject({ id: first.id, revision: 2, content: content({ farmName: 'Low Field' }) });
  expect((await list()).map(({ id }) => id)).toEqual([first.id, second.id]);
  for (const { id } of [first, second])
    await record.advisor.agent.delete(`/api/weigh-up-drafts/${id}`).expect(200);
  expect(await list()).toEqual([]);
});

test('two tabs do not write over each other', async () => {
  const draft = await create();
  await save(draft, 1).expect(200);
  expect((await save(draft, 1).expect(409)).body.error.code).toBe('revision-conflict');
});

test('a draft is one’s own', async () => {
  const draft = await create();
  await save(draft, 1, record.other.agent).expect(404);
  await record.other.agent.delete(`/api/weigh-up-drafts/${draft.id}`).expect(200);
  expect(await list(record.other.agent)).toEqual([]);
  expect((await list()).map(({ id }) => id)).toContain(draft.id);
});

test('a draft is gone once its weigh-up is made, and stays where that is refused', async () => {
  const draft = await create();
  const url = `/api/weigh-ups?draftId=${draft.id}`;
  const wrong = record.question({ candidateIds: [record.small.otherVarietyId] });
  const refused = await record.advisor.agent.post(url).send(wrong);
  expect(refused.body.error.code).toBe('variety-not-of-crop');
  expect((await list()).map(({ id }) => id)).toContain(draft.id);
  await record.advisor.agent.post(url).send(record.question()).expect(200);
  expect((await list()).map(({ id }) => id)).not.toContain(draft.id);
});
