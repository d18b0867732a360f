import { and, desc, eq, gt, isNull, sql } from 'drizzle-orm';
import { growerCopies, weighUps } from '#drizzle/schema/weigh-ups.ts';
import type { Language } from '#shared/account.ts';
import { CodedError } from '#shared/error-codes.ts';
import {
  growerCopySnapshot,
  type GrowerCopyLine,
  type GrowerCopySnapshot,
  type LaterChange,
} from '#shared/grower-copy.ts';
import { recordAuditEvent } from '#server/audit/audit-store.ts';
import type { Database, DatabaseOrTransaction } from '#server/db.ts';
import { findLaterChanges } from './later-changes.ts';
import { hashLinkSecret } from './link-secret.ts';

const dayMs = 24 * 60 * 60 * 1000;

type CopyRow = typeof growerCopies.$inferSelect;

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
};

export async function insertCopy(db: Database, copy: NewCopy): Promise<GrowerCopyLine> {
  const { weighUpId, language, snapshot, createdBy } = copy;
  return db.transaction(async (tx) => {
    const [row] = await tx
      .insert(growerCopies)
      .values({
        weighUpId,
        language,
        snapshot,
        createdBy,
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
      detail: { weighUpId, expiresAt: row.expiresAt.toISOString() },
    });
    return toLine(row, []);
  });
}

/**
 * Closes a link at once; one that is closed already stays as it is.
 * @throws CodedError not-found, also for a copy of somebody else's weigh-up
 */
export async function revokeOwnCopy(db: Database, ownerId: string, copyId: string): Promise<GrowerCopyLine> {
  return db.transaction(async (tx) => {
    const [held] = await tx
      .select({ revokedAt: growerCopies.revokedAt })
      .from(growerCopies)
      .innerJoin(weighUps, eq(weighUps.id, growerCopies.weighUpId))
      .where(and(eq(growerCopies.id, copyId), eq(weighUps.ownerId, ownerId)))
      .for('update', { of: growerCopies });
    if (held === undefined) throw new CodedError('not-found');
    if (held.revokedAt === null) {
      await tx
        .update(growerCopies)
        .set({ revokedAt: sql`now()` })
        .where(eq(growerCopies.id, copyId));
      await recordAuditEvent(tx, {
        actorId: ownerId,
        action: 'grower-copy.revoked',
        subjectKind: 'grower-copy',
        subjectId: copyId,
      });
    }
    const rows = await tx.select().from(growerCopies).where(eq(growerCopies.id, copyId));
    const [line] = await toLines(tx, rows);
    if (line === undefined) throw new CodedError('not-found');
    return line;
  });
}

export type OpenedCopy = {
  snapshot: GrowerCopySnapshot;
  language: Language;
  expiresAt: string;
  laterChanges: LaterChange[];
};

/**
 * Opens a copy by the secret of its link, and counts the opening.
 * @throws CodedError link-unknown, link-revoked, link-expired
 */
export async function openCopy(db: Database, secret: string): Promise<OpenedCopy> {
  const tokenHash = hashLinkSecret(secret);
  const [row] = await db
    .update(growerCopies)
    .set({ openings: sql`${growerCopies.openings} + 1`, lastOpenedAt: sql`now()` })
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
  return { snapshot, language: row.language, expiresAt: row.expiresAt.toISOString(), laterChanges };
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
  return rows.map((row, index) => toLine(row, changes[index] ?? []));
}

const toLine = (row: CopyRow, laterChanges: LaterChange[]): GrowerCopyLine => ({
  id: row.id,
  language: row.language,
  createdAt: row.createdAt.toISOString(),
  expiresAt: row.expiresAt.toISOString(),
  revokedAt: row.revokedAt?.toISOString() ?? null,
  openings: row.openings,
  lastOpenedAt: row.lastOpenedAt?.toISOString() ?? null,
  laterChanges,
});
