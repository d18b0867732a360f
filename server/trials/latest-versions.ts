import { desc, eq } from 'drizzle-orm';
import { trialVersions } from '#drizzle/schema/trials.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';

const columns = {
  versionId: trialVersions.id,
  trialId: trialVersions.trialId,
  number: trialVersions.number,
  action: trialVersions.action,
  sha256: trialVersions.sha256,
};

/**
 * The newest version of every trial, as a subquery. A trial counts as published while that version is a publication,
 * whatever the desk is preparing in the working copy meanwhile.
 */
export function newestVersions(db: DatabaseOrTransaction) {
  return db
    .selectDistinctOn([trialVersions.trialId], columns)
    .from(trialVersions)
    .orderBy(trialVersions.trialId, desc(trialVersions.number))
    .as('newest_version');
}

/** The newest publication of every trial, as a subquery: what a withdrawn trial still shows of itself. */
export function newestPublications(db: DatabaseOrTransaction) {
  return db
    .selectDistinctOn([trialVersions.trialId], columns)
    .from(trialVersions)
    .where(eq(trialVersions.action, 'publish'))
    .orderBy(trialVersions.trialId, desc(trialVersions.number))
    .as('newest_publication');
}
