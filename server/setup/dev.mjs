import { spawn } from 'node:child_process';
import { printDemoNotes, printMailPage, readDemoNotes } from './demo-notes.mjs';
import { projectRoot } from './ground.mjs';
import { endOnSignals, endProcess, isEnding, undoAtEnd } from './process-end.mjs';
import {
  catchDemoMail,
  givenUrl,
  host,
  keepSessionSecret,
  prepareDatabase,
  prepareGround,
  readPort,
} from './serving-steps.mjs';
import { printFailure } from './setup-error.mjs';

endOnSignals(() => console.log('\nStopping …'));
try {
  await develop(readPort());
} catch (error) {
  if (!isEnding()) {
    printFailure(error);
    await endProcess(1);
  }
}

/** The client by Vite on PORT, which passes /api on to the server beside it; both follow their sources. */
async function develop(port) {
  const apiPort = Number(process.env.API_PORT ?? port + 1);
  await prepareGround(port);
  const databaseUrl = await prepareDatabase();
  const mail = await catchDemoMail();
  const env = {
    SESSION_SECRET: keepSessionSecret(),
    LOG_LEVEL: 'warn',
    ...mail.environment,
    ...process.env,
    DATABASE_URL: databaseUrl,
    API_PORT: String(apiPort),
  };
  runBeside(['node_modules/tsx/dist/cli.mjs', 'watch', 'server/setup/dev-server.ts'], {
    ...env,
    PORT: String(apiPort),
  });
  runBeside(
    [
      'node_modules/vite/bin/vite.js',
      '--port',
      String(port),
      '--strictPort',
      '--host',
      host,
      '--clearScreen=false',
    ],
    env,
  );
  const notes = givenUrl === '' ? readDemoNotes() : null;
  if (notes !== null) printDemoNotes(notes, `http://localhost:${port}`);
  printMailPage(mail.pageUrl);
  console.log('');
}

/** Ended with this process; when it ends by itself, so do we. */
function runBeside(args, env) {
  const child = spawn(process.execPath, args, {
    cwd: projectRoot,
    env,
    stdio: ['ignore', 'inherit', 'inherit'],
  });
  const ended = new Promise((resolve) => {
    child.once('exit', resolve);
  });
  undoAtEnd(async () => {
    child.kill('SIGTERM');
    await ended;
  });
  void ended.then((code) => endProcess(code ?? 0));
}
