import { join, resolve } from 'node:path';
import { pathToFileURL } from 'node:url';
import { projectRoot } from './ground.mjs';
import { openPrivateCluster } from './private-cluster.mjs';
import { endOnSignals, endProcess, isEnding, undoAtEnd } from './process-end.mjs';
import { printFailure } from './setup-error.mjs';

/*
 * node --import tsx server/setup/with-database.mjs COMMAND.ts ARGUMENTS…
 *
 * Runs a command with DATABASE_URL set to a database of the newest schema: the one that is named already, else the
 * project's own, which is started for as long as the command needs it unless a server runs it anyway.
 */
const [node, , command, ...rest] = process.argv;

endOnSignals(() => undefined);
try {
  process.env.DATABASE_URL ||= await openOwnDatabase();
  const { migrateDatabase } = await import('#server/migrate-database.ts');
  await migrateDatabase(process.env.DATABASE_URL, join(projectRoot, 'drizzle', 'migrations'));
  process.argv = [node, resolve(command), ...rest];
  await import(pathToFileURL(resolve(command)).href);
  await endProcess(process.exitCode ?? 0);
} catch (error) {
  if (!isEnding()) {
    printFailure(error);
    await endProcess(1);
  }
}

async function openOwnDatabase() {
  const cluster = await openPrivateCluster(projectRoot);
  undoAtEnd(() => cluster.close());
  return cluster.url;
}
