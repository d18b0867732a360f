import { and, desc, eq, isNotNull, lt, sql } from 'drizzle-orm';
import { weighUps } from '#drizzle/schema/weigh-ups.ts';
import { decision, type Decision, type EarlierDecision } from '#shared/decision.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { WeighUp } from '#shared/weigh-up.ts';
import { recordAuditEvent } from '#server/audit/audit-store.ts';
import type { Database } from '#server/db.ts';
import { isOwn, lockOwnWeighUp, readOwnWeighUp } from './weigh-up-store.ts';

/** Seasons looked back on: what lies further back was decided on other varieties. */
const mostEarlier = 5;

/**
 * What was decided on a weigh-up, and for the same farm and crop in earlier seasons, newest first.
 * @throws CodedError not-found, also for somebody else's
 */
export async function readOwnDecisions(
  db: Database,
  ownerId: string,
  weighUpId: string,
): Promise<{ decision: Decision | null; earlier: EarlierDecision[] }> {
  const [own] = await db.select().from(weighUps).where(isOwn(ownerId, weighUpId));
  if (own === undefined) throw new CodedError('not-found');
  const earlier = await db
    .select({ weighUpId: weighUps.id, decision: weighUps.decision })
    .from(weighUps)
    .where(
      and(
        eq(weighUps.ownerId, ownerId),
        eq(weighUps.cropId, own.cropId),
        sql`lower(${weighUps.growerName}) = lower(${own.growerName})`,
        sql`lower(${weighUps.farmName}) = lower(${own.farmName})`,
        lt(weighUps.seasonTo, own.seasonTo),
        isNotNull(weighUps.decision),
      ),
    )
    .orderBy(desc(weighUps.seasonTo), desc(weighUps.updatedAt))
    .limit(mostEarlier);
  return {
    decision: decision.nullable().parse(own.decision),
    earlier: earlier.map((row) => ({ weighUpId: row.weighUpId, decision: decision.parse(row.decision) })),
  };
}

/**
 * Keeps a decision, or with null takes it back.
 * @throws CodedError not-found, revision-conflict
 */
export async function saveDecision(
  db: Database,
  ownerId: string,
  at: { weighUpId: string; revision: number },
  taken: Decision | null,
): Promise<WeighUp> {
  return db.transaction(async (tx) => {
    await lockOwnWeighUp(tx, ownerId, at.weighUpId, at.revision);
    await tx
      .update(weighUps)
      .set({ decision: taken, revision: at.revision + 1, updatedAt: sql`now()` })
      .where(eq(weighUps.id, at.weighUpId));
    await recordAuditEvent(tx, {
      actorId: ownerId,
      action: taken === null ? 'weigh-up.decision-taken-back' : 'weigh-up.decided',
      subjectKind: 'weigh-up',
      subjectId: at.weighUpId,
      ...(taken !== null && { detail: { choice: taken.choice, variety: taken.varietyName } }),
    });
    return readOwnWeighUp(tx, ownerId, at.weighUpId);
  });
}
