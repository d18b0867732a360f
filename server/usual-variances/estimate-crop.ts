import { recordAuditEvent } from '#server/audit/audit-store.ts';
import { compute } from '#server/computing/compute.ts';
import type { Database } from '#server/db.ts';
import { engineVersion } from '#server/trials/trial-fit.ts';
import { loadCropGround, loadFigures } from '#server/weigh-up/evidence-store.ts';
import type { TraitOutcome } from './estimate-from-evidence.ts';
import { insertUsualVariances } from './usual-variances-store.ts';

/**
 * Estimates the usual variances of a crop from all its published trials, and keeps those that could be estimated.
 * @param by who asked for it; null for a command
 * @throws CodedError not-found for an unknown crop, busy
 */
export async function estimateCropVariances(
  db: Database,
  cropId: string,
  by: string | null,
  signal?: AbortSignal,
): Promise<TraitOutcome[]> {
  const evidence = await loadFigures(db, await loadCropGround(db, cropId));
  const outcomes = await compute('estimateFromEvidence', [evidence], signal);
  const traitIds = new Map(evidence.traits.map((trait) => [trait.slug, trait.id]));
  const rows = outcomes.flatMap(({ traitSlug, estimate }) => {
    const traitId = traitIds.get(traitSlug);
    if (traitId === undefined || estimate.outcome !== 'estimated') return [];
    const { variances, standardErrors, environments, seasons, entries } = estimate;
    return {
      ...{ cropId, traitId, environments, seasons, entries, engineVersion, estimatedBy: by },
      ...{ site: variances.site, season: variances.year, rest: variances.rest },
      ...{ siteSe: standardErrors.site, seasonSe: standardErrors.year, restSe: standardErrors.rest },
    };
  });
  if (rows.length > 0) {
    await db.transaction(async (tx) => {
      await insertUsualVariances(tx, rows);
      await recordAuditEvent(tx, {
        actorId: by,
        action: 'usual-variances.estimated',
        subjectKind: 'crop',
        subjectId: cropId,
        detail: {
          traits: outcomes.flatMap((one) => (one.estimate.outcome === 'estimated' ? [one.traitSlug] : [])),
          trials: evidence.trials.length,
        },
      });
    });
  }
  return outcomes;
}
