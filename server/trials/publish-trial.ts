import { desc, eq, sql } from 'drizzle-orm';
import { entryMeans, trials, trialVersions, versionFits } from '#drizzle/schema/trials.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { TrialState } from '#shared/trial.ts';
import { recordAuditEvent } from '#server/audit/audit-store.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';
import { analyseContent } from './analyse-content.ts';
import { hashTrialContent } from './trial-content-hash.ts';
import { loadTrialContent, type StoredTrial } from './trial-content-store.ts';
import { engineVersion, summariseFit, type TraitFit } from './trial-fit.ts';

export type Publication = {
  trialId: string;
  authorId: string | null;
  reason: string;
  /** The working copy the author looked at. */
  revision: number;
  /** When it happened; now unless a record from elsewhere is being entered. */
  at?: Date;
};

/** States from which each action is allowed. A withdrawn trial may be published again, corrected. */
const allowedFrom: Record<'publish' | 'withdraw', readonly TrialState[]> = {
  publish: ['draft', 'in-review', 'published', 'withdrawn'],
  withdraw: ['published'],
};

/**
 * Publishes the working copy as the next version: content, hash, fits and entry means, all or nothing, also within a
 * transaction of the caller's.
 * @returns the version's number
 * @throws CodedError not-found, revision-conflict, trial-not-analysable when no trait has an analysis,
 *   state-conflict when the newest version already holds the same content
 */
export function publishTrial(db: DatabaseOrTransaction, publication: Publication): Promise<number> {
  return db.transaction((tx) => insertPublication(tx, publication));
}

async function insertPublication(tx: DatabaseOrTransaction, publication: Publication): Promise<number> {
  const stored = await lockTrial(tx, publication, 'publish');
  const sha256 = hashTrialContent(stored.content);
  const newest = await readNewestVersion(tx, publication.trialId);
  if (newest?.action === 'publish' && newest.sha256 === sha256) throw new CodedError('state-conflict');
  const fits = stored.traits.flatMap((trait) => {
    const fit = summariseFit(analyseContent(stored.content, trait));
    return fit === null ? [] : [{ traitId: trait.id, fit }];
  });
  if (fits.length === 0) throw new CodedError('trial-not-analysable');
  const number = (newest?.number ?? 0) + 1;
  const versionId = await insertVersion(tx, publication, 'publish', number, stored.content, sha256);
  await insertFits(tx, versionId, fits, stored);
  await setState(tx, publication.trialId, 'published');
  await recordAuditEvent(tx, {
    actorId: publication.authorId,
    action: 'trial.published',
    subjectKind: 'trial',
    subjectId: publication.trialId,
    detail: { version: number, sha256, reason: publication.reason },
    ...(publication.at && { at: publication.at }),
  });
  return number;
}

/**
 * Withdraws a published trial by a version that says so; all earlier versions stay readable.
 * @returns the version's number
 * @throws CodedError not-found, revision-conflict, state-conflict when it is not published
 */
export function withdrawTrial(db: DatabaseOrTransaction, publication: Publication): Promise<number> {
  return db.transaction((tx) => insertWithdrawal(tx, publication));
}

async function insertWithdrawal(tx: DatabaseOrTransaction, publication: Publication): Promise<number> {
  await lockTrial(tx, publication, 'withdraw');
  const newest = await readNewestVersion(tx, publication.trialId);
  if (newest === undefined) throw new CodedError('state-conflict');
  const number = newest.number + 1;
  // What is withdrawn is what was published, whatever the working copy holds by now.
  await insertVersion(tx, publication, 'withdraw', number, newest.content, newest.sha256);
  await setState(tx, publication.trialId, 'withdrawn');
  await recordAuditEvent(tx, {
    actorId: publication.authorId,
    action: 'trial.withdrawn',
    subjectKind: 'trial',
    subjectId: publication.trialId,
    detail: { version: number, reason: publication.reason },
    ...(publication.at && { at: publication.at }),
  });
  return number;
}

/** Holds the trial's row until the transaction ends, so that two authors cannot publish at once. */
async function lockTrial(
  tx: DatabaseOrTransaction,
  publication: Publication,
  action: keyof typeof allowedFrom,
): Promise<StoredTrial> {
  const [row] = await tx
    .select({ state: trials.state, revision: trials.revision })
    .from(trials)
    .where(eq(trials.id, publication.trialId))
    .for('update');
  if (row === undefined) throw new CodedError('not-found');
  if (row.revision !== publication.revision) throw new CodedError('revision-conflict');
  if (!allowedFrom[action].includes(row.state)) throw new CodedError('state-conflict');
  return loadTrialContent(tx, publication.trialId);
}

async function readNewestVersion(tx: DatabaseOrTransaction, trialId: string) {
  const [newest] = await tx
    .select({
      number: trialVersions.number,
      action: trialVersions.action,
      content: trialVersions.content,
      sha256: trialVersions.sha256,
    })
    .from(trialVersions)
    .where(eq(trialVersions.trialId, trialId))
    .orderBy(desc(trialVersions.number))
    .limit(1);
  return newest;
}

async function insertVersion(
  tx: DatabaseOrTransaction,
  { trialId, authorId, reason, at }: Publication,
  action: 'publish' | 'withdraw',
  number: number,
  content: unknown,
  sha256: string,
): Promise<string> {
  const [version] = await tx
    .insert(trialVersions)
    .values({ trialId, number, action, content, sha256, authorId, reason, ...(at && { at }) })
    .returning({ id: trialVersions.id });
  if (version === undefined) throw new Error('The version was not stored');
  return version.id;
}

async function insertFits(
  tx: DatabaseOrTransaction,
  versionId: string,
  fits: readonly { traitId: string; fit: TraitFit }[],
  stored: StoredTrial,
): Promise<void> {
  await tx
    .insert(versionFits)
    .values(
      fits.map(({ traitId, fit: { means: _, ...fit } }) => ({ versionId, traitId, engineVersion, ...fit })),
    );
  const means = fits.flatMap(({ traitId, fit }) =>
    fit.means.map((mean) => ({
      versionId,
      traitId,
      varietyId: stored.varietyIds.get(mean.entryLabel) ?? null,
      ...mean,
    })),
  );
  if (means.length > 0) await tx.insert(entryMeans).values(means);
}

async function setState(tx: DatabaseOrTransaction, trialId: string, state: TrialState): Promise<void> {
  await tx
    .update(trials)
    .set({ state, revision: sql`${trials.revision} + 1` })
    .where(eq(trials.id, trialId));
}
