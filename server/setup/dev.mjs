import { spawn } from 'node:child_process';
import { projectRoot } from './ground.mjs';
import { endProcess, undoAtEnd } from './process-end.mjs';
import { host, prepareServing, serveUntilStopped } from './serving-steps.mjs';

await serveUntilStopped(develop);

/** The client by Vite on PORT, which passes /api on to the server beside it; both follow their sources. */
async function develop(port) {
  const apiPort = String(process.env.API_PORT ?? port + 1);
  const { environment, sayWhere } = await prepareServing(port);
  const env = { ...environment, API_PORT: apiPort };
  // The client's settings, for its components that render the page of a copy; the server's own files need none.
  const watch = ['node_modules/tsx/dist/cli.mjs', 'watch', '--tsconfig', 'tsconfig.client.json'];
  runBeside([...watch, 'server/setup/dev-server.ts'], {
    ...env,
    PORT: apiPort,
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
  sayWhere(`http://localhost:${port}`);
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
