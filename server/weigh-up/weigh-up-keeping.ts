import { eq, sql } from 'drizzle-orm';
import { weighUpCandidates, weighUps } from '#drizzle/schema/weigh-ups.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { WeighUp } from '#shared/weigh-up.ts';
import { recordAuditEvent } from '#server/audit/audit-store.ts';
import type { Database } from '#server/db.ts';
import { isOwn, readOwnWeighUp } from './weigh-up-store.ts';

/**
 * Puts a weigh-up away, or brings it back; one that is there already stays as it is. It stays readable, and so do its copies.
 * @returns when it was put away, or null
 * @throws CodedError not-found, also for somebody else's
 */
export async function setArchived(
  db: Database,
  ownerId: string,
  weighUpId: string,
  isArchived: boolean,
): Promise<Date | null> {
  return db.transaction(async (tx) => {
    const [held] = await tx
      .select({ archivedAt: weighUps.archivedAt })
      .from(weighUps)
      .where(isOwn(ownerId, weighUpId))
      .for('update');
    if (held === undefined) throw new CodedError('not-found');
    if ((held.archivedAt !== null) === isArchived) return held.archivedAt;
    const [row] = await tx
      .update(weighUps)
      .set({ archivedAt: isArchived ? sql`now()` : null })
      .where(eq(weighUps.id, weighUpId))
      .returning({ archivedAt: weighUps.archivedAt });
    await recordAuditEvent(tx, {
      actorId: ownerId,
      action: isArchived ? 'weigh-up.archived' : 'weigh-up.brought-back',
      subjectKind: 'weigh-up',
      subjectId: weighUpId,
    });
    return row?.archivedAt ?? null;
  });
}

/**
 * Asks the same question a season later: the span moves on by one season and keeps its length. Trials that were ticked
 * off stay so, with their reasons; what was decided stays with the season it was decided in.
 * @throws CodedError not-found, also for somebody else's
 */
export async function duplicateToNextSeason(
  db: Database,
  ownerId: string,
  weighUpId: string,
): Promise<WeighUp> {
  return db.transaction(async (tx) => {
    const [held] = await tx.select().from(weighUps).where(isOwn(ownerId, weighUpId));
    if (held === undefined) throw new CodedError('not-found');
    const { id: _id, createdAt: _created, updatedAt: _updated, ...question } = held;
    const [made] = await tx
      .insert(weighUps)
      .values({
        ...question,
        seasonFrom: held.seasonFrom + 1,
        seasonTo: held.seasonTo + 1,
        decision: null,
        archivedAt: null,
        revision: 1,
      })
      .returning({ id: weighUps.id });
    if (made === undefined) throw new CodedError('internal');
    const candidates = await tx
      .select({ varietyId: weighUpCandidates.varietyId, position: weighUpCandidates.position })
      .from(weighUpCandidates)
      .where(eq(weighUpCandidates.weighUpId, weighUpId));
    await tx.insert(weighUpCandidates).values(candidates.map((one) => ({ ...one, weighUpId: made.id })));
    await recordAuditEvent(tx, {
      actorId: ownerId,
      action: 'weigh-up.duplicated',
      subjectKind: 'weigh-up',
      subjectId: made.id,
      detail: { from: weighUpId },
    });
    return readOwnWeighUp(tx, ownerId, made.id);
  });
}
