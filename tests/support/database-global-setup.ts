import { fileURLToPath } from 'node:url';
import type { TestProject } from 'vitest/node';
import { openTestCluster } from '#server/setup/test-cluster.mjs';
import { migrateDatabase } from '#server/migrate-database.ts';
import { createDatabase, emptyTemplate } from './test-cluster-database.ts';

declare module 'vitest' {
  export interface ProvidedContext {
    /** Address of the test cluster's first database, as its superuser. */
    testClusterUrl: string;
  }
}

/** Starts a PostgreSQL for this run and migrates the template that every test database is copied from. */
export async function setup(project: TestProject): Promise<() => void> {
  const cluster = await openTestCluster(fileURLToPath(new URL('../..', import.meta.url)));
  try {
    const template = await createDatabase(cluster.url, emptyTemplate);
    await migrateDatabase(template, fileURLToPath(new URL('../../drizzle/migrations', import.meta.url)));
  } catch (error) {
    cluster.close();
    throw error;
  }
  project.provide('testClusterUrl', cluster.url);
  return () => cluster.close();
}
