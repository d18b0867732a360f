import { and, desc, eq, gt, isNull, sql } from 'drizzle-orm';
import { growerCopies, weighUps } from '#drizzle/schema/weigh-ups.ts';
import type { Language } from '#shared/account.ts';
import { CodedError } from '#shared/error-codes.ts';
import {
  growerCopySnapshot,
  type CopyMail,
  type GrowerCopyLine,
  type GrowerCopySnapshot,
  type LaterChange,
  type OpenedCopy,
} from '#shared/grower-copy.ts';
import { zoneOfCopy } from '#shared/zone-of-copy.ts';
import { recordAuditEvent } from '#server/audit/audit-store.ts';
import type { Database, DatabaseOrTransaction } from '#server/db.ts';
import { cancelMails, queueCopyMail, readNewestMails } from '#server/mail/outbox-store.ts';
import { presentSentences, type BilingualSentences } from './copy-sentences.ts';
import { keepSentences, readSentencesOf } from './frozen-sentences.ts';
import { findLaterChanges } from './later-changes.ts';
import { hashLinkSecret } from './link-secret.ts';

const dayMs = 24 * 60 * 60 * 1000;

export type CopyRow = typeof growerCopies.$inferSelect;

/** The copies of a weigh-up, newest first. The caller has seen to it that the weigh-up is the person's own. */
export async function listCopies(db: Database, weighUpId: string): Promise<GrowerCopyLine[]> {
  const rows = await db
    .select()
    .from(growerCopies)
    .where(eq(growerCopies.weighUpId, weighUpId))
    .orderBy(desc(growerCopies.createdAt));
  return toLines(db, rows);
}

export type NewCopy = {
  weighUpId: string;
  secret: string;
  language: Language;
  validDays: number;
  snapshot: GrowerCopySnapshot;
  createdBy: string;
  /** The copy whose place it takes; null for a first one. */
  followsId: string | null;
  /** The mail that brings the link, stored with the copy or not at all. */
  mail: { recipient: string; link: string } | null;
};

export async function insertCopy(db: Database, copy: NewCopy): Promise<GrowerCopyLine> {
  const { weighUpId, language, snapshot, createdBy, followsId } = copy;
  return db.transaction(async (tx) => {
    await keepSentences(tx, presentSentences);
    const [row] = await tx
      .insert(growerCopies)
      .values({
        weighUpId,
        language,
        snapshot,
        createdBy,
        followsId,
        tokenHash: hashLinkSecret(copy.secret),
        expiresAt: new Date(Date.now() + copy.validDays * dayMs),
      })
      .returning();
    if (row === undefined) throw new CodedError('internal');
    await recordAuditEvent(tx, {
      actorId: createdBy,
      action: 'grower-copy.made',
      subjectKind: 'grower-copy',
      subjectId: row.id,
      detail: {
        weighUpId,
        expiresAt: row.expiresAt.toISOString(),
        ...(followsId === null ? {} : { follows: followsId }),
      },
    });
    if (copy.mail !== null) await queueMailOf(tx, row, copy.mail, createdBy);
    return toLine(row, [], (await readNewestMails(tx, [row.id])).get(row.id));
  });
}

/** Puts the mail that brings a copy's link into the outbox. */
export async function queueMailOf(
  tx: DatabaseOrTransaction,
  row: CopyRow,
  { recipient, link }: { recipient: string; link: string },
  createdBy: string,
): Promise<void> {
  const snapshot = growerCopySnapshot.parse(row.snapshot);
  const { weighUp, advisorName, advisorEmail, advisorPhone } = snapshot;
  const { growerName, farmName, cropName } = weighUp;
  const expiresAt = row.expiresAt.toISOString();
  const advisor = { advisorName, advisorEmail, advisorPhone };
  const timeZone = zoneOfCopy(snapshot);
  const content = { growerName, farmName, cropName, ...advisor, expiresAt, timeZone, link };
  await queueCopyMail(tx, { copyId: row.id, recipient, language: row.language, content, createdBy });
  await recordAuditEvent(tx, {
    actorId: createdBy,
    action: 'grower-copy.mailed',
    subjectKind: 'grower-copy',
    subjectId: row.id,
  });
}

/**
 * A copy of one's own weigh-up, held until the transaction ends.
 * @throws CodedError not-found, also for a copy of somebody else's weigh-up
 */
