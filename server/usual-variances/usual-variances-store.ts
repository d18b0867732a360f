import { desc, eq } from 'drizzle-orm';
import { users } from '#drizzle/schema/accounts.ts';
import { traits } from '#drizzle/schema/crops.ts';
import { usualVariances } from '#drizzle/schema/usual-variances.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';

/** An estimate as it is stored: variances in the trait's unit squared, newest first among those of its trait. */
export type StoredUsualVariances = typeof usualVariances.$inferSelect & {
  traitSlug: string;
  /** null: estimated by a command */
  estimatedByName: string | null;
};

export type NewUsualVariances = typeof usualVariances.$inferInsert;

/** Every estimate of a crop's traits, or of all crops, newest first. */
export async function listStoredVariances(
  db: DatabaseOrTransaction,
  cropId?: string,
): Promise<StoredUsualVariances[]> {
  const rows = await db
    .select({ stored: usualVariances, traitSlug: traits.slug, estimatedByName: users.name })
    .from(usualVariances)
    .innerJoin(traits, eq(traits.id, usualVariances.traitId))
    .leftJoin(users, eq(users.id, usualVariances.estimatedBy))
    .where(cropId === undefined ? undefined : eq(usualVariances.cropId, cropId))
    .orderBy(desc(usualVariances.estimatedAt), usualVariances.id);
  return rows.map(({ stored, ...named }) => ({ ...stored, ...named }));
}

/** Usual variances of one trait as they hold now. */
export type UsualOfTrait = {
  id: string;
  traitId: string;
  site: number;
  season: number;
  rest: number;
  estimatedAt: Date;
};

/** The newest estimate of each trait of a crop that has one: these count. */
export function readUsualVariances(db: DatabaseOrTransaction, cropId: string): Promise<UsualOfTrait[]> {
  return db
    .selectDistinctOn([usualVariances.traitId], {
      id: usualVariances.id,
      traitId: usualVariances.traitId,
      site: usualVariances.site,
      season: usualVariances.season,
      rest: usualVariances.rest,
      estimatedAt: usualVariances.estimatedAt,
    })
    .from(usualVariances)
    .where(eq(usualVariances.cropId, cropId))
    .orderBy(usualVariances.traitId, desc(usualVariances.estimatedAt), usualVariances.id);
}

export async function insertUsualVariances(
  tx: DatabaseOrTransaction,
  rows: readonly NewUsualVariances[],
): Promise<void> {
  if (rows.length > 0) await tx.insert(usualVariances).values([...rows]);
}
