import { eq, sql } from 'drizzle-orm';
import { pino } from 'pino';
import { afterAll, beforeAll, beforeEach, expect, test, vi } from 'vitest';
import { auditEvents } from '#drizzle/schema/audit.ts';
import { outboxMails } from '#drizzle/schema/outbox.ts';
import { growerCopies } from '#drizzle/schema/weigh-ups.ts';
import { readSettings } from '#server/env.ts';
import { openMailSender, type MailSender } from '#server/mail/mail-sender.ts';
import { claimDueMail } from '#server/mail/outbox-store.ts';
import { deliverMail, sendDueMails, startMailWorker } from '#server/mail/outbox-worker.ts';
import { openMailSink } from '#server/setup/mail-sink.mjs';
import { buildWorld, openApiWorld, type ApiWorld, type SignedIn } from './api-world.ts';
import { askSmallQuestion } from './small-question.ts';
import { foundSmallWorld, publishLevelSeasons } from './small-world.ts';

const from = 'gavelrow@example.org';
const publicUrl = 'https://trials.example.org';

let sink: Awaited<ReturnType<typeof openMailSink>>;
let sender: MailSender;
let world: ApiWorld;
let advisor: SignedIn;
let weighUpId: string;

beforeAll(async () => {
  sink = await openMailSink();
  sender = openMailSender({ smtpUrl: sink.url, from });
  world = await openApiWorld('empty', { SMTP_URL: sink.url, MAIL_FROM: from, PUBLIC_URL: `${publicUrl}/` });
  const { db } = world.database;
  const small = await foundSmallWorld(db);
  await publishLevelSeasons(db, small, [2023, 2024, 2025]);
  advisor = await world.signInAs('advisor', { regionIds: [small.regionIds.north] });
  const reply = await advisor.agent
    .post('/api/weigh-ups')
    .send(askSmallQuestion(small, { growerName: 'Élise <Quern>', farmName: 'Long & Furlong' }))
    .expect(200);
  weighUpId = reply.body.weighUp.id;
});
afterAll(async () => {
  sender.close();
  await sink.close();
  await world.close();
});
beforeEach(() => world.database.db.delete(outboxMails));

type Made = { copyId: string; token: string; link: string };

async function makeCopy(email?: string, language = 'fr'): Promise<Made> {
  const reply = await advisor.agent
    .post(`/api/weigh-ups/${weighUpId}/grower-copies`)
    .send({ language, ...(email === undefined ? {} : { email }) })
    .expect(200);
  const { copy, path, link } = reply.body;
  return { copyId: copy.id, token: path.replace('/copy/', ''), link };
}

const pass = (through = sender) => sendDueMails(world.database.db, through, from);
const mailsTo = (address: string) => sink.mails().filter(({ recipients }) => recipients.includes(address));
const rowsOf = (copyId: string) =>
  world.database.db
    .select()
    .from(outboxMails)
    .where(eq(outboxMails.growerCopyId, copyId))
    .orderBy(outboxMails.createdAt);
/** The hour of the next try, or the end of the lease, is there. */
const comeDue = () =>
  world.database.db.update(outboxMails).set({ nextAttemptAt: sql`now() - interval '1 second'` });

async function mailOf(copyId: string) {
  const reply = await advisor.agent.get(`/api/weigh-ups/${weighUpId}/grower-copies`).expect(200);
  return reply.body.copies.find((copy: { id: string }) => copy.id === copyId).mail;
}

