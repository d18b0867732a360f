import type { Router } from 'express';
import { createDraft, deleteDraft, listDrafts, saveDraft } from '#shared/weigh-up-draft.ts';
import type { Database } from '#server/db.ts';
import { requireMe, route } from '#server/route.ts';
import { deleteOwnDraft, insertDraft, listOwnDrafts, updateDraft } from './draft-store.ts';

export function addDraftRoutes(router: Router, db: Database): void {
  route(router, listDrafts, async ({ me }) => ({ drafts: await listOwnDrafts(db, requireMe(me).id) }));

  route(router, createDraft, async ({ me, body }) => ({
    draft: await insertDraft(db, requireMe(me).id, body.content),
  }));

  route(router, saveDraft, async ({ me, params, body }) => ({
    draft: await updateDraft(db, requireMe(me).id, { ...params, ...body }, body.content),
  }));

  route(router, deleteDraft, async ({ me, params }) => {
    await deleteOwnDraft(db, requireMe(me).id, params.draftId);
    return {};
  });
}
