import { and, asc, desc, eq } from 'drizzle-orm';
import { users } from '#drizzle/schema/accounts.ts';
import { crops, traits } from '#drizzle/schema/crops.ts';
import { regions } from '#drizzle/schema/geography.ts';
import { trials, trialVersions } from '#drizzle/schema/trials.ts';
import { CodedError } from '#shared/error-codes.ts';
import { trialContent, type TrialContent } from '#shared/trial-content.ts';
import type { TrialDetail, TrialFilter, TrialLine, TrialVersionLine } from '#shared/trial.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';
import { selectTrialLines } from './select-trial-lines.ts';

/**
 * Trials that are published now, newest season first.
 * @param filter slugs of crop and region; an unknown slug gives an empty list
 */
export async function listPublishedTrials(
  db: DatabaseOrTransaction,
  filter: TrialFilter,
): Promise<TrialLine[]> {
  return selectReaderLines(db, (newest) =>
    and(
      eq(newest.action, 'publish'),
      filter.crop === undefined ? undefined : eq(crops.slug, filter.crop),
      filter.region === undefined ? undefined : eq(regions.slug, filter.region),
      filter.season === undefined ? undefined : eq(trials.season, filter.season),
    ),
  );
}

/**
 * A trial as readers see it: its newest publication, also after a withdrawal, which the state then says.
 * @throws CodedError not-found when it was never published: drafts are read at the desk
 */
export async function readPublishedTrial(db: DatabaseOrTransaction, trialId: string): Promise<TrialDetail> {
  const [line] = await selectReaderLines(db, () => eq(trials.id, trialId));
  if (line === undefined || line.version === null) throw new CodedError('not-found');
  const [content, versions, [head]] = await Promise.all([
    readVersionContent(db, trialId, line.version),
    listVersionLines(db, trialId),
    db.select({ revision: trials.revision }).from(trials).where(eq(trials.id, trialId)),
  ]);
  if (head === undefined) throw new CodedError('not-found');
  return {
    ...line,
    alpha: content.alpha,
    management: content.management,
    sownOn: content.sownOn,
    harvestedOn: content.harvestedOn,
    revision: head.revision,
    traitSlugs: await orderTraits(db, line.cropId, collectTraits(content)),
    versions,
  };
}

/** Reads what one version holds. @throws CodedError not-found */
export async function readVersionContent(
  db: DatabaseOrTransaction,
  trialId: string,
  number: number,
): Promise<TrialContent> {
  const [row] = await db
    .select({ content: trialVersions.content })
    .from(trialVersions)
    .where(and(eq(trialVersions.trialId, trialId), eq(trialVersions.number, number)));
  if (row === undefined) throw new CodedError('not-found');
  return trialContent.parse(row.content);
}

/** The history of a trial, newest first. */
export async function listVersionLines(
  db: DatabaseOrTransaction,
  trialId: string,
): Promise<TrialVersionLine[]> {
  const rows = await db
    .select({
      number: trialVersions.number,
      action: trialVersions.action,
      sha256: trialVersions.sha256,
      at: trialVersions.at,
      authorName: users.name,
      reason: trialVersions.reason,
    })
    .from(trialVersions)
    .leftJoin(users, eq(users.id, trialVersions.authorId))
    .where(eq(trialVersions.trialId, trialId))
    .orderBy(desc(trialVersions.number));
  return rows.map((row) => ({ ...row, at: row.at.toISOString() }));
}

/** Of a trial that was never published, a reader learns nothing. */
async function selectReaderLines(
  db: DatabaseOrTransaction,
  choose: Parameters<typeof selectTrialLines>[1],
): Promise<TrialLine[]> {
  const lines = await selectTrialLines(db, choose);
  return lines.flatMap(({ action, plainMean: _ofTheDesk, ...line }) =>
    action === null
      ? []
      : [{ ...line, state: action === 'publish' ? ('published' as const) : ('withdrawn' as const) }],
  );
}

/** Slugs of the traits that a trial has values of. */
function collectTraits(content: TrialContent): Set<string> {
  return new Set([
    ...content.plots.flatMap((plot) => Object.keys(plot.values)),
    ...content.summary.map((part) => part.trait),
  ]);
}

/** In the crop's order, so that pages list traits alike everywhere. */
async function orderTraits(
  db: DatabaseOrTransaction,
  cropId: string,
  present: ReadonlySet<string>,
): Promise<string[]> {
  const rows = await db
    .select({ slug: traits.slug })
    .from(traits)
    .where(eq(traits.cropId, cropId))
    .orderBy(asc(traits.position), asc(traits.slug));
  return rows.map((row) => row.slug).filter((slug) => present.has(slug));
}
