import { readdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { choosePostgresAccount } from './postgres-account.mjs';
import { discardCluster, initCluster, makePassableFolder, startCluster } from './postgres-cluster.mjs';
import { findPostgres, oldestPostgres } from './postgres-programs.mjs';
import { isProcessAlive, markProcess } from './process-lock.mjs';
import { SetupError } from './setup-error.mjs';

let opened = 0;

/**
 * A PostgreSQL for one run of the tests: quick, unsafe, deleted at the end. Clusters of runs that were killed are
 * deleted on the way.
 * @param {string} projectRoot
 * @returns {Promise<{ url: string, close: () => void }>} url of the empty database, as superuser
 * @throws SetupError when PostgreSQL is missing
 */
export async function openTestCluster(projectRoot) {
  const programs = await findPostgres();
  if (programs === null) {
    throw new SetupError(`PostgreSQL ${oldestPostgres} or newer was not found.`, 'npm test installs it.');
  }
  const parent = join(projectRoot, '.local', 'test-postgres');
  makePassableFolder(join(projectRoot, '.local'));
  makePassableFolder(parent);
  const account = choosePostgresAccount(parent);
  const buildCluster = (name) => ({
    folder: join(parent, name),
    programs: programs.folder,
    account,
    isThrowaway: true,
  });
  for (const name of readdirSync(parent)) {
    if (!isProcessAlive(readOwnerMark(join(parent, name)))) discardCluster(buildCluster(name));
  }
  opened += 1;
  const cluster = buildCluster(`${process.pid}-${opened}-${Date.now()}`);
  makePassableFolder(cluster.folder);
  writeFileSync(join(cluster.folder, 'owner'), markProcess());
  const close = () => discardCluster(cluster);
  process.once('exit', close);
  await initCluster(cluster);
  const { url } = await startCluster(cluster);
  return {
    url,
    close: () => {
      process.off('exit', close);
      close();
    },
  };
}

/** A folder whose owner has not yet written its mark belongs to whoever its name says. */
function readOwnerMark(folder) {
  try {
    return readFileSync(join(folder, 'owner'), 'utf8');
  } catch {
    return folder.slice(folder.lastIndexOf('/') + 1).split('-')[0] ?? '';
  }
}
