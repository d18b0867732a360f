import type { Router } from 'express';
import { CodedError } from '#shared/error-codes.ts';
import {
  archiveWeighUp,
  duplicateWeighUp,
  readDecisions,
  recordDecision,
  tickOffTrials,
} from '#shared/weigh-up-record.ts';
import type { Database } from '#server/db.ts';
import { requireMe, route } from '#server/route.ts';
import { answerWeighUp } from './answer-question.ts';
import { readOwnDecisions, saveDecision } from './decision-store.ts';
import { describeDecision } from './describe-decision.ts';
import { requireOwnRegion } from './own-region.ts';
import { saveTickedOff } from './ticked-off.ts';
import { duplicateToNextSeason, setArchived } from './weigh-up-keeping.ts';
import { readOwnWeighUp } from './weigh-up-store.ts';

/** What is kept of a weigh-up beside its question. */
export function addWeighUpRecordRoutes(router: Router, db: Database): void {
  route(router, readDecisions, async ({ me, params }) =>
    readOwnDecisions(db, requireMe(me).id, params.weighUpId),
  );

  route(router, recordDecision, async ({ me, params, body, signal }) => {
    const { id: ownerId, name } = requireMe(me);
    const weighUp = await readOwnWeighUp(db, ownerId, params.weighUpId);
    // What is frozen with the decision must be what was on the page.
    if (weighUp.revision !== body.revision) throw new CodedError('revision-conflict');
    const decision =
      body.decision &&
      describeDecision(body.decision, weighUp, (await answerWeighUp(db, weighUp, signal)).result, name);
    return {
      weighUp: await saveDecision(db, ownerId, { weighUpId: weighUp.id, ...body }, decision),
      decision,
    };
  });

  route(router, archiveWeighUp, async ({ me, params, body }) => {
    const archivedAt = await setArchived(db, requireMe(me).id, params.weighUpId, body.isArchived);
    return { archivedAt: archivedAt?.toISOString() ?? null };
  });

  route(router, duplicateWeighUp, async ({ me, params }) => {
    const owner = requireMe(me);
    requireOwnRegion(owner, (await readOwnWeighUp(db, owner.id, params.weighUpId)).regionId);
    return { weighUp: await duplicateToNextSeason(db, owner.id, params.weighUpId) };
  });

  route(router, tickOffTrials, async ({ me, params, body, signal }) => {
    const at = { weighUpId: params.weighUpId, revision: body.revision };
    const weighUp = await saveTickedOff(db, requireMe(me).id, at, body.tickedOff);
    const { result } = await answerWeighUp(db, weighUp, signal);
    return { weighUp, result };
  });
}
