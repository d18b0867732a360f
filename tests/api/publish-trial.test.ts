import { and, eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { entryMeans, trialVersions, versionFits } from '#drizzle/schema/trials.ts';
import { trialContent } from '#shared/trial-content.ts';
import { checkTrialFile, storeTrialFile } from '#server/trial-desk/import-trial-file.ts';
import { publishTrial } from '#server/trials/publish-trial.ts';
import { hashTrialContent, writeCanonicalJson } from '#server/trials/trial-content-hash.ts';
import { loadTrialContent } from '#server/trials/trial-content-store.ts';
import { makeCrop, makeRegion, makeSite, makeVariety } from '#tests/support/factories.ts';
import { createTestDatabase, type TestDatabase } from '#tests/support/test-database.ts';

let database: TestDatabase;
let trialId: string;
let crop: Awaited<ReturnType<typeof makeCrop>>;
let known: Awaited<ReturnType<typeof makeVariety>>;

/** Two entries in four blocks: by hand, gaps of A over B 0.4, 0.2, 0.6, 0.4. */
const file = 'entry,block,yield\nA,1,5.4\nB,1,5.0\nA,2,5.1\nB,2,4.9\nA,3,5.9\nB,3,5.3\nA,4,5.5\nB,4,5.1\n';

beforeAll(async () => {
  database = await createTestDatabase();
  const { db } = database;
  const region = await makeRegion(db);
  const site = await makeSite(db, region.id);
  crop = await makeCrop(db);
  known = await makeVariety(db, crop.id, { name: 'A', aliases: ['Alpha'] });
  const request = {
    crop: crop.slug,
    site: site.slug,
    season: 2026,
    design: 'strips',
    name: 'Strips',
    trait: 'yield',
    unit: 'as-stored',
  } as const;
  const checked = await checkTrialFile(db, Buffer.from(file), request, null);
  trialId = await storeTrialFile(db, checked, null);
  await publishTrial(db, { trialId, authorId: null, reason: 'Checked', revision: 1 });
});
afterAll(() => database.close());

/** Waits until so many queries of this database wait for a lock. */
async function waitUntilWaiting(count: number): Promise<void> {
  for (;;) {
    const { rows } = await database.db.execute<{ waiting: number }>(
      sql`select count(*)::int as waiting from pg_stat_activity
        where datname = current_database() and wait_event_type = 'Lock'`,
    );
    if ((rows[0]?.waiting ?? 0) >= count) return;
  }
}

/** The first version. */
async function readVersion() {
  const [version] = await database.db
    .select()
    .from(trialVersions)
    .where(and(eq(trialVersions.trialId, trialId), eq(trialVersions.number, 1)));
  if (version === undefined) throw new Error('No version was stored');
  return version;
}

describe('a publication', () => {
  test('keeps the content whole, under a hash that anybody can recompute from what is stored', async () => {
    const version = await readVersion();
    const { content } = await loadTrialContent(database.db, trialId);
    expect(trialContent.parse(version.content)).toEqual(content);
    expect(hashTrialContent(trialContent.parse(version.content))).toBe(version.sha256);
    const other = {
      ...content,
      plots: content.plots.map((plot, i) => (i === 0 ? { ...plot, values: { yield: 5.41 } } : plot)),
    };
    expect(hashTrialContent(other)).not.toBe(version.sha256);
  });

  test('keeps fit and entry means, each mean with half the mean variance of its differences', async () => {
    const version = await readVersion();
    const { db } = database;
    const [fit] = await db.select().from(versionFits).where(eq(versionFits.versionId, version.id));
    // Paired by block: mean gap 0.4, its variance (0.04 + 0.04)/3/4 = 1/150.
    expect(fit).toMatchObject({ traitId: crop.yield.id, plotsUsed: 8, plotsExcluded: 0, plotsMissing: 0 });
    expect(fit?.grandMean).toBeCloseTo(5.275, 12);
    expect(fit?.residualDf).toBe(3);
    expect(fit?.residualMs).toBeCloseTo(1 / 75, 12);
    const means = await db
      .select()
      .from(entryMeans)
      .where(eq(entryMeans.versionId, version.id))
      .orderBy(entryMeans.entryLabel);
    expect(means.map((mean) => [mean.entryLabel, mean.varietyId, mean.plotsUsed])).toEqual([
      ['A', known.id, 4],
      ['B', null, 4],
    ]);
    expect(means[0]?.mean).toBeCloseTo(5.475, 12);
    for (const mean of means) {
      expect(mean.variance).toBeCloseTo(1 / 300, 12);
      expect(mean.df).toBe(3);
    }
  });

  test('is for ever: the database itself refuses to change or delete it', async () => {
    const { db } = database;
    const refused = async (statement: ReturnType<typeof sql>): Promise<void> => {
      await expect(db.execute(statement)).rejects.toThrow(
        expect.objectContaining({ cause: expect.objectContaining({ code: '23000' }) }),
      );
    };
    await refused(sql`update trial_versions set reason = 'Something else' where trial_id = ${trialId}`);
    await refused(sql`delete from trial_versions where trial_id = ${trialId}`);
    await refused(sql`update audit_events set action = 'nothing' where subject_id = ${trialId}`);
    expect((await readVersion()).reason).toBe('Checked');
  });

  test('is one, however many publish at once', async () => {
    const { db } = database;
    await db.execute(
      sql`update plots set excluded_reason = 'Birds' where trial_id = ${trialId} and block = '4'`,
    );
    const { revision } = await loadTrialContent(db, trialId);
    const publish = () => publishTrial(db, { trialId, authorId: null, reason: 'Birds', revision });
    // Both have begun before either can go on: a third holds the trial meanwhile.
    const replies = await db.transaction(async (tx) => {
      await tx.execute(sql`select from trials where id = ${trialId} for update`);
      const begun = [publish(), publish()].map((one) => one.catch((error: unknown) => error));
      await waitUntilWaiting(2);
      return begun;
    });
    const outcomes = await Promise.all(replies);
    expect(outcomes).toContain(2);
    expect(outcomes).toContainEqual(expect.objectContaining({ code: 'revision-conflict' }));
  });

  test('leaves nothing behind when it fails half way', async () => {
    const { db } = database;
    const before = await db.execute(sql`select count(*)::int as count from trial_versions`);
    // An author that does not exist breaks the version's reference after the analysis has been made.
    const authorId = '00000000-0000-4000-8000-000000000000';
    await db.execute(sql`update trials set name = 'Renamed' where id = ${trialId}`);
    await expect(publishTrial(db, { trialId, authorId, reason: 'Renamed', revision: 3 })).rejects.toThrow();
    const after = await db.execute(sql`select count(*)::int as count from trial_versions`);
    expect(after.rows).toEqual(before.rows);
    const { rows } = await db.execute(sql`select revision, state from trials where id = ${trialId}`);
    expect(rows).toEqual([{ revision: 3, state: 'published' }]);
  });
});

test('canonical JSON does not depend on the order in which keys were set', () => {
  expect(writeCanonicalJson({ b: [1, { d: null, c: 'é' }], a: 0.1 })).toBe(
    '{"a":0.1,"b":[1,{"c":"é","d":null}]}',
  );
  expect(writeCanonicalJson({ a: undefined, b: 1e21 })).toBe('{"b":1e+21}');
});
