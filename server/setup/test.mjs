import { findChromium } from './chromium-program.mjs';
import { buildClient, buildServer } from './build-product.mjs';
import { becomeProjectOwner, preparePackages, preparePostgres, projectRoot, requireNode } from './ground.mjs';
import { installFromDebian } from './install-debian.mjs';
import { endOnSignals, endProcess, isEnding } from './process-end.mjs';
import { runStep, secondsSoFar } from './progress.mjs';
import { printFailure } from './setup-error.mjs';
import { beginTestRun } from './test-run.mjs';

const isFastLoop = process.argv.includes('--fast');

endOnSignals(() => console.log('\nStopping the tests …'));
try {
  await endProcess(await runTests());
} catch (error) {
  if (!isEnding()) {
    printFailure(error);
    // The closing line tells that nothing was tested.
    console.log('\n0 passed, 1 failed');
    await endProcess(1);
  }
}

/** @returns {Promise<number>} the exit code */
async function runTests() {
  console.log('Set-up');
  requireNode();
  if (!isFastLoop) {
    await preparePostgres();
    await prepareChromium();
  }
  becomeProjectOwner();
  await preparePackages();
  const run = beginTestRun();
  const bin = (name) => `node_modules/.bin/${name}`;
  const eslint = ['.', '--cache', '--cache-strategy=content', '--cache-location=node_modules/.cache/eslint/'];
  const prettier = ['--check', '.', '--log-level=warn', '--cache', '--cache-strategy=content'];
  const lint = () =>
    isFastLoop
      ? run.check('Lint', bin('eslint'), [...eslint, '--quiet'])
      : run.check('Lint with types', bin('eslint'), ['.'], { LINT_WITH_TYPES: '1' });
  // Of one thread, and with memory that is seldom cleared away: half the work, where another core lints meanwhile.
  const types = { args: ['-b', '--singleThreaded'], env: { GOGC: '400' } };
  const buildStep = (label, build) =>
    run.aloud(() =>
      runStep(label, async (tell) => tell((await build(projectRoot)) ? 'built' : 'up to date')),
    );
  const others = async () => {
    await run.check('Types', bin('tsc'), types.args, types.env);
    await run.check('Format', bin('prettier'), prettier);
    if (!isFastLoop) {
      await run.check('Dead code', bin('knip'), ['--no-progress']);
      await buildStep('Client', buildClient);
      await buildStep('Server', buildServer);
      await run.check('Size of the first pages', process.execPath, [
        'server/setup/check-first-page-size.mjs',
      ]);
    }
    await run.test('Unit tests', ['unit', 'client']);
    if (!isFastLoop) await run.test('Reference checks', ['reference']);
  };
  // Lint takes longer than anything else on one core, and there are two nearly everywhere.
  await Promise.all([lint(), others()]);
  if (isFastLoop) return run.finish(secondsSoFar());
  await run.test('API on PostgreSQL', ['api']);
  await run.test('End to end in Chromium', ['e2e']);
  return run.finish(secondsSoFar());
}

function prepareChromium() {
  return runStep('Chromium', async (tell) => {
    const found = findChromium();
    if (found === null) await installFromDebian('Chromium', ['chromium']);
    tell(found ?? `${findChromium()} installed`);
  });
}
