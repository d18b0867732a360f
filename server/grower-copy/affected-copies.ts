import { and, asc, eq, gt, isNull, sql } from 'drizzle-orm';
import { alias } from 'drizzle-orm/pg-core';
import { crops } from '#drizzle/schema/crops.ts';
import { growerCopies, weighUps } from '#drizzle/schema/weigh-ups.ts';
import type { AffectedCopy } from '#shared/affected-copy.ts';
import { growerCopySnapshot } from '#shared/grower-copy.ts';
import type { Database } from '#server/db.ts';
import { readNewestMails } from '#server/mail/outbox-store.ts';
import { newestVersions } from '#server/trials/latest-versions.ts';
import { findLaterChanges } from './later-changes.ts';

/**
 * The person's open copies whose trials were corrected or withdrawn since, and which no fresh copy has followed. The
 * database finds them by the trials' versions alone, so that only what is affected is read whole.
 */
export async function findAffectedCopies(db: Database, ownerId: string): Promise<AffectedCopy[]> {
  const newest = newestVersions(db);
  const fresh = alias(growerCopies, 'fresh');
  const hasLaterVersion = sql`exists (
    select 1 from jsonb_to_recordset(${growerCopies.snapshot} -> 'result' -> 'trials')
      as used ("trialId" uuid, version integer)
    join ${newest} on ${newest.trialId} = used."trialId" and ${newest.number} > used.version)`;
  const rows = await db
    .select({ copy: growerCopies, weighUp: weighUps, crop: crops })
    .from(growerCopies)
    .innerJoin(weighUps, eq(weighUps.id, growerCopies.weighUpId))
    .innerJoin(crops, eq(crops.id, weighUps.cropId))
    .leftJoin(fresh, and(eq(fresh.followsId, growerCopies.id), isNull(fresh.revokedAt)))
    .where(
      and(
        eq(weighUps.ownerId, ownerId),
        isNull(growerCopies.revokedAt),
        gt(growerCopies.expiresAt, sql`now()`),
        isNull(fresh.id),
        hasLaterVersion,
      ),
    )
    .orderBy(asc(growerCopies.createdAt));
  const changes = await findLaterChanges(
    db,
    rows.map(({ copy }) => growerCopySnapshot.parse(copy.snapshot)),
  );
  const mails = await readNewestMails(
    db,
    rows.map(({ copy }) => copy.id),
  );
  return rows.map(({ copy, weighUp, crop }, index) => {
    const mail = mails.get(copy.id);
    return {
      copyId: copy.id,
      weighUpId: weighUp.id,
      growerName: weighUp.growerName,
      farmName: weighUp.farmName,
      cropName: { en: crop.nameEn, fr: crop.nameFr },
      madeAt: copy.createdAt.toISOString(),
      laterChanges: changes[index] ?? [],
      sentTo: mail?.state === 'sent' ? mail.recipient : null,
    };
  });
}
