import type { Response, Router } from 'express';
import { listGrowerCopies, makeGrowerCopy, openGrowerCopy, revokeGrowerCopy } from '#shared/grower-copy.ts';
import type { Database } from '#server/db.ts';
import { requireMe, route } from '#server/route.ts';
import { readOwnWeighUp } from '#server/weigh-up/weigh-up-store.ts';
import { listCopies, openCopy, revokeOwnCopy } from './grower-copy-store.ts';
import { makeCopy } from './make-copy.ts';

export function addGrowerCopyRoutes(router: Router, db: Database): void {
  route(router, listGrowerCopies, async ({ me, params }) => {
    const weighUp = await readOwnWeighUp(db, requireMe(me).id, params.weighUpId);
    return { copies: await listCopies(db, weighUp.id) };
  });

  route(router, makeGrowerCopy, async ({ me, params, body }) =>
    makeCopy(db, requireMe(me), params.weighUpId, body),
  );

  route(router, revokeGrowerCopy, async ({ me, params }) => ({
    copy: await revokeOwnCopy(db, requireMe(me).id, params.copyId),
  }));

  route(router, openGrowerCopy, async ({ params, response }) => {
    keepLinkPrivate(response);
    return openCopy(db, params.token);
  });
}

/** The link is the key: it must not reach search engines or, as a referrer, other sites. */
function keepLinkPrivate(response: Response): void {
  response.set({ 'X-Robots-Tag': 'noindex, nofollow', 'Referrer-Policy': 'no-referrer' });
}
