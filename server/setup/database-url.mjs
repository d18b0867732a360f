import { fileURLToPath } from 'node:url';
import { openPrivateCluster } from './private-cluster.mjs';

const projectRoot = fileURLToPath(new URL('../..', import.meta.url)).replace(/\/$/, '');

/**
 * The database that a command works on: DATABASE_URL where it is set, else the project's private one,
 * which is started for as long as the command needs it unless a server runs it already.
 */
export async function openDatabaseUrl() {
  const url = process.env.DATABASE_URL;
  if (url !== undefined && url !== '') return { url, close: async () => {} };
  const cluster = await openPrivateCluster(projectRoot);
  return { url: cluster.url, close: cluster.close };
}
