import type { Router } from 'express';
import { changeWeighUp, createWeighUp, listCandidates, listWeighUps, readWeighUp } from '#shared/weigh-up.ts';
import type { Database } from '#server/db.ts';
import { requireMe, route } from '#server/route.ts';
import { answerWeighUp, rankCandidates } from './answer-question.ts';
import { requireOwnRegion } from './own-region.ts';
import { insertWeighUp, listOwnWeighUps, readOwnWeighUp, updateWeighUp } from './weigh-up-store.ts';

export function addWeighUpRoutes(router: Router, db: Database): void {
  route(router, listCandidates, async ({ me, query, signal }) => {
    requireOwnRegion(requireMe(me), query.regionId);
    return rankCandidates(db, query, signal);
  });

  route(router, listWeighUps, async ({ me }) => ({ weighUps: await listOwnWeighUps(db, requireMe(me).id) }));

  route(router, createWeighUp, async ({ me, query, body }) => {
    const owner = requireMe(me);
    requireOwnRegion(owner, body.regionId);
    return { weighUp: await insertWeighUp(db, owner.id, body, query.draftId) };
  });

  route(router, readWeighUp, async ({ me, params, signal }) => {
    const weighUp = await readOwnWeighUp(db, requireMe(me).id, params.weighUpId);
    const { result } = await answerWeighUp(db, weighUp, signal);
    return { weighUp, result };
  });

  route(router, changeWeighUp, async ({ me, params, body, signal }) => {
    const owner = requireMe(me);
    await readOwnWeighUp(db, owner.id, params.weighUpId);
    requireOwnRegion(owner, body.weighUp.regionId);
    const weighUp = await updateWeighUp(db, owner.id, params.weighUpId, body.revision, body.weighUp);
    const { result } = await answerWeighUp(db, weighUp, signal);
    return { weighUp, result };
  });
}
