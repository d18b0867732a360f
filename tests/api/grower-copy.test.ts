import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { auditEvents } from '#drizzle/schema/audit.ts';
import { growerCopies } from '#drizzle/schema/weigh-ups.ts';
import { presentSentences } from '#server/grower-copy/copy-sentences.ts';
import { type CopyPageData, readWords } from '#tests/support/read-copy-page.ts';
import { say } from '#tests/support/say.ts';
import { openApiWorld, type ApiWorld, type SignedIn } from './api-world.ts';
import { askSmallQuestion } from './small-question.ts';
import {
  foundSmallWorld,
  idIn,
  publishLevelSeasons,
  republish,
  withdraw,
  type SmallWorld,
} from './small-world.ts';

let world: ApiWorld;
let small: SmallWorld;
let advisor: SignedIn;
let trialIds: string[];
beforeAll(async () => {
  world = await openApiWorld('empty');
  const { db } = world.database;
  small = await foundSmallWorld(db);
  trialIds = await publishLevelSeasons(db, small, [2022, 2023, 2024, 2025]);
  advisor = await world.signInAs('advisor', { regionIds: [small.regionIds.north] });
});
afterAll(() => world.close());

async function makeWeighUp(person: SignedIn = advisor, growerName = 'Ada Quern'): Promise<string> {
  const candidateIds = ['Birch', 'Cedar'].map((name) => idIn(small.varietyIds, name));
  const reply = await person.agent
    .post('/api/weigh-ups')
    .send(askSmallQuestion(small, { seasonFrom: 2022, growerName, candidateIds }))
    .expect(200);
  return reply.body.weighUp.id;
}

type Made = { weighUpId: string; copyId: string; token: string };

async function makeCopy(weighUpId?: string): Promise<Made> {
  const id = weighUpId ?? (await makeWeighUp());
  const reply = await advisor.agent
    .post(`/api/weigh-ups/${id}/grower-copies`)
    .send({ language: 'fr' })
    .expect(200);
  return { weighUpId: id, copyId: reply.body.copy.id, token: reply.body.path.replace('/copy/', '') };
}

/** Under one name whatever the port: the page says on paper how it was reached. */
const open = (token: string, query = '') =>
  world.visitor().get(`/copy/${token}${query}`).set('Host', 'gavelrow.example.org');
const readAnswer = async (token: string) =>
  (await world.visitor().get(`/copy/${token}/answer`).expect(200)).body as CopyPageData;
const list = async (weighUpId: string) =>
  (await advisor.agent.get(`/api/weigh-ups/${weighUpId}/grower-copies`).expect(200)).body.copies;

test('a copy opens by its link alone, in the grower’s language, with the figures of the weigh-up', async () => {
  const { weighUpId, token } = await makeCopy();
  await open(token)
    .expect(200)
    .expect('content-type', /^text\/html/);
  const live = (await advisor.agent.get(`/api/weigh-ups/${weighUpId}`).expect(200)).body;
  const { language, answer } = await readAnswer(token);
  expect(language).toBe('fr');
  expect(answer.candidates.map(({ gap }) => gap)).toEqual(
    live.result.candidates.map(({ gap }: { gap: unknown }) => gap),
  );
  expect(answer.weighUp.assumptions).toEqual(live.weighUp.assumptions);
  const [row] = await world.database.db
    .select()
    .from(growerCopies)
    .where(eq(growerCopies.weighUpId, weighUpId));
  expect(row?.snapshot).toMatchObject({ weighUp: live.weighUp, advisorEmail: advisor.email });
});

