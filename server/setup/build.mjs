import { buildClient, buildServer } from './build-product.mjs';
import { preparePackages, projectRoot, requireNode } from './ground.mjs';
import { runStep } from './progress.mjs';
import { printFailure } from './setup-error.mjs';

try {
  requireNode();
  await preparePackages();
  await runStep('Client', async (tell) => tell((await buildClient(projectRoot)) ? 'built' : 'up to date'));
  await runStep('Server', async (tell) => tell((await buildServer(projectRoot)) ? 'built' : 'up to date'));
} catch (error) {
  printFailure(error);
  process.exitCode = 1;
}
