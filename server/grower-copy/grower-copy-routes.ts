import type { Request, Router } from 'express';
import { CodedError } from '#shared/error-codes.ts';
import {
  listGrowerCopies,
  mailGrowerCopy,
  makeGrowerCopy,
  retryGrowerCopyMail,
  revokeGrowerCopy,
} from '#shared/grower-copy.ts';
import { listAffectedCopies, renewGrowerCopy } from '#shared/affected-copy.ts';
import type { Database } from '#server/db.ts';
import type { ServerSettings } from '#server/env.ts';
import { requireMe, route } from '#server/route.ts';
import { readOwnWeighUp } from '#server/weigh-up/weigh-up-store.ts';
import { findAffectedCopies } from './affected-copies.ts';
import { listCopies, revokeOwnCopy } from './grower-copy-store.ts';
import { mailCopyAgain, retryMailOfCopy } from './mail-copy.ts';
import { makeCopy } from './make-copy.ts';
import { publicOriginOf } from './public-origin.ts';
import { renewCopy } from './renew-copy.ts';

export function addGrowerCopyRoutes(
  router: Router,
  db: Database,
  settings: ServerSettings,
  onMailQueued: () => void,
): void {
  const isMailSetUp = settings.mail !== null;
  const originOf = (request: Request) => publicOriginOf(request, settings);
  const requireMail = () => {
    if (!isMailSetUp) throw new CodedError('mail-not-set-up');
  };

  route(router, listGrowerCopies, async ({ me, params }) => {
    const weighUp = await readOwnWeighUp(db, requireMe(me).id, params.weighUpId);
    return { copies: await listCopies(db, weighUp.id), isMailSetUp };
  });

  route(router, makeGrowerCopy, async ({ me, params, body, request }) => {
    const { email: recipient, ...wish } = body;
    const origin = originOf(request);
    if (recipient !== undefined) requireMail();
    const mailed = recipient === undefined ? wish : { ...wish, mail: { recipient, origin } };
    const made = await makeCopy(db, requireMe(me), params.weighUpId, mailed);
    if (recipient !== undefined) onMailQueued();
    return { ...made, link: `${origin}${made.path}` };
  });

  route(router, mailGrowerCopy, async ({ me, params, body, request }) => {
    requireMail();
    const copy = await mailCopyAgain(db, requireMe(me).id, params.copyId, body, originOf(request));
    onMailQueued();
    return { copy };
  });

  route(router, retryGrowerCopyMail, async ({ me, params }) => {
    requireMail();
    const copy = await retryMailOfCopy(db, requireMe(me).id, params.copyId);
    onMailQueued();
    return { copy };
  });

  route(router, revokeGrowerCopy, async ({ me, params }) => ({
    copy: await revokeOwnCopy(db, requireMe(me).id, params.copyId),
  }));

  route(router, listAffectedCopies, async ({ me }) => ({
    copies: await findAffectedCopies(db, requireMe(me).id),
    isMailSetUp,
  }));

  route(router, renewGrowerCopy, async ({ me, params, body, request }) => {
    if (body.isSent) requireMail();
    const origin = originOf(request);
    const made = await renewCopy(db, requireMe(me), params.copyId, body.isSent ? origin : null);
    if (made.isMailed) onMailQueued();
    return { copy: made.copy, link: `${origin}${made.path}` };
  });
}
