import type { Router } from 'express';
import { estimateUsual, listUsualVariances } from '#shared/usual-variance.ts';
import type { Database } from '#server/db.ts';
import { requireMe, route } from '#server/route.ts';
import { NEEDED_FOR_USUAL } from '#server/stats/engine.ts';
import { estimateCropVariances } from './estimate-crop.ts';
import { describeUsualVariances } from './describe-usual-variances.ts';

export function addUsualVariancesRoutes(router: Router, db: Database): void {
  route(router, listUsualVariances, async () => ({ crops: await describeUsualVariances(db) }));

  route(router, estimateUsual, async ({ me, body, signal }) => {
    const outcomes = await estimateCropVariances(db, body.cropId, requireMe(me).id, signal);
    return {
      needs: NEEDED_FOR_USUAL,
      outcomes: outcomes.map(({ traitSlug, estimate }) => ({
        traitSlug,
        outcome: estimate.outcome,
        environments: estimate.environments,
        seasons: estimate.seasons,
        entries: estimate.entries,
      })),
    };
  });
}
