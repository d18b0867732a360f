import { sql } from 'drizzle-orm';
import type { Database } from '#server/db.ts';

/** Waits until so many statements of this database wait for a lock. */
export async function waitForBlocked(db: Database, count: number): Promise<void> {
  for (let i = 0; i < 400; i += 1) {
    const { rows } = await db.execute<{ waiting: number }>(sql`select count(*)::int as waiting
      from pg_stat_activity where datname = current_database() and wait_event_type = 'Lock'`);
    if (rows[0]?.waiting === count) return;
    await new Promise((resolve) => setTimeout(resolve, 20));
  }
  throw new Error(`there were never ${count} statements waiting`);
}