test.each(['en', 'fr'] as const)('everything is said before any script, in %s', async (language) => {
  const { token } = await makeCopy();
  const { text } = await open(token, `?lang=${language}`).expect(200);
  expect(text).toContain(`<html lang="${language}">`);
  const words = readWords(text);
  const { candidates } = (await readAnswer(token)).answer;
  for (const { varietyName, verdict, gap } of candidates) {
    expect(words).toContain(varietyName);
    expect(words).toContain(say(language, `common:verdict.${verdict}`));
    // The figure as the language writes it, at some number of decimals.
    const tenths = Math.abs(gap?.estimate ?? 0)
      .toFixed(1)
      .replace('.', language === 'fr' ? ',' : '.');
    expect(words).toMatch(new RegExp(`[+\u2212]?${tenths.slice(0, 2)}`));
  }
  expect(words).toContain(advisor.email);
  expect(words).toContain(say(language, 'copy:howTitle'));
  expect(words).toContain(language === 'fr' ? 'Chiffres figés le' : 'Figures frozen on');
  // Neither a key, nor a placeholder, nor what JavaScript calls nothing.
  expect(words).not.toMatch(
    /\{\{|undefined|NaN|\[object|\b(copy|verdicts|cautions|method|common|drawings):\w/,
  );
});

test('whoever reads a copy knows whom to call, as it was when the copy was made', async () => {
  const { token: silent } = await makeCopy();
  await advisor.agent.patch('/api/me').send({ phone: '+1 555-0142' }).expect(200);
  const { token } = await makeCopy();
  await advisor.agent.patch('/api/me').send({ phone: null }).expect(200);
  const { text } = await open(token).expect(200);
  expect(text).toContain('<a href="tel:+15550142"');
  expect(readWords(text)).toContain(`${say('fr', 'copy:orCall')} +1 555-0142`);
  const older = (await open(silent).expect(200)).text;
  expect(older).not.toMatch(/tel:|ou appelez/);
});

test('the page holds nothing that the security policy forbids, nor anything from elsewhere', async () => {
  const { token } = await makeCopy();
  const { text, headers } = await open(token).expect(200);
  expect(headers['content-security-policy']).toContain("script-src 'self'");
  const scripts = [...text.matchAll(/<script\b([^>]*)>/g)].map(([, attributes = '']) => attributes);
  expect(scripts).toHaveLength(1);
  for (const attributes of scripts) expect(attributes).toMatch(/src="\//);
  expect(text).not.toMatch(/<style|\son\w+="|(src|href)="(https?:)?\/\//);
  // Whoever has the link has the page; the page says it once, for its own paper, and hands it to nothing.
  expect(text.split(token)).toHaveLength(2);
  expect(text).toMatch(
    new RegExp(
      `<p class="hidden print:block">[^<]*<span[^>]*>http://gavelrow\\.example\\.org/copy/${token}</span>`,
    ),
  );
});

test('what a person typed stays text', async () => {
  const weighUpId = await makeWeighUp(advisor, '</script><script>alert(1)</script><!--');
  const { token } = await makeCopy(weighUpId);
  const { text } = await open(token).expect(200);
  expect(text.includes('<script>alert')).toBe(false);
  expect(readWords(text)).toContain('</script><script>alert(1)</script><!--');
});

test('an unchanged page is not sent again, and the opening is counted all the same', async () => {
  const { weighUpId, token } = await makeCopy();
  const first = await open(token).expect(200);
  const tag = first.headers['etag'] ?? '';
  expect(tag).toMatch(/^"[\w-]{43}"$/);
  const again = await open(token).set('If-None-Match', tag).expect(304);
  expect(again.text).toBe('');
  expect((await list(weighUpId))[0].openings).toBe(2);
  const english = await open(token, '?lang=en').set('If-None-Match', tag).expect(200);
  expect(english.headers['etag']).not.toBe(tag);
});

test('the link is long, random and never stored; what is stored is its hash', async () => {
  const { copyId, token } = await makeCopy();
  const other = await makeCopy();
  // 128 bits at least, at six bits a character.
  expect(token).toMatch(/^[A-Za-z0-9_-]{22,}$/);
  expect(other.token).not.toBe(token);
  const [row] = await world.database.db.select().from(growerCopies).where(eq(growerCopies.id, copyId));
  expect(JSON.stringify(row)).not.toContain(token);
  expect(row?.tokenHash).toMatch(/^[0-9a-f]{64}$/);
  const { rows } = await world.database.db.execute(sql`select detail::text as text from audit_events`);
  expect(JSON.stringify(rows)).not.toContain(token);
});

test('neither search engines nor other sites learn of the link, opened or refused', async () => {
  const { token } = await makeCopy();
  for (const reply of [await open(token), await open('x'.repeat(32))]) {
    expect(reply.headers['x-robots-tag']).toBe('noindex, nofollow');
    expect(reply.headers['referrer-policy']).toBe('no-referrer');
    expect(reply.headers['cache-control']).toBe('private, no-cache');
    expect(reply.headers['set-cookie']).toBeUndefined();
  }
});

test('openings are counted, refused ones not', async () => {
  const { weighUpId, token } = await makeCopy();
  expect(await list(weighUpId)).toMatchObject([{ openings: 0, lastOpenedAt: null }]);
  await open(token).expect(200);
  await open(token).expect(200);
  await open(`${token}x`).expect(404);
  // The same page in the other language is no second opening, nor is a look at the headers.
  await open(token, '?lang=en').set('Sec-Fetch-Site', 'same-origin').expect(200);
  await world.visitor().head(`/copy/${token}`).expect(200);
  // Nor is what the page's script asks for.
  await readAnswer(token);
  const [copy] = await list(weighUpId);
  expect(copy.openings).toBe(2);
  expect(copy.lastOpenedAt).not.toBeNull();
});

/** Every dead link has a page of its own, in the language that is asked for or that the browser prefers. */
async function expectClosed(token: string, status: number, failure: string): Promise<void> {
  for (const language of ['en', 'fr'] as const) {
    const asked = await open(token, `?lang=${language}`);
    const preferred = await open(token).set('Accept-Language', language === 'fr' ? 'fr-CA,en;q=0.5' : 'en');
    for (const reply of [asked, preferred]) {
      expect(reply.status).toBe(status);
      expect(reply.headers['content-type']).toMatch(/^text\/html/);
      expect(reply.text).toContain(`<html lang="${language}">`);
      const words = readWords(reply.text);
      expect(words).toContain(say(language, `copy:failed.${failure}.title`));
      expect(words).toContain(say(language, `copy:failed.${failure}.text`));
      expect(words).not.toContain('Ada Quern');
    }
  }
}

test.each([
  ['invented', 'A'.repeat(32)],
  ['cut short', 'A'],
  ['no link at all', '%27%20or%20true--'],
  ['far too long', 'A'.repeat(400)],
  ['with a sign that no database holds', 'A%00'],
  ['garbled', '%E0%A4%A'],
  ['left out', ''],
  ['run on', `${'A'.repeat(32)}/and-more`],
])('a link that is %s is unknown', (_case, token) => expectClosed(token, 404, 'link-unknown'));

test('a revoked link is gone at once and stays gone, and the log knows who closed it', async () => {
  const { weighUpId, copyId, token } = await makeCopy();
  const revoked = await advisor.agent.delete(`/api/grower-copies/${copyId}`).expect(200);
  expect(revoked.body.copy.revokedAt).not.toBeNull();
  await expectClosed(token, 410, 'link-revoked');
  const again = await advisor.agent.delete(`/api/grower-copies/${copyId}`).expect(200);
  expect(again.body.copy.revokedAt).toBe(revoked.body.copy.revokedAt);
  expect((await list(weighUpId))[0].openings).toBe(0);
  const events = await world.database.db
    .select()
    .from(auditEvents)
    .where(eq(auditEvents.subjectId, copyId))
    .orderBy(auditEvents.id);
  expect(events.map((event) => [event.action, event.actorId])).toEqual([
    ['grower-copy.made', advisor.id],
    ['grower-copy.revoked', advisor.id],
  ]);
});

test('an expired link says so', async () => {
  const { copyId, token } = await makeCopy();
  await world.database.db.execute(sql`update grower_copies
    set created_at = now() - interval '2 days', expires_at = now() - interval '1 second' where id = ${copyId}`);
  await expectClosed(token, 410, 'link-expired');
});

test('a link lives a year unless told otherwise, and never longer than three', async () => {
  const { weighUpId } = await makeCopy();
  const [copy] = await list(weighUpId);
  const days = (Date.parse(copy.expiresAt) - Date.parse(copy.createdAt)) / 86_400_000;
  expect(days).toBeCloseTo(365, 1);
  const make = (validDays: number) =>
    advisor.agent.post(`/api/weigh-ups/${weighUpId}/grower-copies`).send({ language: 'en', validDays });
  expect((await make(1096)).status).toBe(400);
  expect((await make(0)).status).toBe(400);
  expect((await make(30)).status).toBe(200);
});

test('frozen figures stay when the weigh-up changes', async () => {
  const { weighUpId, token } = await makeCopy();
  const before = (await open(token)).text;
  const { weighUp } = (await advisor.agent.get(`/api/weigh-ups/${weighUpId}`)).body;
  await advisor.agent
    .put(`/api/weigh-ups/${weighUpId}`)
    .send({ revision: 1, weighUp: { ...weighUp, growerName: 'Somebody else', areaHectares: 1 } })
    .expect(200);
  expect((await open(token)).text).toBe(before);
});

test('frozen figures stay when a trial is corrected or withdrawn, and the copy says what became of it', async () => {
  const { db } = world.database;
  const { weighUpId, token } = await makeCopy();
  const before = await open(token);
  const figures = await readAnswer(token);
  const [, corrected, withdrawn] = trialIds;
  if (corrected === undefined || withdrawn === undefined) throw new Error('there are four trials');
  await db.execute(sql`update plots set excluded_reason = 'drowned'
    where trial_id = ${corrected} and plot_number = '102'`);
  await republish(db, corrected);
  await withdraw(db, withdrawn);
  const after = await open(token).set('If-None-Match', before.headers['etag'] ?? '');
  expect(after.status).toBe(200);
  expect(await readAnswer(token)).toEqual(figures);
  const sentences = [
    say('fr', 'verdicts:changes.corrected', { site: 'ELM', season: 2023 }),
    say('fr', 'verdicts:changes.withdrawn', { site: 'ELM', season: 2024 }),
  ];
  for (const sentence of sentences) {
    expect(readWords(before.text)).not.toContain(sentence);
    expect(readWords(after.text)).toContain(sentence);
  }
  const changes = [
    { trialId: corrected, siteName: 'ELM', season: 2023, change: 'corrected' },
    { trialId: withdrawn, siteName: 'ELM', season: 2024, change: 'withdrawn' },
  ];
  expect((await list(weighUpId))[0].laterChanges).toHaveLength(2);
  expect((await list(weighUpId))[0].laterChanges).toEqual(expect.arrayContaining(changes));
  const live = (await advisor.agent.get(`/api/weigh-ups/${weighUpId}`)).body.result;
  expect(live.trials).toHaveLength(3);
  const newer = await makeCopy(weighUpId);
  expect(readWords((await open(newer.token)).text)).not.toContain(say('fr', 'verdicts:changes.title'));
});

test('a copy goes on speaking as it did when the product’s sentences change', async () => {
  const { db } = world.database;
  const old = await makeCopy();
  const words = readWords((await open(old.token)).text);
  const before = presentSentences.fr['copy'] ?? {};
  presentSentences.fr['copy'] = Object.assign({}, before, { howTitle: 'Tout autrement' });
  try {
    expect(readWords((await open(old.token)).text)).toBe(words);
    const fresh = await makeCopy();
    expect(readWords((await open(fresh.token)).text)).toContain('Tout autrement');
    // A copy of the first format has nothing frozen but its figures.
    await db.execute(
      sql`update grower_copies set snapshot = snapshot || '{"format": 1}' where id = ${old.copyId}`,
    );
    expect(readWords((await open(old.token)).text)).toContain('Tout autrement');
  } finally {
    presentSentences.fr['copy'] = before;
  }
  const { rows } = await db.execute(sql`select count(*)::int as count from frozen_sentences`);
  expect(rows).toEqual([{ count: 2 }]);
});

test('a sentence that there was not yet when the copy was made is taken from today', async () => {
  const { copyId, token } = await makeCopy();
  await world.database.db.execute(sql`with cut as (
      insert into frozen_sentences (hash, sentences)
      select repeat('a', 64), f.sentences #- '{fr,copy,howTitle}' from grower_copies c
      join frozen_sentences f on f.hash = c.snapshot ->> 'sentencesHash' where c.id = ${copyId} returning hash
    )
    update grower_copies set snapshot = jsonb_set(snapshot, '{sentencesHash}', to_jsonb(cut.hash)) from cut
    where id = ${copyId}`);
  expect(readWords((await open(token)).text)).toContain(say('fr', 'copy:howTitle'));
});

test('the figures are read in the unit that the address names, bushels by the crop’s own weight', async () => {
  const { copyId, token } = await makeCopy();
  const read = async (query: string) => readWords((await open(token, query).expect(200)).text);
  const tonnes = await read('?lang=en');
  expect(tonnes).toMatch(/\d\.\d+\u00a0t\/ha/);
  expect(tonnes).toContain('42\u00a0ha');
  const quintals = await read('?lang=en&unit=q-ha');
  expect(quintals).toMatch(/\d\u00a0q\/ha/);
  expect(quintals).not.toMatch(/\d\u00a0t\/ha/);
  const bushels = await read('?lang=en&unit=bu-ac');
  expect(bushels).toMatch(/\d\u00a0bu\/ac/);
  expect(bushels).toContain('103.8\u00a0ac');
  expect(await read('?lang=en&unit=furlongs')).toBe(tonnes);
  // The first format does not hold the bushel's weight, and guesses none.
  await world.database.db.execute(
    sql`update grower_copies set snapshot = snapshot || '{"format": 1}' where id = ${copyId}`,
  );
  expect(await read('?lang=en&unit=bu-ac')).not.toContain('bu/ac');
});

test('somebody else neither makes, sees nor revokes copies of a weigh-up', async () => {
  const { weighUpId, copyId, token } = await makeCopy();
  const other = await world.signInAs('agronomist', { regionIds: [small.regionIds.north] });
  const replies = [
    await other.agent.get(`/api/weigh-ups/${weighUpId}/grower-copies`),
    await other.agent.post(`/api/weigh-ups/${weighUpId}/grower-copies`).send({ language: 'en' }),
    await other.agent.delete(`/api/grower-copies/${copyId}`),
  ];
  for (const reply of replies)
    expect([reply.status, reply.body]).toEqual([404, { error: { code: 'not-found' } }]);
  await open(token).expect(200);
});

test('the snapshot holds nothing of the account but the name and address of the advisor', async () => {
  const { copyId } = await makeCopy();
  const [row] = await world.database.db.select().from(growerCopies).where(eq(growerCopies.id, copyId));
  expect(JSON.stringify(row?.snapshot)).not.toContain(advisor.id);
});

test('a copy made near midnight bears the day of its advisor, wherever the server stands', async () => {
  const { token, copyId } = await makeCopy();
  const make = async (timeZone: string | null) => {
    const zone =
      timeZone === null
        ? sql`snapshot - 'timeZone'`
        : sql`jsonb_set(snapshot, '{timeZone}', to_jsonb(${timeZone}::text))`;
    await world.database.db.execute(
      sql`update grower_copies set snapshot = jsonb_set(${zone}, '{madeAt}', '"2026-12-01T03:30:00.000Z"') where id = ${copyId}`,
    );
    return readWords((await open(token, '?lang=en').expect(200)).text);
  };
  expect(await make('America/Montreal')).toContain('on 30 November 2026\n');
  expect(await make('Pacific/Auckland')).toContain('on 1 December 2026\n');
  expect(await make(null)).toContain('on 1 December 2026 (UTC)');
});

test('the advisor’s time zone is frozen with the copy; one that is not known is left out', async () => {
  const weighUpId = await makeWeighUp(advisor);
  const zoneOf = async (timeZone: string) => {
    const reply = await advisor.agent
      .post(`/api/weigh-ups/${weighUpId}/grower-copies`)
      .send({ language: 'en', timeZone })
      .expect(200);
    const { rows } = await world.database.db.execute<{ zone: string | null }>(
      sql`select snapshot ->> 'timeZone' as zone from grower_copies where id = ${reply.body.copy.id}`,
    );
    return rows[0]?.zone;
  };
  expect(await zoneOf('America/Winnipeg')).toBe('America/Winnipeg');
  expect(await zoneOf('Nowhere/Land')).toBeNull();
});
