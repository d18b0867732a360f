import { randomBytes } from 'node:crypto';
import { existsSync, readFileSync, writeFileSync } from 'node:fs';
import { createServer } from 'node:net';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { buildServer } from './build-product.mjs';
import { printDemoNotes, printMailPage, readDemoNotes, writeDemoNotes } from './demo-notes.mjs';
import { becomeProjectOwner, preparePackages, preparePostgres, projectRoot, requireNode } from './ground.mjs';
import { makePassableFolder } from './postgres-cluster.mjs';
import { openPrivateCluster } from './private-cluster.mjs';
import { endOnSignals, endProcess, isEnding, undoAtEnd } from './process-end.mjs';
import { runStep } from './progress.mjs';
import { printFailure, SetupError } from './setup-error.mjs';

/** The database that somebody names, or '' for the project's own. */
export const givenUrl = process.env.DATABASE_URL ?? '';
export const host = process.env.HOST ?? '127.0.0.1';

/**
 * Runs what serves the product until it is told to stop. A failure is said in words and undoes what was begun.
 * @param {(port: number) => Promise<void>} begin
 */
export async function serveUntilStopped(begin) {
  endOnSignals(() => console.log('\nStopping …'));
  try {
    await begin(readPort());
  } catch (error) {
    if (!isEnding()) {
      printFailure(error);
      await endProcess(1);
    }
  }
}

/**
 * Brings everything up to the server itself: ground, database, caught mail.
 * @param {number} port
 * @param {() => Promise<void>} [beforeDatabase] a step that needs the packages, and that the database can wait for
 * @returns {Promise<{ environment: NodeJS.ProcessEnv, sayWhere: (url: string) => void }>} the server's environment, in
 *   which what a person has set counts, and what tells that person where to look and how to sign in
 */
export async function prepareServing(port, beforeDatabase = () => Promise.resolve()) {
  await prepareGround(port);
  await beforeDatabase();
  const databaseUrl = await prepareDatabase();
  const mail = await catchDemoMail();
  const environment = {
    SESSION_SECRET: keepSessionSecret(),
    LOG_LEVEL: 'warn',
    ...mail.environment,
    ...process.env,
    DATABASE_URL: databaseUrl,
  };
  const sayWhere = (url) => {
    const notes = givenUrl === '' ? readDemoNotes() : null;
    if (notes !== null) printDemoNotes(notes, url);
    printMailPage(mail.pageUrl);
  };
  return { environment, sayWhere };
}

/** @returns {number} PORT, or 3000 */
function readPort() {
  const port = Number(process.env.PORT ?? 3000);
  if (Number.isInteger(port) && port >= 0 && port <= 65_535) return port;
  throw new SetupError(`PORT is ${process.env.PORT}, which is no port.`, 'Give a number from 1 to 65535.');
}

/** What must be there before the product can run. The port is tried first, so that nobody waits minutes to be told. */
async function prepareGround(port) {
  requireNode();
  await requireFreePort(port);
  if (givenUrl === '') await preparePostgres();
  becomeProjectOwner();
  makePassableFolder(join(projectRoot, '.local'));
  await preparePackages();
}

async function requireFreePort(port) {
  await new Promise((resolve, reject) => {
    const probe = createServer();
    probe.once('error', (error) => reject(explainListening(error, port)));
    probe.listen(port, host, () => probe.close(resolve));
  });
}

/** Says what to do when a port cannot be listened on. */
export function explainListening(error, port) {
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

/** Bundles the server, opens the database, migrates it and fills the project's own with the demo once. */
async function prepareDatabase() {
  await runStep('Server', async (tell) => tell((await buildServer(projectRoot)) ? 'built' : 'up to date'));
  const databaseUrl = await openDatabase();
  const { migrateDatabase } = await importBuilt('main');
  await runStep('Schema', async () => {
    try {
      await migrateDatabase(databaseUrl, join(projectRoot, 'drizzle', 'migrations'));
    } catch (error) {
      throw explainDatabase(error);
    }
  });
  if (givenUrl === '') await seedOnce(databaseUrl);
  return databaseUrl;
}

function openDatabase() {
  return runStep('Database', async (tell) => {
    if (givenUrl !== '') {
      tell('the one of DATABASE_URL');
      return givenUrl;
    }
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

function explainDatabase(error) {
  if (givenUrl === '') return error;
  const reason = error.cause?.message ?? error.message ?? error.code;
  return new SetupError(
    `The database of DATABASE_URL could not be brought to the newest schema: ${reason || error.code}.`,
    'See that it runs, that the address is right and that its user may create tables; or unset DATABASE_URL.',
    { cause: error },
  );
}

/** The demo goes into the project's own database alone: its passwords are known to everybody. */
async function seedOnce(databaseUrl) {
  if (readDemoNotes() !== null) return;
  await runStep('Demo', async (tell) => {
    const [{ connectDatabase }, { seedDemo }] = [await importBuilt('db'), await importBuilt('seed-demo')];
    const { db, close } = connectDatabase(databaseUrl, () => undefined);
    try {
      const demo = await seedDemo(db);
      writeDemoNotes(demo);
      tell(demo.isFresh ? 'filled in' : 'there already');
    } finally {
      await close();
    }
  });
}

/**
 * Catches the mail of the project's own database on loopback and shows it on a page, unless SMTP_URL names a mail
 * server (or, set to nothing, none). The sink is a development package: it is imported here alone.
 * @returns {Promise<{ environment: Record<string, string>, pageUrl: string | null }>}
 */
async function catchDemoMail() {
  if (givenUrl !== '' || process.env.SMTP_URL !== undefined) return { environment: {}, pageUrl: null };
  return runStep('Mail', async (tell) => {
    const [{ openMailSink }, { openMailPage }] = [
      await import('./mail-sink.mjs'),
      await import('./mail-page.mjs'),
    ];
    const sink = await openMailSink();
    undoAtEnd(() => sink.close());
    const page = await openMailPage(sink.mails);
    undoAtEnd(() => page.close());
    tell('caught on this machine');
    return { environment: { SMTP_URL: sink.url, MAIL_FROM: 'gavelrow@example.org' }, pageUrl: page.url };
  });
}

/** A part of the built server: main, db or seed-demo. */
export function importBuilt(name) {
  return import(pathToFileURL(join(projectRoot, 'dist', 'server', `${name}.js`)).href);
}

/** The same at every start, so that nobody is signed out by one. */
function keepSessionSecret() {
  const path = join(projectRoot, '.local', 'session-secret');
  if (!existsSync(path)) writeFileSync(path, randomBytes(32).toString('base64url'), { mode: 0o600 });
  return readFileSync(path, 'utf8');
}
