import { afterAll, beforeAll, expect, test } from 'vitest';
import type { CandidateResult, WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import { questionKinds } from '#shared/question-kind.ts';
import { readWords } from '#tests/support/read-copy-page.ts';
import { say } from '#tests/support/say.ts';
import { openRecordWorld, plantedTrial, type RecordWorld } from './record-world.ts';
import { publishPlanted, withdraw } from './small-world.ts';

let record: RecordWorld;
/** Of 2022; Birch stands in the first alone. */
let trialIds: string[];
const weighUps = new Map<string, WeighUp>();
beforeAll(async () => {
  record = await openRecordWorld();
  const { db } = record.world.database;
  const plant = (site: string, entries: string[]) =>
    publishPlanted(db, record.small, { ...plantedTrial(site, 2022), entries });
  trialIds = [
    await plant('elm', ['Anchor', 'Birch', 'Cedar']),
    await plant('fir', ['Anchor', 'Cedar', 'Dogwood']),
    await plant('gorse', ['Anchor', 'Cedar', 'Dogwood']),
  ];
  for (const question of questionKinds) {
    const names = question === 'pair' ? ['Birch'] : ['Birch', 'Cedar'];
    const span = { seasonFrom: 2022, seasonTo: 2022 };
    const asked = { ...span, question, candidateIds: names.map(record.variety) };
    weighUps.set(question, await record.make(asked));
  }
  await withdraw(db, trialIds[0] ?? '');
});
afterAll(() => record.world.close());

const weighUpOf = (question: string): WeighUp => {
  const weighUp = weighUps.get(question);
  if (weighUp === undefined) throw new Error(`no weigh-up asks ${question}`);
  return weighUp;
};
const read = async (question: string): Promise<{ weighUp: WeighUp; result: WeighUpResult }> =>
  (await record.advisor.agent.get(`/api/weigh-ups/${weighUpOf(question).id}`).expect(200)).body;
const byName = (candidates: readonly CandidateResult[], name: string) =>
  candidates.find(({ varietyName }) => varietyName === name);

test.each(questionKinds)(
  'a candidate whose trials were all withdrawn stays on the weigh-up, and of it nothing is said (%s)',
  async (question) => {
    const { weighUp, result } = await read(question);
    expect(weighUp.candidateIds).toEqual(weighUpOf(question).candidateIds);
    expect(byName(result.candidates, 'Birch')).toMatchObject({
      ...{ verdict: 'thin', gap: null, money: null, siteYears: 0 },
    });
    if (question !== 'pair') expect(byName(result.candidates, 'Cedar')?.gap?.estimate).toBeTypeOf('number');
  },
);

test('its weigh-up is changed and handed over all the same, and the copy says that it cannot be told', async () => {
  const { id, revision } = weighUpOf('several');
  const { agent } = record.advisor;
  const { weighUp } = await read('several');
  await agent
    .put(`/api/weigh-ups/${id}`)
    .send({ revision, weighUp: { ...weighUp, areaHectares: 51 } })
    .expect(200);
  const { body } = await agent
    .post(`/api/weigh-ups/${id}/grower-copies`)
    .send({ language: 'en' })
    .expect(200);
  const words = readWords((await agent.get(body.path).expect(200)).text);
  expect(words).toContain('Birch');
  expect(words).toContain(say('en', 'common:verdict.thin'));
  await agent.get(`${body.path}/pdf`).expect(200);
});

test.each(questionKinds)('with the last trial withdrawn too there is no verdict (%s)', async (question) => {
  const { db } = record.world.database;
  if (question === questionKinds[0]) for (const trialId of trialIds.slice(1)) await withdraw(db, trialId);
  const { result } = await read(question);
  expect(result).toMatchObject({ answer: 'no-trials', candidates: [], trials: [] });
});
