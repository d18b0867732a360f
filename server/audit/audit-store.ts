import { desc, eq, lt } from 'drizzle-orm';
import { users } from '#drizzle/schema/accounts.ts';
import { auditEvents } from '#drizzle/schema/audit.ts';
import type { AuditEvent } from '#shared/account.ts';
import type { Database, DatabaseOrTransaction } from '#server/db.ts';

/** Events a page of the log holds. */
const pageSize = 100;

export type NewAuditEvent = {
  /** null when a command did it, not a signed-in person */
  actorId: string | null;
  /** subject and past participle: `account.created`, `trial.published` */
  action: string;
  subjectKind: 'account' | 'trial' | 'weigh-up' | 'grower-copy' | 'crop';
  subjectId: string;
  detail?: Record<string, unknown>;
  /** now unless an older record is being entered */
  at?: Date;
};

/** Writes an event in the transaction of the change it tells of, so that neither is stored without the other. */
export async function recordAuditEvent(tx: DatabaseOrTransaction, event: NewAuditEvent): Promise<void> {
  await tx.insert(auditEvents).values(event);
}

/**
 * A page of the log, newest first.
 * @param before id of the last event of the page before; undefined for the first page
 */
export async function listAuditPage(db: Database, before: number | undefined): Promise<AuditEvent[]> {
  const rows = await db
    .select({
      id: auditEvents.id,
      at: auditEvents.at,
      actorName: users.name,
      action: auditEvents.action,
      subjectKind: auditEvents.subjectKind,
      subjectId: auditEvents.subjectId,
      detail: auditEvents.detail,
    })
    .from(auditEvents)
    .leftJoin(users, eq(users.id, auditEvents.actorId))
    .where(before === undefined ? undefined : lt(auditEvents.id, before))
    .orderBy(desc(auditEvents.id))
    .limit(pageSize);
  return rows.map((row) => ({ ...row, at: row.at.toISOString() }));
}
