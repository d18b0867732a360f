import { afterAll, beforeAll, expect, test } from 'vitest';
import type { TickedOffTrial, WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import { readWords } from '#tests/support/read-copy-page.ts';
import { say } from '#tests/support/say.ts';
import { openRecordWorld, type RecordWorld } from './record-world.ts';

let record: RecordWorld;
beforeAll(async () => {
  record = await openRecordWorld();
});
afterAll(() => record.world.close());

const elm = (): TickedOffTrial => ({
  trialId: record.trialIds.get('elm 2024') ?? '',
  reason: 'Hail in July.',
});

const put = ({ id, revision }: WeighUp, tickedOff: TickedOffTrial[], agent = record.advisor.agent) =>
  agent.put(`/api/weigh-ups/${id}/ticked-off`).send({ revision, tickedOff });

const read = async (id: string): Promise<{ weighUp: WeighUp; result: WeighUpResult }> =>
  (await record.advisor.agent.get(`/api/weigh-ups/${id}`).expect(200)).body;

/** The figures alone: when they were computed is another matter. */
const figures = ({ candidates }: WeighUpResult) =>
  candidates.map(({ gap, siteYears }) => ({ gap, siteYears }));

test('a trial that is ticked off does not count, is listed with its reason, and is a caution of every figure', async () => {
  const weighUp = await record.make();
  const before = await read(weighUp.id);
  const saved = (await put(weighUp, [elm()]).expect(200)).body;
  const { result } = await read(weighUp.id);
  expect(saved.result).toEqual(result);
  expect(result.trials).toHaveLength(8);
  expect(result.trials.map(({ trialId }) => trialId)).not.toContain(elm().trialId);
  expect(result.candidates.map(({ siteYears }) => siteYears)).toEqual([8, 8]);
  const was = before.result.trials.find(({ trialId }) => trialId === elm().trialId);
  expect(result.leftOut).toEqual([{ ...was, reason: 'ticked-off', reasonText: 'Hail in July.' }]);
  const caution = {
    code: 'trial-ticked-off',
    severity: 'warning',
    values: { count: 1, sites: [{ en: 'ELM 2024', fr: 'ELM 2024' }] },
  };
  expect(result.cautions).toContainEqual(caution);
  for (const candidate of result.candidates) expect(candidate.cautions).toContainEqual(caution);
});

test('the figures are those of a world in which the trial was never grown', async () => {
  const season = { seasonFrom: 2024, seasonTo: 2025 };
  const all2024 = ['elm 2024', 'fir 2024', 'gorse 2024'].map((name) => ({
    trialId: record.trialIds.get(name) ?? '',
    reason: 'another sprayer',
  }));
  const weighUp = await record.make(season);
  await put(weighUp, all2024).expect(200);
  const without = await record.make({ seasonFrom: 2025, seasonTo: 2025 });
  expect(figures((await read(weighUp.id)).result)).toEqual(figures((await read(without.id)).result));
});

test('back in, the figures are as they were before, and nothing is said any more', async () => {
  const weighUp = await record.make();
  const before = await read(weighUp.id);
  const out = (await put(weighUp, [elm()]).expect(200)).body;
  expect(figures(out.result)).not.toEqual(figures(before.result));
  const back = (await put(out.weighUp, []).expect(200)).body;
  expect(figures(back.result)).toEqual(figures(before.result));
  expect(back.result.leftOut).toEqual([]);
  expect(JSON.stringify(back.result)).not.toContain('ticked-off');
});

test('it stays ticked off when the numbers are saved, and in another weigh-up it counts', async () => {
  const weighUp = await record.make();
  const other = await record.make();
  const out = (await put(weighUp, [elm()]).expect(200)).body.weighUp;
  await record.advisor.agent
    .put(`/api/weigh-ups/${weighUp.id}`)
    .send({ revision: out.revision, weighUp: record.question({ areaHectares: 50 }) })
    .expect(200);
  expect((await read(weighUp.id)).weighUp.tickedOff).toEqual([elm()]);
  expect((await read(other.id)).result.trials).toHaveLength(9);
});

test('with every trial ticked off there is no verdict, and it is said why', async () => {
  const weighUp = await record.make();
  const all = [...record.trialIds.values()].map((trialId) => ({ trialId, reason: 'none of them' }));
  const { result } = (await put(weighUp, all).expect(200)).body;
  expect(result).toMatchObject({ answer: 'no-trials', trials: [], candidates: [] });
  expect(result.leftOut).toHaveLength(9);
  expect(result.cautions[0]).toMatchObject({ code: 'trial-ticked-off', values: { count: 9 } });
  // The region has trials, so it is not said to have none.
  expect(result.cautions.map(({ code }: { code: string }) => code)).not.toContain('no-trial-in-region');
});

test('the grower copy says it, and holds on to it', async () => {
  const weighUp = await record.make();
  const out = (await put(weighUp, [elm()]).expect(200)).body.weighUp;
  const made = await record.advisor.agent
    .post(`/api/weigh-ups/${weighUp.id}/grower-copies`)
    .send({ language: 'fr', validDays: 30 })
    .expect(200);
  await put(out, []).expect(200);
  const words = readWords((await record.world.visitor().get(made.body.path).expect(200)).text);
  expect(words).toContain(say('fr', 'method:reason.ticked-off'));
  expect(words).toContain(say('fr', 'method:reasonWords', { words: 'Hail in July.' }));
});

test('without a reason, twice, over an old revision or in another’s weigh-up nothing is ticked off', async () => {
  const weighUp = await record.make();
  await put(weighUp, [{ ...elm(), reason: '  ' }]).expect(400);
  await put(weighUp, [elm(), elm()]).expect(400);
  await put({ ...weighUp, revision: 7 }, [elm()]).expect(409);
  await put(weighUp, [elm()], record.other.agent).expect(404);
  expect((await read(weighUp.id)).weighUp.tickedOff).toEqual([]);
});
