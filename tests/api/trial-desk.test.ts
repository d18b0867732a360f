import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { importByteLimit, importRowLimit } from '#shared/trial-desk.ts';
import { makeCrop, makeRegion, makeSite, makeVariety } from '#tests/support/factories.ts';
import { openApiWorld, type Agent, type ApiWorld, type SignedIn } from './api-world.ts';

let world: ApiWorld;
let agronomist: SignedIn;
let stranger: Agent;
let crop: Awaited<ReturnType<typeof makeCrop>>;
let site: Awaited<ReturnType<typeof makeSite>>;
let farSite: Awaited<ReturnType<typeof makeSite>>;
/** Fields of a form for one good file; each test has a name of its own. */
let fields: Record<string, string>;
let made = 0;

const goodFile = [
  'plot;variété;bloc;row;col;rendement;Verse',
  '101;Tamberlow;1;1;1;5,12;2',
  '102;quillane;1;1;2;5,61;3',
  '103;New one;1;1;3;5,05;2',
  '201;Quillane;2;2;1;5,72;4',
  '202;New one;2;2;2;5,11;3',
  '203;Tamberlow;2;2;3;5,30;2',
  '301;New one;3;3;1;4,98;3',
  '302;Tamberlow;3;3;2;5,19;2',
  '303;Quillane;3;3;3;;4',
].join('\r\n');

beforeAll(async () => {
  world = await openApiWorld('empty');
  const { db } = world.database;
  const [region, farRegion] = [await makeRegion(db), await makeRegion(db)];
  site = await makeSite(db, region.id);
  farSite = await makeSite(db, farRegion.id);
  crop = await makeCrop(db, { cvLimitPercent: 15 }, [
    { slug: 'lodging', nameFr: 'Verse', kind: 'ordinal', direction: 'lower', scaleMin: 1, scaleMax: 9 },
  ]);
  await makeVariety(db, crop.id, { name: 'Tamberlow', isCheck: true });
  await makeVariety(db, crop.id, { name: 'Quillane' });
  agronomist = await world.signInAs('agronomist', { regionIds: [region.id] });
  stranger = (await world.signInAs('agronomist', { regionIds: [farRegion.id] })).agent;
});
afterAll(() => world.close());
beforeEach(() => {
  made += 1;
  fields = { crop: crop.slug, site: site.slug, season: '2026', design: 'rcbd', name: `Trial ${made}` };
});

function upload(agent: Agent, path: string, text: string | Buffer, changes: Record<string, string> = {}) {
  return agent
    .post(path)
    .field({ ...fields, ...changes })
    .attach('file', Buffer.from(text), 'plots.csv');
}

async function importGood(changes: Record<string, string> = {}): Promise<string> {
  const { body } = await upload(agronomist.agent, '/api/desk/imports', goodFile, changes).expect(200);
  return body.trialId;
}

/** Rows of every table that an import or a publication writes. */
async function countRows(): Promise<Record<string, number>> {
  const tables = [
    'trials',
    'entries',
    'plots',
    'observations',
    'trial_versions',
    'version_fits',
    'entry_means',
    'audit_events',
  ];
  const counts: Record<string, number> = {};
  for (const table of tables) {
    const { rows } = await world.database.db.execute<{ count: number }>(
      sql`select count(*)::int as count from ${sql.identifier(table)}`,
    );
    counts[table] = rows[0]?.count ?? -1;
  }
  return counts;
}

const trialOf = async (id: string) =>
  (await agronomist.agent.get(`/api/desk/trials/${id}`).expect(200)).body.trial;