test('a mail brings a link that opens, once, in the grower’s language, as text and as HTML', async () => {
  const { copyId, link, token } = await makeCopy('elise@example.org', 'fr');
  expect(link).toBe(`${publicUrl}/copy/${token}`);
  expect(await mailOf(copyId)).toMatchObject({
    recipient: 'elise@example.org',
    state: 'waiting',
    attempts: 0,
  });
  await pass();
  await pass();
  const [mail, ...more] = mailsTo('elise@example.org');
  expect(more).toEqual([]);
  expect(mail?.subject).toBe('barley (fr)\u202f: l’exemplaire du producteur pour Long & Furlong');
  expect(mail?.from).toContain('Test advisor');
  expect(mail?.from).toContain(from);
  expect(mail?.text).toContain('Bonjour Élise <Quern>,');
  expect(mail?.text).toContain(`\n${link}\n`);
  expect(mail?.text).toContain('Le lien est valable jusqu’au ');
  expect(mail?.html).toContain('Bonjour Élise &lt;Quern&gt;,');
  expect(mail?.html).toContain(`href="${link}"`);
  expect(mail?.html).not.toMatch(/<(img|script|link)|url\(/i);
  expect(`${mail?.subject}${mail?.text}${mail?.html}`).not.toMatch(/\{\{|copy\.\w/);
  await world.visitor().get(`/copy/${token}`).expect(200);
  const state = await mailOf(copyId);
  expect(state).toMatchObject({ state: 'sent', attempts: 1, failure: null });
  expect(state.sentAt).not.toBeNull();
});

test('an English copy comes with an English letter, which names a phone number where there is one', async () => {
  await makeCopy('english@example.org', 'en');
  await advisor.agent.patch('/api/me').send({ phone: '555-0142' }).expect(200);
  await makeCopy('calls@example.org', 'en');
  await advisor.agent.patch('/api/me').send({ phone: null }).expect(200);
  await pass();
  const [mail] = mailsTo('english@example.org');
  expect(mail?.text).toContain('Hello Élise <Quern>,');
  expect(mail?.text).toContain('The link is valid until ');
  expect(mail?.text).not.toContain('call');
  const [called] = mailsTo('calls@example.org');
  expect(called?.text).toContain(`write to Test advisor at ${advisor.email} or call 555-0142.`);
  expect(called?.html).toContain('or call 555-0142.');
});

test('the secret is in the outbox only until the mail is away', async () => {
  const { copyId, token } = await makeCopy('secret@example.org');
  expect(JSON.stringify(await rowsOf(copyId))).toContain(token);
  await pass();
  expect(JSON.stringify(await rowsOf(copyId))).not.toContain(token);
  const events = await world.database.db.select().from(auditEvents).where(eq(auditEvents.subjectId, copyId));
  expect(events.map(({ action }) => action)).toContain('grower-copy.mailed');
  expect(JSON.stringify(events)).not.toContain(token);
});

test('a copy without an address sends nothing', async () => {
  const { copyId } = await makeCopy();
  expect(await rowsOf(copyId)).toEqual([]);
  expect(await mailOf(copyId)).toBeNull();
});

test('an address that is none is refused before anything is stored', async () => {
  const before = await world.database.db.$count(growerCopies);
  for (const email of ['nobody', 'a@example.org, b@example.org', 'a@example.org\r\nBcc: b@example.org'])
    await advisor.agent
      .post(`/api/weigh-ups/${weighUpId}/grower-copies`)
      .send({ language: 'en', email })
      .expect(400);
  expect(await world.database.db.$count(growerCopies)).toBe(before);
});

test('while the mail server is away the mail waits, and arrives when it is back', async () => {
  const away = await openMailSink();
  const late = openMailSender({ smtpUrl: away.url, from });
  await away.close();
  const { copyId } = await makeCopy('late@example.org');
  await pass(late);
  expect(await mailOf(copyId)).toMatchObject({ state: 'waiting', attempts: 1, failure: 'server-away' });
  await pass(late);
  expect(await mailOf(copyId)).toMatchObject({ attempts: 1 });
  const back = await openMailSink(away.port);
  try {
    await comeDue();
    await pass(late);
    expect(back.mails().map(({ recipients }) => recipients)).toEqual([['late@example.org']]);
    expect(await mailOf(copyId)).toMatchObject({ state: 'sent', attempts: 2, failure: null });
  } finally {
    await back.close();
  }
});

test('a mail server that stays away is asked six times, ever more seldom, then the mail is given up', async () => {
  const away = await openMailSink();
  const never = openMailSender({ smtpUrl: away.url, from });
  await away.close();
  const { copyId, token } = await makeCopy('never@example.org');
  const waits: number[] = [];
  for (let attempt = 1; attempt <= 5; attempt += 1) {
    await pass(never);
    const { rows } = await world.database.db.execute<{ minutes: number }>(
      sql`select round(extract(epoch from next_attempt_at - now()) / 60)::int as minutes from outbox_mails`,
    );
    waits.push(rows[0]?.minutes ?? 0);
    await comeDue();
  }
  expect(waits).toEqual([1, 5, 15, 60, 360]);
  expect(await mailOf(copyId)).toMatchObject({ state: 'waiting', attempts: 5 });
  await pass(never);
  expect(await mailOf(copyId)).toMatchObject({ state: 'failed', attempts: 6, failure: 'server-away' });
  expect(JSON.stringify(await rowsOf(copyId))).not.toContain(token);
  await comeDue();
  await pass();
  expect(mailsTo('never@example.org')).toEqual([]);
});

test('a refused recipient fails at once, with the reason and the server’s words', async () => {
  const { copyId, token } = await makeCopy('refused@example.org');
  await pass();
  const mail = await mailOf(copyId);
  expect(mail).toMatchObject({ state: 'failed', attempts: 1, failure: 'recipient-refused' });
  expect(mail.serverWords).toContain('No such mailbox here');
  expect(JSON.stringify(await rowsOf(copyId))).not.toContain(token);
});

test('a mail whose worker died is sent again after the lease, under the same Message-ID', async () => {
  const { db } = world.database;
  const { copyId } = await makeCopy('lease@example.org');
  const claimed = await claimDueMail(db);
  if (claimed === null) throw new Error('the mail is due');
  // The mail server takes it, and the worker dies before it can write that down.
  expect(await deliverMail(sender, claimed, from)).toBeNull();
  await pass();
  expect(mailsTo('lease@example.org')).toHaveLength(1);
  expect(await mailOf(copyId)).toMatchObject({ state: 'sending', attempts: 1 });
  await comeDue();
  await pass();
  const ids = mailsTo('lease@example.org').map(({ messageId }) => messageId);
  expect(ids).toEqual([`<${claimed.id}@example.org>`, `<${claimed.id}@example.org>`]);
  expect(await mailOf(copyId)).toMatchObject({ state: 'sent', attempts: 2 });
});

test('several workers at once send each mail once', async () => {
  const addresses = Array.from({ length: 6 }, (_, n) => `crowd-${n}@example.org`);
  for (const address of addresses) await makeCopy(address);
  await Promise.all([pass(), pass(), pass()]);
  expect(addresses.map((address) => mailsTo(address).length)).toEqual(addresses.map(() => 1));
});

test('two claims at once never take the same mail', async () => {
  const { db } = world.database;
  await makeCopy('one@example.org');
  const claims = await Promise.all(Array.from({ length: 5 }, () => claimDueMail(db)));
  expect(claims.filter((claim) => claim !== null)).toHaveLength(1);
});

test('a row that cannot be read does not hold the mails behind it up', async () => {
  const { db } = world.database;
  const broken = await makeCopy('broken@example.org');
  await db.update(outboxMails).set({ content: {}, nextAttemptAt: sql`now() - interval '1 hour'` });
  await makeCopy('behind@example.org');
  await pass();
  expect(mailsTo('behind@example.org')).toHaveLength(1);
  expect(await mailOf(broken.copyId)).toMatchObject({ state: 'waiting', attempts: 1 });
});

test('the worker sends what it is told of, and ends with its mail', async () => {
  const { db } = world.database;
  const worker = startMailWorker(db, { smtpUrl: sink.url, from }, pino({ level: 'silent' }));
  const { copyId } = await makeCopy('worker@example.org');
  worker.kick();
  await vi.waitFor(async () => expect(await mailOf(copyId)).toMatchObject({ state: 'sent' }), 10_000);
  await worker.close();
  const { copyId: later } = await makeCopy('closed@example.org');
  worker.kick();
  expect(await mailOf(later)).toMatchObject({ state: 'waiting', attempts: 0 });
});

test('a revoked copy is not sent any more, not even when it was claimed before', async () => {
  const waiting = await makeCopy('revoked-1@example.org');
  await advisor.agent.delete(`/api/grower-copies/${waiting.copyId}`).expect(200);
  expect(await mailOf(waiting.copyId)).toMatchObject({ state: 'failed', failure: 'link-closed' });
  const claimed = await makeCopy('revoked-2@example.org');
  await claimDueMail(world.database.db);
  await advisor.agent.delete(`/api/grower-copies/${claimed.copyId}`).expect(200);
  await comeDue();
  await pass();
  expect(await mailOf(claimed.copyId)).toMatchObject({ state: 'failed', failure: 'link-closed' });
  expect([...mailsTo('revoked-1@example.org'), ...mailsTo('revoked-2@example.org')]).toEqual([]);
  for (const { copyId, token } of [waiting, claimed])
    expect(JSON.stringify(await rowsOf(copyId))).not.toContain(token);
});

test('a waiting mail can be tried now; one that is sent or given up cannot', async () => {
  const { db } = world.database;
  const { copyId } = await makeCopy('now@example.org');
  await db.update(outboxMails).set({ nextAttemptAt: sql`now() + interval '1 hour'` });
  await pass();
  expect(mailsTo('now@example.org')).toEqual([]);
  const retry = () => advisor.agent.post(`/api/grower-copies/${copyId}/mail-retries`);
  await retry().expect(200);
  await pass();
  expect(mailsTo('now@example.org')).toHaveLength(1);
  expect((await retry().expect(409)).body).toEqual({ error: { code: 'state-conflict' } });
});

test('whoever still has the link can send it to another address', async () => {
  const { copyId, token, link } = await makeCopy('refused@example.org');
  await pass();
  const send = (body: object, person = advisor) =>
    person.agent.post(`/api/grower-copies/${copyId}/mails`).send(body);
  const reply = await send({ email: 'right@example.org', token }).expect(200);
  expect(reply.body.copy.mail).toMatchObject({ recipient: 'right@example.org', state: 'waiting' });
  await pass();
  expect(mailsTo('right@example.org')[0]?.text).toContain(link);
  await send({ email: 'right@example.org', token: 'invented' }).expect(404);
  const other = await world.signInAs('advisor');
  await send({ email: 'right@example.org', token }, other).expect(404);
  await advisor.agent.delete(`/api/grower-copies/${copyId}`).expect(200);
  await send({ email: 'right@example.org', token }).expect(410);
});

test('without a mail server copies are made by link alone, and the page is told', async () => {
  const silent = buildWorld(world.database);
  const agent = await silent.signIn(advisor.email);
  const list = await agent.get(`/api/weigh-ups/${weighUpId}/grower-copies`).expect(200);
  expect(list.body.isMailSetUp).toBe(false);
  const make = (email?: string) =>
    agent.post(`/api/weigh-ups/${weighUpId}/grower-copies`).send({ language: 'en', email });
  const refused = await make('nobody@example.org').expect(409);
  expect(refused.body).toEqual({ error: { code: 'mail-not-set-up' } });
  const made = await make().expect(200);
  // Without a public address of its own, a link begins where the request came in.
  expect(made.body.link).toMatch(/^http:\/\/127\.0\.0\.1:\d+\/copy\//);
});

test('settings name both halves of sending mail or neither, and nothing set is nothing said', () => {
  const base = { DATABASE_URL: 'x', SESSION_SECRET: 'a secret of no worth, for tests alone' };
  const read = (environment: NodeJS.ProcessEnv) => readSettings({ ...base, ...environment }, null);
  expect(() => read({ SMTP_URL: sink.url })).toThrow(/MAIL_FROM/);
  expect(() => read({ SMTP_URL: 'http://mail.example.org', MAIL_FROM: from })).toThrow(/SMTP_URL/);
  expect(read({ SMTP_URL: '', MAIL_FROM: '', PUBLIC_URL: '' })).toMatchObject({
    mail: null,
    publicOrigin: null,
  });
  expect(read({ SMTP_URL: sink.url, MAIL_FROM: from }).mail).toEqual({ smtpUrl: sink.url, from });
});
