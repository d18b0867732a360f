import { pathToFileURL } from 'node:url';
import { connectDatabase, type Database } from '#server/db.ts';
import type * as sourceOfServer from '#server/main.ts';
import { migrateDatabase } from '#server/migrate-database.ts';
import { buildClient, buildServer } from '#server/setup/build-product.mjs';
import { openTestCluster } from '#server/setup/test-cluster.mjs';

/** What the built server gives is what its source does. */
type BuiltServer = Pick<typeof sourceOfServer, 'readSettings' | 'startServer'>;

/**
 * A server of the built product in this process, on a database of its own, which goes with it.
 * @param fill puts into the migrated database what is to be measured
 */
export async function startBuiltServer<Filled>(
  projectRoot: string,
  fill: (db: Database) => Promise<Filled>,
): Promise<{ url: string; databaseUrl: string; filled: Filled; close: () => Promise<void> }> {
  await buildClient(projectRoot);
  await buildServer(projectRoot);
  const cluster = await openTestCluster(projectRoot);
  await migrateDatabase(cluster.url, `${projectRoot}/drizzle/migrations`);
  const { db, close } = connectDatabase(cluster.url, () => undefined);
  const filled = await fill(db);
  await close();
  // As `npm start` does: what is measured is what is shipped.
  process.env['NODE_ENV'] = 'production';
  const built = pathToFileURL(`${projectRoot}/dist/server/main.js`).href;
  const { readSettings, startServer } = (await import(built)) as BuiltServer;
  const environment = {
    DATABASE_URL: cluster.url,
    PORT: '0',
    SESSION_SECRET: 'a secret of no worth, for a bench alone',
    LOG_LEVEL: 'error',
  };
  const server = await startServer(readSettings(environment, `${projectRoot}/dist/client`));
  return {
    url: server.url,
    databaseUrl: cluster.url,
    filled,
    close: async () => {
      await server.close();
      cluster.close();
    },
  };
}
