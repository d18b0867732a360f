import { inArray } from 'drizzle-orm';
import type { GrowerCopySnapshot, LaterChange } from '#shared/grower-copy.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';
import { newestVersions } from '#server/trials/latest-versions.ts';

type NewestVersion = { trialId: string; number: number; action: 'publish' | 'withdraw' };

/** What became of the trials of each snapshot since it was made, in the order of the snapshots; one query for all. */
export async function findLaterChanges(
  db: DatabaseOrTransaction,
  snapshots: readonly GrowerCopySnapshot[],
): Promise<LaterChange[][]> {
  const trialIds = [
    ...new Set(snapshots.flatMap(({ result }) => result.trials.map((trial) => trial.trialId))),
  ];
  if (trialIds.length === 0) return snapshots.map(() => []);
  const newest = newestVersions(db);
  const rows = await db
    .select({ trialId: newest.trialId, number: newest.number, action: newest.action })
    .from(newest)
    .where(inArray(newest.trialId, trialIds));
  const byTrial = new Map(rows.map((row) => [row.trialId, row]));
  return snapshots.map((snapshot) => compareWithNewest(snapshot, byTrial));
}

function compareWithNewest(
  snapshot: GrowerCopySnapshot,
  newest: ReadonlyMap<string, NewestVersion>,
): LaterChange[] {
  return snapshot.result.trials.flatMap(({ trialId, siteName, season, version }) => {
    const now = newest.get(trialId);
    if (now === undefined || now.number <= version) return [];
    return [{ trialId, siteName, season, change: now.action === 'withdraw' ? 'withdrawn' : 'corrected' }];
  });
}
