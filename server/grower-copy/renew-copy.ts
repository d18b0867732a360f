import { and, eq, isNull } from 'drizzle-orm';
import { growerCopies } from '#drizzle/schema/weigh-ups.ts';
import type { Me } from '#shared/account.ts';
import { CodedError } from '#shared/error-codes.ts';
import { growerCopySnapshot, type GrowerCopyLine } from '#shared/grower-copy.ts';
import { isUniqueViolation, type Database } from '#server/db.ts';
import { readNewestMails } from '#server/mail/outbox-store.ts';
import { lockOwnCopy } from './grower-copy-store.ts';
import { makeCopy } from './make-copy.ts';

const dayMs = 24 * 60 * 60 * 1000;

/**
 * A fresh copy in place of one whose trials have changed: the same weigh-up weighed anew, in the same language and for
 * as long. The old one stays as it is.
 * @param origin public address that the mailed link begins with; null where nothing is to be sent
 * @throws CodedError not-found, link-revoked, link-expired, state-conflict when a fresh one has been made already
 */
export async function renewCopy(
  db: Database,
  advisor: Pick<Me, 'id' | 'name' | 'email' | 'phone'>,
  copyId: string,
  origin: string | null,
): Promise<{ copy: GrowerCopyLine; path: string; isMailed: boolean }> {
  const { old, mail } = await db.transaction(async (tx) => {
    const row = await lockOwnCopy(tx, advisor.id, copyId);
    if (row.revokedAt !== null) throw new CodedError('link-revoked');
    if (row.expiresAt <= new Date()) throw new CodedError('link-expired');
    const [fresh] = await tx
      .select({ id: growerCopies.id })
      .from(growerCopies)
      .where(and(eq(growerCopies.followsId, copyId), isNull(growerCopies.revokedAt)));
    if (fresh !== undefined) throw new CodedError('state-conflict');
    return { old: row, mail: (await readNewestMails(tx, [copyId])).get(copyId) };
  });
  const recipient = origin !== null && mail?.state === 'sent' ? mail.recipient : null;
  const validDays = Math.max(1, Math.round((old.expiresAt.getTime() - old.createdAt.getTime()) / dayMs));
  try {
    const made = await makeCopy(db, advisor, old.weighUpId, {
      language: old.language,
      validDays,
      timeZone: growerCopySnapshot.parse(old.snapshot).timeZone,
      followsId: copyId,
      ...(recipient !== null && origin !== null && { mail: { recipient, origin } }),
    });
    return { ...made, isMailed: recipient !== null };
  } catch (error) {
    // Weighing anew takes a while: somebody may have made a fresh one in the meantime.
    if (isUniqueViolation(error)) throw new CodedError('state-conflict', { cause: error });
    throw error;
  }
}
