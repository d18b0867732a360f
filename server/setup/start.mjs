import { join } from 'node:path';
import { buildClient } from './build-product.mjs';
import { projectRoot } from './ground.mjs';
import { undoAtEnd } from './process-end.mjs';
import { runStep, secondsSoFar } from './progress.mjs';
import { explainListening, importBuilt, prepareServing, serveUntilStopped } from './serving-steps.mjs';

await serveUntilStopped(start);

/** From nothing to a server that listens, in this process: a child would keep the port if we were killed. */
async function start(port) {
  console.log('Gavelrow');
  const { environment, sayWhere } = await prepareServing(port, () =>
    runStep('Client', async (tell) => tell((await buildClient(projectRoot)) ? 'built' : 'up to date')),
  );
  // React, which renders the pages of copies, has its slow self-checks in every other environment.
  process.env.NODE_ENV ??= 'production';
  const { readSettings, startServer } = await importBuilt('main');
  const server = await startServer(readSettings(environment, join(projectRoot, 'dist', 'client'))).catch(
    (error) => {
      throw explainListening(error, port);
    },
  );
  undoAtEnd(() => server.close());
  console.log(`\nReady after ${secondsSoFar()}. Open ${server.url}`);
  sayWhere(server.url);
  console.log('\nCtrl-C stops the server and its database.');
}
