import { fileURLToPath } from 'node:url';
import { readSettings, startServer } from '#server/main.ts';
import { createDemoDatabase, type TestDatabase } from './test-database.ts';

export type DemoApp = { url: string; database: TestDatabase; close: () => Promise<void> };

/**
 * The whole product on a free port, with the demo in a database of its own and the built client.
 * @param extra settings beyond those that every start needs, a mail server say
 */
export async function startDemoApp(extra: NodeJS.ProcessEnv = {}): Promise<DemoApp> {
  const database = await createDemoDatabase();
  const environment = {
    DATABASE_URL: database.url,
    PORT: '0',
    SESSION_SECRET: 'a secret of no worth, for tests alone',
    LOG_LEVEL: 'error',
    ...extra,
  };
  const client = fileURLToPath(new URL('../../dist/client', import.meta.url));
  const server = await startServer(readSettings(environment, client));
  return {
    url: server.url,
    database,
    close: async () => {
      await server.close();
      await database.close();
    },
  };
}
