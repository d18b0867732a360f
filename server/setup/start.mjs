import { randomBytes } from 'node:crypto';
import { mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { buildClient, buildServer } from './build-product.mjs';
import { printDemoNotes, readDemoNotes, writeDemoNotes } from './demo-notes.mjs';
import { becomeProjectOwner, preparePackages, preparePostgres, projectRoot, requireNode } from './ground.mjs';
import { openPrivateCluster } from './private-cluster.mjs';
import { endOnSignals, endProcess, isEnding, undoAtEnd } from './process-end.mjs';
import { runStep, secondsSoFar } from './progress.mjs';
import { printFailure, SetupError } from './setup-error.mjs';

const givenUrl = process.env.DATABASE_URL ?? '';
const host = process.env.HOST ?? '127.0.0.1';
const port = Number(process.env.PORT ?? 3000);

endOnSignals(() => console.log('\nStopping the server and its database …'));
try {
  console.log('Gavelrow');
  await start();
} catch (error) {
  if (!isEnding()) {
    printFailure(error);
    await endProcess(1);
  }
}

async function start() {
  requireNode();
  await requireFreePort();
  if (givenUrl === '') await preparePostgres();
  becomeProjectOwner();
  mkdirSync(join(projectRoot, '.local'), { recursive: true });
  await preparePackages();
  await runStep('Client', async (tell) => tell((await buildClient(projectRoot)) ? 'built' : 'up to date'));
  await runStep('Server', async (tell) => tell((await buildServer(projectRoot)) ? 'built' : 'up to date'));
  const databaseUrl = await openDatabase();
  const { migrateDatabase, readSettings, startServer } = await importBuilt('main');
  await runStep('Schema', () => migrateDatabase(databaseUrl, join(projectRoot, 'drizzle', 'migrations')));
  if (givenUrl === '') await seedOnce(databaseUrl);
  const settings = readSettings(
    {
      SESSION_SECRET: keepSessionSecret(),
      LOG_LEVEL: 'warn',
      ...process.env,
      DATABASE_URL: databaseUrl,
    },
    join(projectRoot, 'dist', 'client'),
  );
  const server = await startServer(settings).catch((error) => {
    throw explainListening(error);
  });
  undoAtEnd(() => server.close());
  announce(server.url);
}

function announce(url) {
  console.log(`\nReady after ${secondsSoFar()}: open ${url}`);
  const notes = givenUrl === '' ? readDemoNotes() : null;
  if (notes !== null) printDemoNotes(notes, url);
  console.log('\nCtrl-C stops the server and its database.');
}

/** Before the long steps, so that nobody waits minutes to be told. */
async function requireFreePort() {
  if (!Number.isInteger(port) || port < 0 || port > 65_535) {
    throw new SetupError(`PORT is ${process.env.PORT}, which is no port.`, 'Give a number from 1 to 65535.');
  }
  await new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', (error) => reject(explainListening(error)));
    probe.listen(port, host, () => probe.close(resolve));
  });
}

function explainListening(error) {
  const another = `Take another one: PORT=${port + 1} npm start`;
  if (error.code === 'EADDRINUSE') {
    return new SetupError(`Port ${port} is in use, perhaps by an earlier start.`, another, { cause: error });
  }
  if (error.code === 'EACCES') {
    return new SetupError(`Port ${port} may not be opened by this account.`, another, { cause: error });
  }
  if (error.code === 'EADDRNOTAVAIL' || error.code === 'ENOTFOUND') {
    return new SetupError(
      `HOST is ${host}, which is no address of this machine.`,
      'Leave it out for loopback.',
      {
        cause: error,
      },
    );
  }
  return error;
}

/** @returns {Promise<string>} the address of the database to use */
function openDatabase() {
  if (givenUrl !== '') return runStep('Database', async (tell) => (tell('DATABASE_URL'), givenUrl));
  return runStep('Database', async (tell) => {
    const opening = openPrivateCluster(projectRoot);
    undoAtEnd(async () => {
      const opened = await opening.catch(() => null);
      await opened?.close();
    });
    const { url, isNew, wasRunning } = await opening;
    tell(isNew ? 'made and started in .local/postgres' : wasRunning ? 'runs already' : 'started');
    return url;
  });
}

/** Fills the private database with the demo while nobody has an account in it: all of it, or nothing. */
async function seedOnce(databaseUrl) {
  const { connectDatabase } = await importBuilt('db');
  const { db, pool, close } = connectDatabase(databaseUrl, () => undefined);
  try {
    const { rows } = await pool.query('select exists (select from users) as has_accounts');
    if (rows[0].has_accounts) return;
    await runStep('Demo', async (tell) => {
      const { seedDemo } = await importBuilt('seed-demo');
      writeDemoNotes(await seedDemo(db));
      tell('seeded');
    });
  } finally {
    await close();
  }
}

const importBuilt = (name) => import(pathToFileURL(join(projectRoot, 'dist', 'server', `${name}.js`)).href);

/** The same at every start, so that nobody is signed out by one. */
function keepSessionSecret() {
  const path = join(projectRoot, '.local', 'session-secret');
  try {
    return readFileSync(path, 'utf8');
  } catch (error) {
    if (error.code !== 'ENOENT') throw error;
    const secret = randomBytes(32).toString('base64url');
    writeFileSync(path, secret, { mode: 0o600 });
    return secret;
  }
}
