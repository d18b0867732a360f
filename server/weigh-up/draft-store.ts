import { and, desc, eq, sql } from 'drizzle-orm';
import { weighUpDrafts } from '#drizzle/schema/weigh-ups.ts';
import { CodedError } from '#shared/error-codes.ts';
import { draftContent, type DraftContent, type WeighUpDraft } from '#shared/weigh-up-draft.ts';
import type { Database, DatabaseOrTransaction } from '#server/db.ts';

type DraftRow = typeof weighUpDrafts.$inferSelect;

/** Somebody else's draft answers like one that does not exist. */
const isOwn = (ownerId: string, draftId: string) =>
  and(eq(weighUpDrafts.id, draftId), eq(weighUpDrafts.ownerId, ownerId));

const toDraft = ({ id, revision, updatedAt, content }: DraftRow): WeighUpDraft => ({
  ...{ id, revision, updatedAt: updatedAt.toISOString() },
  content: draftContent.parse(content),
});

/** The drafts of one person, last changed first. */
export async function listOwnDrafts(db: Database, ownerId: string): Promise<WeighUpDraft[]> {
  const rows = await db
    .select()
    .from(weighUpDrafts)
    .where(eq(weighUpDrafts.ownerId, ownerId))
    .orderBy(desc(weighUpDrafts.updatedAt), weighUpDrafts.id);
  return rows.map(toDraft);
}

export async function insertDraft(
  db: Database,
  ownerId: string,
  content: DraftContent,
): Promise<WeighUpDraft> {
  const [row] = await db.insert(weighUpDrafts).values({ ownerId, content }).returning();
  if (row === undefined) throw new CodedError('internal');
  return toDraft(row);
}

/** @throws CodedError not-found, revision-conflict */
export async function updateDraft(
  db: Database,
  ownerId: string,
  at: { draftId: string; revision: number },
  content: DraftContent,
): Promise<WeighUpDraft> {
  return db.transaction(async (tx) => {
    const own = isOwn(ownerId, at.draftId);
    const [held] = await tx.select().from(weighUpDrafts).where(own).for('update');
    if (held === undefined) throw new CodedError('not-found');
    if (held.revision !== at.revision) throw new CodedError('revision-conflict');
    const [row] = await tx
      .update(weighUpDrafts)
      .set({ content, revision: at.revision + 1, updatedAt: sql`now()` })
      .where(own)
      .returning();
    return toDraft(row ?? held);
  });
}

/** Deletes a draft; one that is gone already, or is somebody else's, is left alone in silence. */
export async function deleteOwnDraft(
  db: DatabaseOrTransaction,
  ownerId: string,
  draftId: string,
): Promise<void> {
  await db.delete(weighUpDrafts).where(isOwn(ownerId, draftId));
}
