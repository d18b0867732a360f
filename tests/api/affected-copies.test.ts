import { eq, sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { auditEvents } from '#drizzle/schema/audit.ts';
import { growerCopies } from '#drizzle/schema/weigh-ups.ts';
import { openMailSender, type MailSender } from '#server/mail/mail-sender.ts';
import { sendDueMails } from '#server/mail/outbox-worker.ts';
import { openMailSink } from '#server/setup/mail-sink.mjs';
import type { SignedIn } from './api-world.ts';
import { openRecordWorld, type RecordWorld } from './record-world.ts';
import { republish, withdraw } from './small-world.ts';

const from = 'gavelrow@example.org';

let sink: Awaited<ReturnType<typeof openMailSink>>;
let sender: MailSender;
let record: RecordWorld;
let corrected: string;
beforeAll(async () => {
  sink = await openMailSink();
  sender = openMailSender({ smtpUrl: sink.url, from });
  record = await openRecordWorld({
    SMTP_URL: sink.url,
    MAIL_FROM: from,
    PUBLIC_URL: 'https://trials.example.org/',
  });
});
afterAll(async () => {
  sender.close();
  await sink.close();
  await record.world.close();
});

const pass = () => sendDueMails(record.world.database.db, sender, from);
const trialId = (name: string): string => {
  const id = record.trialIds.get(name);
  if (id === undefined) throw new Error(`no trial ${name}`);
  return id;
};

async function handOver(weighUpId: string, wish: { email?: string; validDays?: number } = {}) {
  const { body } = await record.advisor.agent
    .post(`/api/weigh-ups/${weighUpId}/grower-copies`)
    .send({ language: 'fr', ...wish })
    .expect(200);
  return { copyId: body.copy.id as string, path: body.path as string };
}

const affected = async (person: SignedIn = record.advisor) =>
  (await person.agent.get('/api/affected-copies').expect(200)).body.copies;
const renew = (copyId: string, isSent = false, person: SignedIn = record.advisor) =>
  person.agent.post(`/api/grower-copies/${copyId}/fresh`).send({ isSent });
const rowOf = async (copyId: string) => {
  const [row] = await record.world.database.db.select().from(growerCopies).where(eq(growerCopies.id, copyId));
  if (row === undefined) throw new Error('no such copy');
  return row;
};

/** Excludes a plot of the trial and publishes that, as a desk corrects what was wrong. */
async function correct(name: string): Promise<void> {
  const { db } = record.world.database;
  corrected = trialId(name);
  await db.execute(sql`update plots set excluded_reason = 'drowned ' || now()
    where trial_id = ${corrected} and plot_number = '102'`);
  await republish(db, corrected);
}

test('a correction brings every open copy that rests on the trial to its advisor, and to nobody else', async () => {
  const ada = await record.make();
  const bea = await record.make({ growerName: 'Bea Tarn', seasonFrom: 2024 });
  const first = await handOver(ada.id);
  const revoked = await handOver(ada.id);
  await record.advisor.agent.delete(`/api/grower-copies/${revoked.copyId}`).expect(200);
  const without = await handOver(bea.id);
  expect(await affected()).toEqual([]);
  await correct('elm 2023');
  expect(await affected()).toEqual([
    {
      copyId: first.copyId,
      weighUpId: ada.id,
      growerName: 'Ada Quern',
      farmName: 'Long Furlong',
      cropName: ada.cropName,
      madeAt: expect.any(String),
      laterChanges: [{ trialId: corrected, siteName: 'ELM', season: 2023, change: 'corrected' }],
      sentTo: null,
    },
  ]);
  await withdraw(record.world.database.db, trialId('fir 2024'));
  const both = await affected();
  expect(both.map(({ copyId }: { copyId: string }) => copyId)).toEqual([first.copyId, without.copyId]);
  expect(both[0].laterChanges).toHaveLength(2);
  expect(await affected(record.other)).toEqual([]);
});

test('one click makes a fresh copy in the same language and for as long; the old one keeps its numbers', async () => {
  const weighUp = await record.make();
  const old = await handOver(weighUp.id, { validDays: 90 });
  await correct('gorse 2024');
  const before = await rowOf(old.copyId);
  const { body } = await renew(old.copyId).expect(200);
  expect(body.link).toMatch(/^https:\/\/trials\.example\.org\/copy\/[A-Za-z0-9_-]{22,}$/);
  expect(body.copy.language).toBe('fr');
  const fresh = await rowOf(body.copy.id);
  const days = (fresh.expiresAt.getTime() - fresh.createdAt.getTime()) / 86_400_000;
  expect(Math.round(days)).toBe(90);
  expect((await rowOf(old.copyId)).snapshot).toEqual(before.snapshot);
  expect(body.copy.laterChanges).toEqual([]);
  expect((await affected()).map(({ copyId }: { copyId: string }) => copyId)).not.toContain(old.copyId);
  const events = await record.world.database.db
    .select()
    .from(auditEvents)
    .where(eq(auditEvents.subjectId, fresh.id));
  expect(events[0]).toMatchObject({ action: 'grower-copy.made', detail: { follows: old.copyId } });
});

test('a fresh copy goes where the old one went, and its link opens', async () => {
  const weighUp = await record.make({ growerName: 'Cleo Marsh' });
  const old = await handOver(weighUp.id, { email: 'cleo@example.org' });
  await pass();
  await correct('gorse 2025');
  const line = (await affected()).find(({ copyId }: { copyId: string }) => copyId === old.copyId);
  expect(line.sentTo).toBe('cleo@example.org');
  const { body } = await renew(old.copyId, true).expect(200);
  await pass();
  const mails = sink.mails().filter(({ recipients }) => recipients.includes('cleo@example.org'));
  expect(mails).toHaveLength(2);
  expect(mails.filter(({ text }) => text.includes(`\n${body.link}\n`))).toHaveLength(1);
});

test('two clicks make one fresh copy; a revoked one leaves its place to another', async () => {
  const weighUp = await record.make();
  const old = await handOver(weighUp.id);
  await correct('elm 2024');
  const replies = await Promise.all([renew(old.copyId), renew(old.copyId)]);
  expect(replies.map(({ status }) => status).sort()).toEqual([200, 409]);
  const made = replies.find(({ status }) => status === 200)?.body.copy.id;
  await renew(old.copyId).expect(409, { error: { code: 'state-conflict' } });
  await record.advisor.agent.delete(`/api/grower-copies/${made}`).expect(200);
  expect((await affected()).map(({ copyId }: { copyId: string }) => copyId)).toContain(old.copyId);
  await renew(old.copyId).expect(200);
});

test('a copy that is revoked, expired or somebody else’s is not made afresh', async () => {
  const weighUp = await record.make();
  const revoked = await handOver(weighUp.id);
  await record.advisor.agent.delete(`/api/grower-copies/${revoked.copyId}`).expect(200);
  await renew(revoked.copyId).expect(410, { error: { code: 'link-revoked' } });
  const expired = await handOver(weighUp.id);
  await record.world.database.db
    .update(growerCopies)
    .set({ createdAt: sql`now() - interval '2 days'`, expiresAt: sql`now() - interval '1 day'` })
    .where(eq(growerCopies.id, expired.copyId));
  await renew(expired.copyId).expect(410, { error: { code: 'link-expired' } });
  const open = await handOver(weighUp.id);
  await renew(open.copyId, false, record.other).expect(404, { error: { code: 'not-found' } });
});
