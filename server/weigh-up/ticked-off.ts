import { eq, sql } from 'drizzle-orm';
import { weighUps } from '#drizzle/schema/weigh-ups.ts';
import { makeCaution } from '#shared/caution.ts';
import type { LeftOutTrial, TickedOffTrial, WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import { recordAuditEvent } from '#server/audit/audit-store.ts';
import type { Database } from '#server/db.ts';
import { yieldSlug } from './evidence-network.ts';
import type { Evidence, EvidenceGround } from './evidence.ts';
import { lockOwnWeighUp, readOwnWeighUp } from './weigh-up-store.ts';

/**
 * Keeps which trials of a weigh-up are ticked off, the whole list at once.
 * @throws CodedError not-found, revision-conflict
 */
export async function saveTickedOff(
  db: Database,
  ownerId: string,
  at: { weighUpId: string; revision: number },
  tickedOff: TickedOffTrial[],
): Promise<WeighUp> {
  return db.transaction(async (tx) => {
    await lockOwnWeighUp(tx, ownerId, at.weighUpId, at.revision);
    await tx
      .update(weighUps)
      .set({ tickedOff, revision: at.revision + 1, updatedAt: sql`now()` })
      .where(eq(weighUps.id, at.weighUpId));
    await recordAuditEvent(tx, {
      actorId: ownerId,
      action: 'weigh-up.trials-ticked-off',
      subjectKind: 'weigh-up',
      subjectId: at.weighUpId,
      detail: { trials: tickedOff.map(({ trialId }) => trialId) },
    });
    return readOwnWeighUp(tx, ownerId, at.weighUpId);
  });
}

/**
 * Parts the trials that count from those that are ticked off. Those that count are what an answer's key is made of,
 * so that an answer without a trial is never taken for one with it.
 */
export function partTickedOff(
  ground: EvidenceGround,
  tickedOff: readonly TickedOffTrial[],
): { counted: EvidenceGround; out: EvidenceGround } {
  const ids = new Set(tickedOff.map(({ trialId }) => trialId));
  return {
    counted: { ...ground, trials: ground.trials.filter(({ trialId }) => !ids.has(trialId)) },
    out: { ...ground, trials: ground.trials.filter(({ trialId }) => ids.has(trialId)) },
  };
}

/** Says in an answer which trials were ticked off: among those left out, and as a caution wherever a figure appears. */
export function tellTickedOff(
  answer: WeighUpResult,
  out: Evidence,
  tickedOff: readonly TickedOffTrial[],
): WeighUpResult {
  if (out.trials.length === 0) return answer;
  const sites = out.trials
    .map(({ siteName, season }) => `${siteName} ${season}`)
    .map((name) => ({ en: name, fr: name }));
  const caution = makeCaution('trial-ticked-off', 'warning', { count: sites.length, sites });
  // The region has trials: it is only that none of them counts.
  const isEmptied = answer.answer === 'no-trials' && out.trials.some(({ inRegion }) => inRegion);
  const others = answer.cautions.filter(({ code }) => !isEmptied || code !== 'no-trial-in-region');
  return {
    ...answer,
    leftOut: [...answer.leftOut, ...listTickedOff(out, tickedOff)],
    candidates: answer.candidates.map((one) => ({ ...one, cautions: [...one.cautions, caution] })),
    cautions: [caution, ...others],
  };
}

function listTickedOff(out: Evidence, tickedOff: readonly TickedOffTrial[]): LeftOutTrial[] {
  const reasons = new Map(tickedOff.map(({ trialId, reason }) => [trialId, reason]));
  const yieldId = out.traits.find(({ slug }) => slug === yieldSlug)?.id;
  const fits = new Map(
    out.fits.filter(({ traitId }) => traitId === yieldId).map((fit) => [fit.versionId, fit]),
  );
  return out.trials.map(
    ({ trialId, versionId, name, siteName, season, version, sha256, inRegion, regionName }) => ({
      ...{ trialId, name, siteName, season, version, sha256, inRegion },
      ...(!inRegion && { regionName }),
      meanYield: fits.get(versionId)?.grandMean ?? null,
      cvPercent: fits.get(versionId)?.cvPercent ?? null,
      reason: 'ticked-off',
      reasonText: reasons.get(trialId) ?? '',
    }),
  );
}
