import type { Response, Router } from 'express';
import type { Me } from '#shared/account.ts';
import {
  listGrowerCopies,
  makeGrowerCopy,
  openGrowerCopy,
  revokeGrowerCopy,
  type GrowerCopySnapshot,
} from '#shared/grower-copy.ts';
import type { Database } from '#server/db.ts';
import { requireMe, route } from '#server/route.ts';
import { answerWeighUp } from '#server/weigh-up/answer-question.ts';
import { readOwnWeighUp } from '#server/weigh-up/weigh-up-store.ts';
import { insertCopy, listCopies, openCopy, revokeOwnCopy } from './grower-copy-store.ts';
import { makeLinkSecret } from './link-secret.ts';

export function addGrowerCopyRoutes(router: Router, db: Database): void {
  route(router, listGrowerCopies, async ({ me, params }) => {
    const weighUp = await readOwnWeighUp(db, requireMe(me).id, params.weighUpId);
    return { copies: await listCopies(db, weighUp.id) };
  });

  route(router, makeGrowerCopy, async ({ me, params, body }) => {
    const advisor = requireMe(me);
    const snapshot = await takeSnapshot(db, advisor, params.weighUpId);
    const secret = makeLinkSecret();
    const copy = await insertCopy(db, {
      ...body,
      weighUpId: params.weighUpId,
      secret,
      snapshot,
      createdBy: advisor.id,
    });
    return { copy, path: `/copy/${secret}` };
  });

  route(router, revokeGrowerCopy, async ({ me, params }) => ({
    copy: await revokeOwnCopy(db, requireMe(me).id, params.copyId),
  }));

  route(router, openGrowerCopy, async ({ params, response }) => {
    keepLinkPrivate(response);
    return openCopy(db, params.token);
  });
}

/** Everything the copy will show, as it is now. */
async function takeSnapshot(db: Database, advisor: Me, weighUpId: string): Promise<GrowerCopySnapshot> {
  const weighUp = await readOwnWeighUp(db, advisor.id, weighUpId);
  const { result, traits } = await answerWeighUp(db, weighUp);
  return {
    format: 1,
    weighUp,
    result,
    traits,
    advisorName: advisor.name,
    advisorEmail: advisor.email,
    madeAt: new Date().toISOString(),
    engineVersion: result.engineVersion,
  };
}

/** The link is the key: it must not reach search engines or, as a referrer, other sites. */
function keepLinkPrivate(response: Response): void {
  response.set({ 'X-Robots-Tag': 'noindex, nofollow', 'Referrer-Policy': 'no-referrer' });
}
