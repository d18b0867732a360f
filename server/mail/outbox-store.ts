import { and, desc, eq, inArray, lte, sql, type SQL } from 'drizzle-orm';
import { outboxMails } from '#drizzle/schema/outbox.ts';
import { growerCopies } from '#drizzle/schema/weigh-ups.ts';
import type { Language } from '#shared/account.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { CopyMail } from '#shared/grower-copy.ts';
import type { Database, DatabaseOrTransaction } from '#server/db.ts';
import type { CopyMailContent } from './mail-content.ts';
import { readFailure, writeFailure, type FailedSending } from './mail-failure.ts';

/** Minutes to wait after each failed try; after the last one the mail is given up. */
const retryMinutes = [1, 5, 15, 60, 360];

/** Seconds for which a claimed mail belongs to its worker. Whoever died with one frees it by this. */
const leaseSeconds = 600;

export type ClaimedMail = {
  id: string;
  recipient: string;
  language: Language;
  /** CopyMailContent, read at its sending: one that cannot be read must not hold the others up. */
  content: unknown;
  /** Which try this is, from 1; also tells this claim from a later one. */
  attempt: number;
  /** The link still opens; a mail with a closed one is not sent. */
  isLinkOpen: boolean;
};

type NewCopyMail = {
  copyId: string;
  recipient: string;
  language: Language;
  content: CopyMailContent;
  createdBy: string;
};

const inSeconds = (seconds: number): SQL => sql`now() + make_interval(secs => ${seconds})`;
const withoutLink = sql`jsonb_set(${outboxMails.content}, '{link}', 'null')`;

/** Puts a mail into the outbox, in the transaction that makes what it brings. */
export async function queueCopyMail(tx: DatabaseOrTransaction, mail: NewCopyMail): Promise<void> {
  const { copyId, ...row } = mail;
  await tx.insert(outboxMails).values({ ...row, growerCopyId: copyId });
}

/**
 * Takes the mail that is due longest, for this worker alone: others pass over a row that is being claimed.
 * A mail whose worker died is due again when its lease has run out.
 */
export async function claimDueMail(db: Database): Promise<ClaimedMail | null> {
  return db.transaction(async (tx) => {
    const [due] = await tx
      .select({ id: outboxMails.id, copyId: outboxMails.growerCopyId })
      .from(outboxMails)
      .where(
        and(inArray(outboxMails.state, ['waiting', 'sending']), lte(outboxMails.nextAttemptAt, sql`now()`)),
      )
      .orderBy(outboxMails.nextAttemptAt)
      .limit(1)
      .for('update', { skipLocked: true });
    if (due === undefined) return null;
    const [row] = await tx
      .update(outboxMails)
      .set({
        state: 'sending',
        attempts: sql`${outboxMails.attempts} + 1`,
        nextAttemptAt: inSeconds(leaseSeconds),
      })
      .where(eq(outboxMails.id, due.id))
      .returning();
    if (row === undefined) return null;
    return {
      id: row.id,
      recipient: row.recipient,
      language: row.language,
      content: row.content,
      attempt: row.attempts,
      isLinkOpen: await isCopyOpen(tx, due.copyId),
    };
  });
}

async function isCopyOpen(tx: DatabaseOrTransaction, copyId: string | null): Promise<boolean> {
  if (copyId === null) return false;
  const [copy] = await tx
    .select({ isOpen: sql<boolean>`${growerCopies.revokedAt} is null and ${growerCopies.expiresAt} > now()` })
    .from(growerCopies)
    .where(eq(growerCopies.id, copyId));
  return copy?.isOpen === true;
}

/** A claim that ran out and was taken by another worker no longer changes the row. */
const stillClaimed = (mail: Pick<ClaimedMail, 'id' | 'attempt'>) =>
  and(eq(outboxMails.id, mail.id), eq(outboxMails.state, 'sending'), eq(outboxMails.attempts, mail.attempt));

/** The mail is away: its link's secret is forgotten. */
export async function recordSent(db: Database, mail: ClaimedMail): Promise<void> {
  await db
    .update(outboxMails)
    .set({ state: 'sent', sentAt: sql`now()`, lastError: null, content: withoutLink })
    .where(stillClaimed(mail));
}

/** Sets the time of the next try, or gives the mail up and forgets its link's secret. */
export async function recordFailure(db: Database, mail: ClaimedMail, failure: FailedSending): Promise<void> {
  const minutes = retryMinutes[mail.attempt - 1];
  const lastError = writeFailure(failure);
  await db
    .update(outboxMails)
    .set(
      failure.isFinal || minutes === undefined
        ? { state: 'failed', lastError, content: withoutLink }
        : { state: 'waiting', lastError, nextAttemptAt: inSeconds(60 * minutes) },
    )
    .where(stillClaimed(mail));
}

/** The newest mail of each copy; a copy without one has no entry. */
export async function readNewestMails(
  db: DatabaseOrTransaction,
  copyIds: readonly string[],
): Promise<Map<string, CopyMail>> {
  if (copyIds.length === 0) return new Map();
  const rows = await db
    .selectDistinctOn([outboxMails.growerCopyId])
    .from(outboxMails)
    .where(inArray(outboxMails.growerCopyId, [...copyIds]))
    .orderBy(outboxMails.growerCopyId, desc(outboxMails.createdAt));
  return new Map(
    rows.flatMap((row) => (row.growerCopyId === null ? [] : [[row.growerCopyId, toCopyMail(row)]])),
  );
}

function toCopyMail(row: typeof outboxMails.$inferSelect): CopyMail {
  const { reason, words } = readFailure(row.lastError);
  return {
    recipient: row.recipient,
    state: row.state,
    attempts: row.attempts,
    sentAt: row.sentAt?.toISOString() ?? null,
    nextAttemptAt: row.state === 'waiting' ? row.nextAttemptAt.toISOString() : null,
    failure: reason,
    serverWords: words === '' ? null : words,
  };
}

/**
 * Lets a mail that waits for its next try be tried at once.
 * @throws CodedError state-conflict when none of the copy waits: the secret of its link is gone by then
 */
export async function bringMailForward(tx: DatabaseOrTransaction, copyId: string): Promise<void> {
  const rows = await tx
    .update(outboxMails)
    .set({ nextAttemptAt: sql`now()` })
    .where(and(eq(outboxMails.growerCopyId, copyId), eq(outboxMails.state, 'waiting')))
    .returning({ id: outboxMails.id });
  if (rows.length === 0) throw new CodedError('state-conflict');
}

/** Gives up what still waits for a copy that was revoked: its link opens nothing any more. */
export async function cancelMails(tx: DatabaseOrTransaction, copyId: string): Promise<void> {
  const lastError = writeFailure({ reason: 'link-closed', words: '' });
  await tx
    .update(outboxMails)
    .set({ state: 'failed', lastError, content: withoutLink })
    .where(and(eq(outboxMails.growerCopyId, copyId), eq(outboxMails.state, 'waiting')));
}
