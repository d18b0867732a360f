import { desc, eq } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { auditEvents } from '#drizzle/schema/audit.ts';
import type { Decision, DecisionInput } from '#shared/decision.ts';
import type { WeighUp } from '#shared/weigh-up.ts';
import { openRecordWorld, plantedTrial, type RecordWorld } from './record-world.ts';
import { publishPlanted } from './small-world.ts';

let record: RecordWorld;
beforeAll(async () => {
  record = await openRecordWorld();
});
afterAll(() => record.world.close());

const birch = (change: Partial<DecisionInput> = {}): DecisionInput => ({
  choice: 'candidate',
  varietyId: record.variety('Birch'),
  areaHectares: 30,
  reason: 'It paid at the middle price.',
  ...change,
});

const put = ({ id, revision }: WeighUp, decision: DecisionInput | null, agent = record.advisor.agent) =>
  agent.put(`/api/weigh-ups/${id}/decision`).send({ revision, decision });

const read = async (weighUpId: string): Promise<{ decision: Decision | null; earlier: unknown[] }> =>
  (await record.advisor.agent.get(`/api/weigh-ups/${weighUpId}/decision`).expect(200)).body;

test('a decision is kept with what the evidence said of every candidate, and told to the audit log', async () => {
  const weighUp = await record.make();
  const { result } = (await record.advisor.agent.get(`/api/weigh-ups/${weighUp.id}`).expect(200)).body;
  const saved = (await put(weighUp, birch()).expect(200)).body;
  expect(saved.weighUp.revision).toBe(weighUp.revision + 1);
  const { decision, earlier } = await read(weighUp.id);
  expect(earlier).toEqual([]);
  expect(decision).toEqual(saved.decision);
  expect(decision).toMatchObject({
    choice: 'candidate',
    varietyName: 'Birch',
    areaHectares: 30,
    reason: 'It paid at the middle price.',
    recordedBy: 'Test advisor',
  });
  expect(decision?.said).toMatchObject({
    currentVarietyName: 'Anchor',
    seasonTo: 2025,
    trials: 9,
    tickedOff: 0,
  });
  const [first] = result.candidates;
  expect(decision?.said.candidates[0]).toEqual({
    varietyId: first.varietyId,
    varietyName: 'Birch',
    verdict: 'ahead',
    estimate: first.gap.estimate,
    interval: first.gap.region,
    chancePays: first.money.chancePays,
    moneyVerdict: first.money.verdict,
  });
  const [event] = await record.world.database.db
    .select()
    .from(auditEvents)
    .where(eq(auditEvents.subjectId, weighUp.id))
    .orderBy(desc(auditEvents.id));
  expect(event).toMatchObject({
    action: 'weigh-up.decided',
    actorId: record.advisor.id,
    detail: { choice: 'candidate', variety: 'Birch' },
  });
});

test('what was said stays as it was when the evidence moves on', async () => {
  const weighUp = await record.make({ seasonTo: 2026 });
  await put(weighUp, birch()).expect(200);
  const before = await read(weighUp.id);
  await publishPlanted(record.world.database.db, record.small, {
    ...plantedTrial('elm', 2026),
    yieldOf: (entry, rep) => (entry === 'Birch' ? 4 : 5) + 0.1 * rep,
  });
  const { result } = (await record.advisor.agent.get(`/api/weigh-ups/${weighUp.id}`).expect(200)).body;
  const after = await read(weighUp.id);
  expect(after).toEqual(before);
  expect(result.trials).toHaveLength(10);
  expect(result.candidates[0].gap.estimate).toBeLessThan(after.decision?.said.candidates[0]?.estimate ?? 0);
});

test('the decision of an earlier season stands beside the next question of the same farm and crop', async () => {
  const farm = { growerName: 'Bo Tithe', farmName: 'Low Field' };
  const first = await record.make({ ...farm, seasonTo: 2024 });
  await put(first, birch({ choice: 'current', varietyId: null })).expect(200);
  const next = await record.make({ growerName: 'bo tithe', farmName: 'LOW FIELD', seasonTo: 2025 });
  const elsewhere = await record.make({ ...farm, farmName: 'High Field' });
  expect((await read(next.id)).earlier).toMatchObject([
    { weighUpId: first.id, decision: { choice: 'current', varietyName: 'Anchor' } },
  ]);
  expect((await read(elsewhere.id)).earlier).toEqual([]);
  expect((await read(first.id)).earlier).toEqual([]);
});

test('a decision can be taken back, and left undecided', async () => {
  const weighUp = await record.make();
  const undecided = birch({ choice: 'undecided', varietyId: null, areaHectares: null });
  const first = (await put(weighUp, undecided).expect(200)).body.weighUp;
  expect((await read(weighUp.id)).decision).toMatchObject({ choice: 'undecided', varietyName: null });
  await put(first, null).expect(200);
  expect((await read(weighUp.id)).decision).toBeNull();
});

test('saved over by somebody in between, nothing is overwritten', async () => {
  const weighUp = await record.make();
  await put(weighUp, birch()).expect(200);
  const refused = await put(weighUp, birch({ reason: 'from another tab' })).expect(409);
  expect(refused.body.error.code).toBe('revision-conflict');
  expect((await read(weighUp.id)).decision?.reason).toBe('It paid at the middle price.');
});

test('somebody else’s weigh-up answers like one that does not exist', async () => {
  const weighUp = await record.make();
  await put(weighUp, birch(), record.other.agent).expect(404);
  await record.other.agent.get(`/api/weigh-ups/${weighUp.id}/decision`).expect(404);
});

test.each([
  ['a candidate without its variety', { varietyId: null }, 'varietyId'],
  ['hectares that were left out', { areaHectares: null }, 'areaHectares'],
  ['no hectares at all', { areaHectares: 0 }, 'areaHectares'],
  ['a reason of blanks', { reason: '   ' }, 'reason'],
  ['hectares of what is undecided', { choice: 'undecided', varietyId: null }, 'areaHectares'],
] as const)('%s is refused by its field', async (_what, change, path) => {
  const weighUp = await record.make();
  const refused = await put(weighUp, birch(change)).expect(400);
  expect(refused.body.error.issues[0].path).toBe(`decision.${path}`);
});

test('a variety that was not weighed cannot be chosen', async () => {
  const weighUp = await record.make();
  const refused = await put(weighUp, birch({ varietyId: record.variety('Cedar') })).expect(400);
  expect(refused.body.error.issues).toMatchObject([{ path: 'varietyId' }]);
  expect((await read(weighUp.id)).decision).toBeNull();
});

test('it is on no more hectares than the weigh-up, whose area may have been shown rounded', async () => {
  const weighUp = await record.make();
  const refused = await put(weighUp, birch({ areaHectares: weighUp.areaHectares * 1.01 })).expect(400);
  expect(refused.body.error.issues).toMatchObject([{ path: 'areaHectares', reason: 'over-area' }]);
  await put(weighUp, birch({ areaHectares: weighUp.areaHectares * 1.0005 })).expect(200);
});

test('the decision, with its reason, stays out of the grower copy', async () => {
  const weighUp = await record.make();
  await put(weighUp, birch({ reason: 'he owes me a favour' })).expect(200);
  const made = await record.advisor.agent
    .post(`/api/weigh-ups/${weighUp.id}/grower-copies`)
    .send({ language: 'en', validDays: 30 })
    .expect(200);
  const copy = await record.world.visitor().get(made.body.path).expect(200);
  expect(copy.text).toContain('Birch');
  expect(copy.text).not.toContain('favour');
});
