import { join } from 'node:path';
import { buildClient } from './build-product.mjs';
import { printDemoNotes, printMailPage, readDemoNotes } from './demo-notes.mjs';
import { projectRoot } from './ground.mjs';
import { endOnSignals, endProcess, isEnding, undoAtEnd } from './process-end.mjs';
import { runStep, secondsSoFar } from './progress.mjs';
import {
  catchDemoMail,
  explainListening,
  givenUrl,
  importBuilt,
  keepSessionSecret,
  prepareDatabase,
  prepareGround,
  readPort,
} from './serving-steps.mjs';
import { printFailure } from './setup-error.mjs';

endOnSignals(() => console.log('\nStopping …'));
try {
  await start(readPort());
} catch (error) {
  if (!isEnding()) {
    printFailure(error);
    await endProcess(1);
  }
}

/** From nothing to a server that listens, in this process: a child would keep the port if we were killed. */
async function start(port) {
  console.log('Gavelrow');
  await prepareGround(port);
  await runStep('Client', async (tell) => tell((await buildClient(projectRoot)) ? 'built' : 'up to date'));
  const databaseUrl = await prepareDatabase();
  const mail = await catchDemoMail();
  const { readSettings, startServer } = await importBuilt('main');
  const environment = {
    SESSION_SECRET: keepSessionSecret(),
    LOG_LEVEL: 'warn',
    ...mail.environment,
    ...process.env,
    DATABASE_URL: databaseUrl,
  };
  const server = await startServer(readSettings(environment, join(projectRoot, 'dist', 'client'))).catch(
    (error) => {
      throw explainListening(error, port);
    },
  );
  undoAtEnd(() => server.close());
  console.log(`\nReady after ${secondsSoFar()}. Open ${server.url}`);
  const notes = givenUrl === '' ? readDemoNotes() : null;
  if (notes !== null) printDemoNotes(notes, server.url);
  printMailPage(mail.pageUrl);
  console.log('\nCtrl-C stops the server and its database.');
}
