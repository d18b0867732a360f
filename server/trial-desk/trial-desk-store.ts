import { and, eq, inArray, sql, type SQL } from 'drizzle-orm';
import { crops } from '#drizzle/schema/crops.ts';
import { regions, sites } from '#drizzle/schema/geography.ts';
import { plots, trials } from '#drizzle/schema/trials.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { TrialDetail, TrialFilter, TrialLine, TrialState } from '#shared/trial.ts';
import { recordAuditEvent } from '#server/audit/audit-store.ts';
import type { Database, DatabaseOrTransaction } from '#server/db.ts';
import { selectTrialLines } from '#server/trials/select-trial-lines.ts';
import { loadTrialContent } from '#server/trials/trial-content-store.ts';
import { listVersionLines } from '#server/trials/trial-store.ts';

/** Who works at the desk: an account and the regions it works in. */
export type DeskWorker = { id: string; regionIds: readonly string[] };

/**
 * Trials of the worker's regions in every state, newest season first.
 * @param filter slugs of crop and region, season, state; an unknown slug gives an empty list
 */
export async function listDeskTrials(
  db: DatabaseOrTransaction,
  worker: DeskWorker,
  filter: TrialFilter & { state?: TrialState | undefined },
): Promise<TrialLine[]> {
  if (worker.regionIds.length === 0) return [];
  return selectDeskLines(
    db,
    and(
      inArray(sites.regionId, [...worker.regionIds]),
      filter.crop === undefined ? undefined : eq(crops.slug, filter.crop),
      filter.region === undefined ? undefined : eq(regions.slug, filter.region),
      filter.season === undefined ? undefined : eq(trials.season, filter.season),
      filter.state === undefined ? undefined : eq(trials.state, filter.state),
    ),
  );
}

/**
 * The working copy of a trial, with its history.
 * @throws CodedError not-found, also for a trial of a region that is not the worker's
 */
export async function readDeskTrial(
  db: DatabaseOrTransaction,
  worker: DeskWorker,
  trialId: string,
): Promise<TrialDetail> {
  await requireDeskTrial(db, worker, trialId);
  const [line] = await selectDeskLines(db, eq(trials.id, trialId));
  if (line === undefined) throw new CodedError('not-found');
  const stored = await loadTrialContent(db, trialId);
  const { content } = stored;
  const present = new Set([
    ...content.plots.flatMap((plot) => Object.keys(plot.values)),
    ...content.summary.map((column) => column.trait),
  ]);
  return {
    ...line,
    alpha: content.alpha,
    management: content.management,
    sownOn: content.sownOn,
    harvestedOn: content.harvestedOn,
    revision: stored.revision,
    traitSlugs: stored.traits.map((trait) => trait.slug).filter((slug) => present.has(slug)),
    versions: await listVersionLines(db, trialId),
  };
}

/**
 * Whether the worker may work on a trial: its site lies in one of the worker's regions.
 * @throws CodedError not-found, so that absent and forbidden answer alike
 */
export async function requireDeskTrial(
  db: DatabaseOrTransaction,
  worker: DeskWorker,
  trialId: string,
): Promise<void> {
  const [row] = await db
    .select({ regionId: sites.regionId })
    .from(trials)
    .innerJoin(sites, eq(sites.id, trials.siteId))
    .where(eq(trials.id, trialId));
  if (row === undefined || !worker.regionIds.includes(row.regionId)) throw new CodedError('not-found');
}

/**
 * Leaves plots out of the working copy with a reason, or takes them back in.
 * @param reason null to take them back in
 * @throws CodedError not-found when a plot is not of this trial, revision-conflict
 */
export async function excludePlots(
  db: Database,
  worker: DeskWorker,
  change: { trialId: string; revision: number; plotIds: readonly string[]; reason: string | null },
): Promise<void> {
  const { trialId, revision, reason } = change;
  const plotIds = [...new Set(change.plotIds)];
  await db.transaction(async (tx) => {
    await requireDeskTrial(tx, worker, trialId);
    const bumped = await tx
      .update(trials)
      .set({ revision: sql`${trials.revision} + 1` })
      .where(and(eq(trials.id, trialId), eq(trials.revision, revision)))
      .returning({ id: trials.id });
    if (bumped.length === 0) throw new CodedError('revision-conflict');
    const changed = await tx
      .update(plots)
      .set({ excludedReason: reason })
      .where(and(eq(plots.trialId, trialId), inArray(plots.id, plotIds)))
      .returning({ plotNumber: plots.plotNumber });
    if (changed.length !== plotIds.length) throw new CodedError('not-found');
    await recordAuditEvent(tx, {
      actorId: worker.id,
      action: reason === null ? 'trial.plots-included' : 'trial.plots-excluded',
      subjectKind: 'trial',
      subjectId: trialId,
      detail: { plots: changed.map((plot) => plot.plotNumber).sort(), reason },
    });
  });
}

async function selectDeskLines(db: DatabaseOrTransaction, chosen: SQL | undefined): Promise<TrialLine[]> {
  const lines = await selectTrialLines(db, () => chosen);
  return lines.map(({ action: _ofVersions, plainMean, ...line }) => ({
    ...line,
    meanYield: line.meanYield ?? plainMean,
  }));
}