describe('checking a file', () => {
  test('tells what is in it, shows its analysis and stores nothing', async () => {
    const before = await countRows();
    const { body } = await upload(agronomist.agent, '/api/desk/import-checks', goodFile).expect(200);
    expect(body.report).toEqual({
      rows: 9,
      plots: 9,
      entries: 3,
      traits: ['yield', 'lodging'],
      unknownVarieties: ['New one'],
      problems: [],
      problemsTotal: 0,
    });
    expect(body.analysis).toMatchObject({
      kind: 'numeric',
      traitSlug: 'yield',
      plotsUsed: 8,
      plotsMissing: 1,
    });
    expect(await countRows()).toEqual(before);
  });

  test('names every bad row', async () => {
    const bad = goodFile.replace('5,61', 'viel').replace('201;Quillane', '101;Quillane');
    const { body } = await upload(agronomist.agent, '/api/desk/import-checks', bad).expect(200);
    expect(body.analysis).toBeNull();
    expect(body.report.problems).toEqual([
      { row: 3, column: 'rendement', value: 'viel', reason: 'not-a-number', values: {} },
      { row: 5, column: 'plot', value: '101', reason: 'duplicate-plot', values: { firstRow: 2 } },
    ]);
  });

  test('notices a unit that cannot be right', async () => {
    const kilograms = 'entry,rep,yield\nA,1,5113\nB,1,4900\nA,2,5208\nB,2,4875\n';
    const path = '/api/desk/import-checks';
    const asStored = await upload(agronomist.agent, path, kilograms).expect(200);
    expect(asStored.body.report.problems).toMatchObject([{ reason: 'unit-doubtful' }]);
    const grouped = kilograms.replaceAll(/,(\d)(\d{3})\n/g, ',$1.$2\n');
    const tiny = await upload(agronomist.agent, path, grouped, { unit: 'kg/ha' }).expect(200);
    expect(tiny.body.report.problems).toMatchObject([{ reason: 'unit-doubtful' }]);
    const right = await upload(agronomist.agent, path, kilograms, { unit: 'kg/ha' }).expect(200);
    expect(right.body.analysis.grandMean).toBeCloseTo(5.024, 6);
    const stated = await upload(agronomist.agent, path, kilograms.replace('yield', 'yield (kg/ha)')).expect(
      200,
    );
    expect(stated.body.analysis.grandMean).toBeCloseTo(5.024, 6);
    const against = kilograms.replace('yield', 'yield (kg/ha)');
    const contradicted = await upload(agronomist.agent, path, against, { unit: 'bu/ac' }).expect(200);
    expect(contradicted.body.report.problems).toMatchObject([
      { reason: 'unit-contradicts', values: { chosen: 'bu/ac', stated: 'kg/ha' } },
    ]);
  });
});

describe('taking a file in', () => {
  test('stores the whole of it as a draft', async () => {
    const id = await importGood();
    const trial = await trialOf(id);
    expect(trial).toMatchObject({
      state: 'draft',
      entries: 3,
      plots: 9,
      version: null,
      revision: 1,
      traitSlugs: ['yield', 'lodging'],
      versions: [],
    });
    const { body } = await agronomist.agent.get(`/api/desk/trials/${id}/analysis`).expect(200);
    expect(body.analysis).toMatchObject({ source: 'draft', version: null, kind: 'numeric' });
    expect(body.analysis.plots.map((plot: { entryLabel: string }) => plot.entryLabel)).toContain('Quillane');
    const rated = await agronomist.agent.get(`/api/desk/trials/${id}/analysis?trait=lodging`).expect(200);
    expect(rated.body.analysis.ordinal[0]).toMatchObject({ entry: 'Tamberlow', n: 3, median: 2 });
    const listed = await agronomist.agent.get('/api/desk/trials?state=draft').expect(200);
    expect(listed.body.trials.map((line: { id: string }) => line.id)).toContain(id);
  });

  test.each([
    ['a missing column', goodFile.replace('bloc', 'whatever')],
    ['text where a number belongs', goodFile.replace('5,30', 'lodged')],
    ['a duplicate plot', goodFile.replace('303;', '302;')],
    ['a negative yield', goodFile.replace('4,98', '-4,98')],
    ['a rating outside its scale', goodFile.replace('5,12;2', '5,12;12')],
    ['an empty file', ''],
    ['a spreadsheet instead of text', Buffer.from([0x50, 0x4b, 3, 4, 0, 0, 0, 0])],
  ])('stores nothing of a file with %s', async (_what, file) => {
    const before = await countRows();
    const { body } = await upload(agronomist.agent, '/api/desk/imports', file).expect(422);
    expect(body.error.code).toBe('import-refused');
    expect(body.error.issues.length).toBeGreaterThan(0);
    expect(await countRows()).toEqual(before);
  });

  test('refuses a million rows, and more bytes than the limit', async () => {
    const before = await countRows();
    const million = `entry,rep,yield\n${'A,1,5.1\n'.repeat(1_000_000)}`;
    expect(million.length).toBeLessThan(importByteLimit);
    const { body } = await upload(agronomist.agent, '/api/desk/imports', million).expect(413);
    expect(body.error).toMatchObject({ code: 'import-too-large', values: { limit: importRowLimit } });
    await upload(agronomist.agent, '/api/desk/imports', Buffer.alloc(importByteLimit + 1, 65)).expect(413);
    expect(await countRows()).toEqual(before);
  });

  test('refuses a trial that is there already', async () => {
    await importGood();
    const before = await countRows();
    const { body } = await upload(agronomist.agent, '/api/desk/imports', goodFile).expect(409);
    expect(body.error.code).toBe('trial-exists');
    expect(await countRows()).toEqual(before);
  });

  test('refuses choices that do not exist, a form without a file, and a site of another region', async () => {
    const path = '/api/desk/imports';
    const unknown = await upload(agronomist.agent, path, goodFile, { crop: 'triticale' }).expect(400);
    expect(unknown.body.error.issues).toEqual([{ path: 'crop', reason: 'invalid_value' }]);
    await upload(agronomist.agent, path, goodFile, { season: 'last year' }).expect(400);
    await upload(agronomist.agent, path, goodFile, { design: 'chess' }).expect(400);
    await agronomist.agent.post(path).field(fields).expect(400);
    const far = await upload(agronomist.agent, path, goodFile, { site: farSite.slug }).expect(403);
    expect(far.body.error.code).toBe('region-not-yours');
  });
});

