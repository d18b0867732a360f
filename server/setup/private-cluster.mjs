import { mkdirSync, readdirSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { choosePostgresAccount } from './postgres-account.mjs';
import {
  initCluster,
  makePassableFolder,
  readDataVersion,
  readRunningPort,
  startCluster,
  stopCluster,
} from './postgres-cluster.mjs';
import { findPostgres, oldestPostgres } from './postgres-programs.mjs';
import { isProcessAlive, markProcess, withProcessLock } from './process-lock.mjs';
import { SetupError } from './setup-error.mjs';

let opened = 0;

/**
 * The project's own PostgreSQL in .local/postgres: made at the first call, started when it does not run.
 * Several processes may use it at once (the server, an import); the last of them to close stops it, and one that was
 * killed no longer counts.
 * @param {string} projectRoot
 * @returns {Promise<{ url: string, isNew: boolean, wasRunning: boolean, close: () => Promise<void> }>}
 * @throws SetupError when PostgreSQL is missing, too old for the data, or will not start
 */
export async function openPrivateCluster(projectRoot) {
  const folder = join(projectRoot, '.local', 'postgres');
  makePassableFolder(join(projectRoot, '.local'));
  makePassableFolder(folder);
  const users = join(folder, 'users');
  mkdirSync(users, { recursive: true });
  const lock = join(folder, 'lock');
  opened += 1;
  const own = join(users, `${process.pid}-${opened}`);

  return withProcessLock(lock, async (addHolder) => {
    const dataVersion = readDataVersion(folder);
    const programs = await requirePostgres(dataVersion, folder);
    const account = choosePostgresAccount(folder);
    const cluster = { folder, programs, account, isThrowaway: false };
    if (dataVersion === null) await initCluster(cluster, addHolder);
    dropDeadUsers(users);
    writeFileSync(own, markProcess());
    const { url, wasRunning } = await startCluster(cluster);
    const close = () =>
      withProcessLock(lock, async () => {
        rmSync(own, { force: true });
        dropDeadUsers(users);
        if (readdirSync(users).length === 0 && readRunningPort(folder) !== null) await stopCluster(cluster);
      });
    return { url, isNew: dataVersion === null, wasRunning, close };
  });
}

function dropDeadUsers(users) {
  for (const name of readdirSync(users)) {
    const path = join(users, name);
    if (!isProcessAlive(readFileSync(path, 'utf8'))) rmSync(path, { force: true });
  }
}

/** The programs that fit the data: another major version cannot read it. */
async function requirePostgres(dataVersion, folder) {
  const programs = await findPostgres(dataVersion);
  if (programs !== null) return programs.folder;
  if (dataVersion === null) {
    throw new SetupError(
      `PostgreSQL ${oldestPostgres} or newer was not found.`,
      'npm start installs it or says how.',
    );
  }
  throw new SetupError(
    `The data in ${folder} was made by PostgreSQL ${dataVersion}, which is no longer installed.`,
    `Install postgresql-${dataVersion}; or, if nothing in it is needed, delete ${folder} to begin again.`,
  );
}
