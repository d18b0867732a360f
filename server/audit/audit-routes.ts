import type { Router } from 'express';
import { listAuditEvents } from '#shared/account.ts';
import type { Database } from '#server/db.ts';
import { route } from '#server/route.ts';
import { listAuditPage } from './audit-store.ts';

export function addAuditRoutes(router: Router, db: Database): void {
  route(router, listAuditEvents, async ({ query }) => ({ events: await listAuditPage(db, query.before) }));
}