export async function lockOwnCopy(
  tx: DatabaseOrTransaction,
  ownerId: string,
  copyId: string,
): Promise<CopyRow> {
  const [held] = await tx
    .select({ copy: growerCopies })
    .from(growerCopies)
    .innerJoin(weighUps, eq(weighUps.id, growerCopies.weighUpId))
    .where(and(eq(growerCopies.id, copyId), eq(weighUps.ownerId, ownerId)))
    .for('update', { of: growerCopies });
  if (held === undefined) throw new CodedError('not-found');
  return held.copy;
}

/** @throws CodedError not-found */
export async function readCopyLine(tx: DatabaseOrTransaction, copyId: string): Promise<GrowerCopyLine> {
  const rows = await tx.select().from(growerCopies).where(eq(growerCopies.id, copyId));
  const [line] = await toLines(tx, rows);
  if (line === undefined) throw new CodedError('not-found');
  return line;
}

/**
 * Closes a link at once; one that is closed already stays as it is.
 * @throws CodedError not-found, also for a copy of somebody else's weigh-up
 */
export async function revokeOwnCopy(db: Database, ownerId: string, copyId: string): Promise<GrowerCopyLine> {
  return db.transaction(async (tx) => {
    const held = await lockOwnCopy(tx, ownerId, copyId);
    if (held.revokedAt === null) {
      await tx
        .update(growerCopies)
        .set({ revokedAt: sql`now()` })
        .where(eq(growerCopies.id, copyId));
      await cancelMails(tx, copyId);
      await recordAuditEvent(tx, {
        actorId: ownerId,
        action: 'grower-copy.revoked',
        subjectKind: 'grower-copy',
        subjectId: copyId,
      });
    }
    return readCopyLine(tx, copyId);
  });
}

/**
 * Opens a copy by the secret of its link.
 * @param isCounted whether this is an opening, and not only another view of what is open already
 * @returns the copy, and the sentences that it is to be told in
 * @throws CodedError link-unknown, link-revoked, link-expired
 */
export async function openCopy(
  db: Database,
  secret: string,
  { isCounted }: { isCounted: boolean },
): Promise<{ copy: OpenedCopy; sentences: BilingualSentences }> {
  const tokenHash = hashLinkSecret(secret);
  const counted = { openings: sql`${growerCopies.openings} + 1`, lastOpenedAt: sql`now()` };
  const [row] = await db
    .update(growerCopies)
    .set(isCounted ? counted : { openings: sql`${growerCopies.openings}` })
    .where(
      and(
        eq(growerCopies.tokenHash, tokenHash),
        isNull(growerCopies.revokedAt),
        gt(growerCopies.expiresAt, sql`now()`),
      ),
    )
    .returning();
  if (row === undefined) return refuseOpening(db, tokenHash);
  const snapshot = growerCopySnapshot.parse(row.snapshot);
  const [laterChanges = []] = await findLaterChanges(db, [snapshot]);
  const copy = { snapshot, language: row.language, expiresAt: row.expiresAt.toISOString(), laterChanges };
  return { copy, sentences: await readSentencesOf(db, snapshot) };
}

async function refuseOpening(db: Database, tokenHash: string): Promise<never> {
  const [closed] = await db
    .select({ revokedAt: growerCopies.revokedAt })
    .from(growerCopies)
    .where(eq(growerCopies.tokenHash, tokenHash));
  if (closed === undefined) throw new CodedError('link-unknown');
  throw new CodedError(closed.revokedAt === null ? 'link-expired' : 'link-revoked');
}

async function toLines(db: DatabaseOrTransaction, rows: readonly CopyRow[]): Promise<GrowerCopyLine[]> {
  const snapshots = rows.map((row) => growerCopySnapshot.parse(row.snapshot));
  const changes = await findLaterChanges(db, snapshots);
  const mails = await readNewestMails(
    db,
    rows.map((row) => row.id),
  );
  return rows.map((row, index) => toLine(row, changes[index] ?? [], mails.get(row.id)));
}

const toLine = (row: CopyRow, laterChanges: LaterChange[], mail: CopyMail | undefined): GrowerCopyLine => ({
  id: row.id,
  language: row.language,
  createdAt: row.createdAt.toISOString(),
  expiresAt: row.expiresAt.toISOString(),
  revokedAt: row.revokedAt?.toISOString() ?? null,
  openings: row.openings,
  lastOpenedAt: row.lastOpenedAt?.toISOString() ?? null,
  laterChanges,
  mail: mail ?? null,
});
