import { CodedError } from '#shared/error-codes.ts';
import type { GrowerCopyLine } from '#shared/grower-copy.ts';
import type { Database } from '#server/db.ts';
import { bringMailForward } from '#server/mail/outbox-store.ts';
import { lockOwnCopy, queueMailOf, readCopyLine } from './grower-copy-store.ts';
import { hashLinkSecret } from './link-secret.ts';

/**
 * Sends the link of a copy once more, for whoever still has it.
 * @throws CodedError not-found (also for a secret that is not this copy's), link-revoked, link-expired
 */
export async function mailCopyAgain(
  db: Database,
  ownerId: string,
  copyId: string,
  { email, token }: { email: string; token: string },
  origin: string,
): Promise<GrowerCopyLine> {
  return db.transaction(async (tx) => {
    const row = await lockOwnCopy(tx, ownerId, copyId);
    if (row.tokenHash !== hashLinkSecret(token)) throw new CodedError('not-found');
    if (row.revokedAt !== null) throw new CodedError('link-revoked');
    if (row.expiresAt <= new Date()) throw new CodedError('link-expired');
    await queueMailOf(tx, row, { recipient: email, link: `${origin}/copy/${token}` }, ownerId);
    return readCopyLine(tx, copyId);
  });
}

/**
 * Lets a mail that waits for its next try be tried now.
 * @throws CodedError not-found; state-conflict when none of this copy waits
 */
export async function retryMailOfCopy(
  db: Database,
  ownerId: string,
  copyId: string,
): Promise<GrowerCopyLine> {
  return db.transaction(async (tx) => {
    await lockOwnCopy(tx, ownerId, copyId);
    await bringMailForward(tx, copyId);
    return readCopyLine(tx, copyId);
  });
}
