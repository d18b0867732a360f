import { asc, avg, desc, eq } from 'drizzle-orm';
import { users } from '#drizzle/schema/accounts.ts';
import { crops, traits } from '#drizzle/schema/crops.ts';
import { versionFits } from '#drizzle/schema/trials.ts';
import { usualVariances } from '#drizzle/schema/usual-variances.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';
import { newestVersions } from '#server/trials/latest-versions.ts';

/** An estimate as it is stored: variances in the trait's unit squared, newest first among those of its trait. */
export type StoredUsualVariances = typeof usualVariances.$inferSelect & {
  /** null: estimated by a command */
  estimatedByName: string | null;
};

export type NewUsualVariances = typeof usualVariances.$inferInsert;

/** Every estimate there is, newest first. */
export async function listStoredVariances(db: DatabaseOrTransaction): Promise<StoredUsualVariances[]> {
  const rows = await db
    .select({ stored: usualVariances, estimatedByName: users.name })
    .from(usualVariances)
    .leftJoin(users, eq(users.id, usualVariances.estimatedBy))
    .orderBy(desc(usualVariances.estimatedAt), usualVariances.id);
  return rows.map(({ stored, estimatedByName }) => ({ ...stored, estimatedByName }));
}

/** A trait that is measured, not rated. */
export type MeasuredTrait = {
  id: string;
  cropId: string;
  slug: string;
  /** Of the crop, t/ha. */
  typicalYield: number;
  /** Mean over the published trials; null where there are none. */
  mean: number | null;
};

/** The measured traits of every crop, crops by name and traits in their crop's order. */
export async function listMeasuredTraits(db: DatabaseOrTransaction): Promise<MeasuredTrait[]> {
  const newest = newestVersions(db);
  const means = db
    .select({ traitId: versionFits.traitId, mean: avg(versionFits.grandMean).mapWith(Number).as('mean') })
    .from(versionFits)
    .innerJoin(newest, eq(newest.versionId, versionFits.versionId))
    .where(eq(newest.action, 'publish'))
    .groupBy(versionFits.traitId)
    .as('trait_means');
  return db
    .select({
      id: traits.id,
      cropId: traits.cropId,
      slug: traits.slug,
      typicalYield: crops.typicalYield,
      mean: means.mean,
    })
    .from(traits)
    .innerJoin(crops, eq(crops.id, traits.cropId))
    .leftJoin(means, eq(means.traitId, traits.id))
    .where(eq(traits.kind, 'numeric'))
    .orderBy(asc(crops.nameEn), asc(traits.position), asc(traits.slug));
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