describe('working on a trial', () => {
  test('a plot is left out with a reason, and taken back in', async () => {
    const id = await importGood();
    const path = `/api/desk/trials/${id}`;
    const plots = (await agronomist.agent.get(`${path}/analysis`)).body.analysis.plots;
    const change = { revision: 1, plotIds: [plots[0].id], reason: 'Birds' };
    const left = await agronomist.agent.patch(`${path}/plots`).send(change).expect(200);
    expect(left.body.trial.revision).toBe(2);
    const without = (await agronomist.agent.get(`${path}/analysis`)).body.analysis;
    expect(without).toMatchObject({ plotsUsed: 7, plotsExcluded: 1 });
    expect(without.plots[0]).toMatchObject({ excludedReason: 'Birds', residual: null });
    expect(without.cautions.map((caution: { code: string }) => caution.code)).toContain('plots-excluded');
    await agronomist.agent
      .patch(`${path}/plots`)
      .send({ ...change, revision: 2, reason: null })
      .expect(200);
    expect((await agronomist.agent.get(`${path}/analysis`)).body.analysis.plotsExcluded).toBe(0);
  });

  test('a change on an older state is refused, and so is one without a reason or of a foreign plot', async () => {
    const [id, other] = [await importGood(), await importGood({ name: `Other ${made}` })];
    const path = `/api/desk/trials/${id}`;
    const plotIds = [(await agronomist.agent.get(`${path}/analysis`)).body.analysis.plots[0].id];
    const foreign = [
      (await agronomist.agent.get(`/api/desk/trials/${other}/analysis`)).body.analysis.plots[0].id,
    ];
    const patch = (body: object) => agronomist.agent.patch(`${path}/plots`).send(body);
    expect((await patch({ revision: 7, plotIds, reason: 'Birds' }).expect(409)).body.error.code).toBe(
      'revision-conflict',
    );
    await patch({ revision: 1, plotIds, reason: ' ' }).expect(400);
    await patch({ revision: 1, plotIds: [...plotIds, ...foreign], reason: 'Birds' }).expect(404);
    expect((await trialOf(id)).revision).toBe(1);
    expect((await agronomist.agent.get(`${path}/analysis`)).body.analysis.plotsExcluded).toBe(0);
  });

  test('draft → published → corrected → withdrawn, each a version that stays', async () => {
    const id = await importGood();
    const path = `/api/desk/trials/${id}`;
    const publish = (revision: number, reason: string) =>
      agronomist.agent.post(`${path}/publications`).send({ revision, reason });
    const first = (await publish(1, 'Checked').expect(200)).body.trial;
    expect(first).toMatchObject({ state: 'published', version: 1, revision: 2 });
    expect((await publish(1, 'Late click').expect(409)).body.error.code).toBe('revision-conflict');
    expect((await publish(2, 'Same again').expect(409)).body.error.code).toBe('state-conflict');
    const plots = (await agronomist.agent.get(`${path}/analysis`)).body.analysis.plots;
    await agronomist.agent
      .patch(`${path}/plots`)
      .send({ revision: 2, plotIds: [plots[1].id], reason: 'Mown by mistake' })
      .expect(200);
    // Readers still see what was published.
    const read = () => agronomist.agent.get(`/api/trials/${id}/analysis`).expect(200);
    expect((await read()).body.analysis).toMatchObject({ source: 'published', version: 1, plotsExcluded: 0 });
    expect((await publish(3, 'One plot had been mown').expect(200)).body.trial.version).toBe(2);
    expect((await read()).body.analysis).toMatchObject({ version: 2, plotsExcluded: 1 });
    const withdrawal = { revision: 4, reason: 'Seed lots mixed up' };
    const gone = (await agronomist.agent.post(`${path}/withdrawals`).send(withdrawal).expect(200)).body.trial;
    expect(gone.state).toBe('withdrawn');
    expect(gone.versions.map((one: { number: number; action: string }) => [one.number, one.action])).toEqual([
      [3, 'withdraw'],
      [2, 'publish'],
      [1, 'publish'],
    ]);
    const again = await agronomist.agent.post(`${path}/withdrawals`).send({ ...withdrawal, revision: 5 });
    expect(again.body.error.code).toBe('state-conflict');
    const { rows } = await world.database.db.execute(
      sql`select action, detail->>'reason' as reason from audit_events where subject_id = ${id} order by id`,
    );
    expect(rows.map((event) => event['action'])).toEqual([
      'trial.imported',
      'trial.published',
      'trial.plots-excluded',
      'trial.published',
      'trial.withdrawn',
    ]);
  });

  test('a trial published by the one who brought it in says so', async () => {
    const id = await importGood();
    await agronomist.agent
      .post(`/api/desk/trials/${id}/publications`)
      .send({ revision: 1, reason: 'Checked' })
      .expect(200);
    const { body } = await agronomist.agent.get(`/api/trials/${id}/analysis`).expect(200);
    expect(body.analysis.cautions).toContainEqual({ code: 'single-author', severity: 'note', values: {} });
  });

  test('two who publish at once get one version', async () => {
    const id = await importGood();
    const publish = () =>
      agronomist.agent.post(`/api/desk/trials/${id}/publications`).send({ revision: 1, reason: 'Checked' });
    const replies = await Promise.all([publish(), publish()]);
    expect(replies.map((reply) => reply.status).sort()).toEqual([200, 409]);
    expect((await trialOf(id)).versions).toHaveLength(1);
  });

  test('a trial that cannot be analysed is not published', async () => {
    const text = 'entry,rep,note,yield\nA,1,,5.1\nB,2,,\n';
    const { body } = await upload(agronomist.agent, '/api/desk/imports', text).expect(200);
    const before = await countRows();
    const reply = await agronomist.agent
      .post(`/api/desk/trials/${body.trialId}/publications`)
      .send({ revision: 1, reason: 'Checked' })
      .expect(422);
    expect(reply.body.error.code).toBe('trial-not-analysable');
    expect(await countRows()).toEqual(before);
    const { analysis } = (await agronomist.agent.get(`/api/desk/trials/${body.trialId}/analysis`)).body;
    expect(analysis).toMatchObject({ kind: 'none', outcomes: [{ code: 'one-plot', values: {} }] });
  });
});

describe('another region', () => {
  test('has its own desk: what is not yours answers like what does not exist', async () => {
    const id = await importGood();
    const path = `/api/desk/trials/${id}`;
    const listed = await stranger.get('/api/desk/trials').expect(200);
    expect(listed.body.trials).toEqual([]);
    await stranger.get(path).expect(404);
    await stranger.get(`${path}/analysis`).expect(404);
    await stranger
      .patch(`${path}/plots`)
      .send({ revision: 1, plotIds: [id], reason: 'Birds' })
      .expect(404);
    await stranger.post(`${path}/publications`).send({ revision: 1, reason: 'Mine' }).expect(404);
    await stranger.post(`${path}/withdrawals`).send({ revision: 1, reason: 'Mine' }).expect(404);
    await agronomist.agent.get('/api/desk/trials/not-an-id').expect(404);
  });
});
