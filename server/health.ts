import { sql } from 'drizzle-orm';
import type { Router } from 'express';
import type { Database } from './db.ts';

/** Answers 200 when the database answers, else 503 by the error handler: for start scripts and monitors. */
export function addHealthRoute(router: Router, db: Database): void {
  router.get('/api/health', async (_request, response) => {
    await db.execute(sql`select 1`);
    response.json({ ok: true });
  });
}
