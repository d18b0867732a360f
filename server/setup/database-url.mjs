import { fileURLToPath } from 'node:url';
import { openPrivateCluster } from './private-cluster.mjs';

const projectRoot = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

/**
 * The database that a command works on: DATABASE_URL where it is set, else the project's private one,
 * which is started for as long as the command needs it unless a server runs it already.
 * Call `close` at the end, also after a failure. The schema may be older than the code: migrate first.
 * @returns {Promise<{ url: string, close: () => Promise<void> }>}
 */
export async function openDatabaseUrl() {
  const url = process.env.DATABASE_URL;
  if (url !== undefined && url !== '') return { url, close: async () => {} };
  const cluster = await openPrivateCluster(projectRoot);
  return { url: cluster.url, close: cluster.close };
}
