import { asc, eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { userRegions } from '#drizzle/schema/accounts.ts';
import { auditEvents } from '#drizzle/schema/audit.ts';
import type { WeighUp, WeighUpLine } from '#shared/weigh-up.ts';
import { openRecordWorld, type RecordWorld } from './record-world.ts';

let record: RecordWorld;
beforeAll(async () => {
  record = await openRecordWorld();
});
afterAll(() => record.world.close());

const list = async (): Promise<WeighUpLine[]> =>
  (await record.advisor.agent.get('/api/weigh-ups').expect(200)).body.weighUps;

const lineOf = async (id: string): Promise<WeighUpLine | undefined> =>
  (await list()).find((line) => line.id === id);

const archive = (id: string, isArchived: boolean, agent = record.advisor.agent) =>
  agent.put(`/api/weigh-ups/${id}/archived`).send({ isArchived });

const actionsOn = async (id: string): Promise<string[]> => {
  const events = await record.world.database.db
    .select({ action: auditEvents.action })
    .from(auditEvents)
    .where(eq(auditEvents.subjectId, id))
    .orderBy(asc(auditEvents.id));
  return events.map(({ action }) => action);
};

test('a line tells the seasons and what was decided, without the evidence frozen with it', async () => {
  const weighUp = await record.make();
  expect(await lineOf(weighUp.id)).toMatchObject({ seasonFrom: 2023, seasonTo: 2025, decision: null });
  await record.advisor.agent
    .put(`/api/weigh-ups/${weighUp.id}/decision`)
    .send({
      revision: weighUp.revision,
      decision: {
        choice: 'candidate',
        varietyId: record.variety('Birch'),
        areaHectares: 12.5,
        reason: 'paid',
      },
    })
    .expect(200);
  expect((await lineOf(weighUp.id))?.decision).toEqual({
    choice: 'candidate',
    varietyName: 'Birch',
    areaHectares: 12.5,
  });
});

test('an archived weigh-up stays readable, and comes back', async () => {
  const { id } = await record.make();
  await archive(id, true).expect(200);
  const { archivedAt } = (await lineOf(id)) ?? {};
  expect(archivedAt).toEqual(expect.any(String));
  await record.advisor.agent.get(`/api/weigh-ups/${id}`).expect(200);
  // Again changes nothing, not even the moment, and is not told twice.
  expect((await archive(id, true).expect(200)).body).toEqual({ archivedAt });
  expect((await archive(id, false).expect(200)).body).toEqual({ archivedAt: null });
  expect((await lineOf(id))?.archivedAt).toBeNull();
  expect(await actionsOn(id)).toEqual(['weigh-up.archived', 'weigh-up.brought-back']);
});

test('the same question a season later is a weigh-up of its own, without the decision', async () => {
  // Nothing of the question as it would be without being said.
  const asked = await record.make({
    ...{ seasonFrom: 2022, seasonTo: 2024, usualYield: 4.5, question: 'best' },
    ...{ farmLatitude: 50, farmLongitude: -100, farmSeasonRainMm: 240, farmHeatSumDegreeDays: 1450 },
    ...{ farmSoilTexture: 'clay-loam', trialChoice: 'nearest', includeNeighbours: true },
  });
  const tickedOff = [{ trialId: record.trialIds.get('elm 2024') ?? '', reason: 'hail' }];
  const first: WeighUp = (
    await record.advisor.agent
      .put(`/api/weigh-ups/${asked.id}/ticked-off`)
      .send({ revision: 1, tickedOff })
      .expect(200)
  ).body.weighUp;
  await record.advisor.agent
    .put(`/api/weigh-ups/${first.id}/decision`)
    .send({
      revision: 2,
      decision: { choice: 'current', varietyId: null, areaHectares: 42, reason: 'not settled' },
    })
    .expect(200);
  await archive(first.id, true).expect(200);
  const made = await record.advisor.agent.post(`/api/weigh-ups/${first.id}/duplicates`).expect(200);
  const { weighUp } = made.body;
  const { id: _id, createdAt: _created, updatedAt: _updated, ...question } = first;
  expect(question).toMatchObject({ tickedOff, question: 'best', trialChoice: 'nearest' });
  expect(weighUp).toMatchObject({ ...question, seasonFrom: 2023, seasonTo: 2025, revision: 1 });
  expect(weighUp.id).not.toBe(first.id);
  expect(await lineOf(weighUp.id)).toMatchObject({ decision: null, archivedAt: null, candidates: 2 });
  expect(await lineOf(first.id)).toMatchObject({ seasonFrom: 2022, seasonTo: 2024 });
  const { body } = await record.advisor.agent.get(`/api/weigh-ups/${weighUp.id}/decision`).expect(200);
  expect(body).toMatchObject({ decision: null, earlier: [{ weighUpId: first.id }] });
  expect(await actionsOn(weighUp.id)).toEqual(['weigh-up.duplicated']);
});

test('somebody else’s weigh-up can be neither put away nor carried on', async () => {
  const { id } = await record.make();
  await archive(id, true, record.other.agent).expect(404);
  await record.other.agent.post(`/api/weigh-ups/${id}/duplicates`).expect(404);
  expect((await lineOf(id))?.archivedAt).toBeNull();
});

test('no new question is asked in a region that was taken away', async () => {
  const { id } = await record.make();
  const { db } = record.world.database;
  await db.delete(userRegions).where(eq(userRegions.userId, record.advisor.id));
  const refused = await record.advisor.agent.post(`/api/weigh-ups/${id}/duplicates`);
  await db.insert(userRegions).values({ userId: record.advisor.id, regionId: record.small.regionIds.north });
  expect(refused.body.error.code).toBe('region-not-yours');
});
