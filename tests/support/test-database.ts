import { randomBytes } from 'node:crypto';
import type pg from 'pg';
import { inject } from 'vitest';
import { connectDatabase, type Database } from '#server/db.ts';
import {
  createDatabase,
  demoTemplate,
  dropDatabase,
  emptyTemplate,
  ensureDemoTemplate,
} from './test-cluster-database.ts';

export type TestDatabase = { url: string; db: Database; pool: pg.Pool; close: () => Promise<void> };

/** A migrated database without rows, for one test file alone; `close` deletes it. */
export function createTestDatabase(): Promise<TestDatabase> {
  return copyTemplate(emptyTemplate);
}

/** A database with the seeded demo in it, for one test file alone; the seed runs once per run of the tests. */
export async function createDemoDatabase(): Promise<TestDatabase> {
  await ensureDemoTemplate(inject('testClusterUrl'), async (url) => {
    // Only here, so that a test without the demo does not load its generator.
    const { seedDemo } = await import('#server/demo/seed-demo.ts');
    const { db, close } = connectDatabase(url, ignoreIdleError);
    try {
      await seedDemo(db);
    } finally {
      await close();
    }
  });
  return copyTemplate(demoTemplate);
}

async function copyTemplate(template: string): Promise<TestDatabase> {
  const clusterUrl = inject('testClusterUrl');
  const name = `test_${randomBytes(6).toString('hex')}`;
  const url = await createDatabase(clusterUrl, name, template);
  const { db, pool, close } = connectDatabase(url, ignoreIdleError);
  return {
    url,
    db,
    pool,
    close: async () => {
      await close();
      await dropDatabase(clusterUrl, name);
    },
  };
}

/** A test may end its connections on purpose; the query that meets a broken one fails by itself. */
function ignoreIdleError(): void {}
