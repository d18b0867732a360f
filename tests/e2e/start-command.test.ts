import { type ChildProcess, spawn } from 'node:child_process';
import { once } from 'node:events';
import { chmodSync, cpSync, mkdtempSync, rmSync, symlinkSync } from 'node:fs';
import { createServer } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterAll, afterEach, beforeAll, describe, expect, test } from 'vitest';

const repository = fileURLToPath(new URL('../..', import.meta.url));
const folders = ['server', 'shared', 'src', 'drizzle', 'locales'];
const files = ['index.html', 'package.json', 'package-lock.json', 'vite.config.ts'];

let project: string;
let started: ChildProcess | null = null;

beforeAll(() => {
  project = mkdtempSync(join(tmpdir(), 'gavelrow-start-'));
  chmodSync(project, 0o755);
  for (const source of [...folders, ...files]) {
    cpSync(join(repository, source), join(project, source), { recursive: true });
  }
  symlinkSync(join(repository, 'node_modules'), join(project, 'node_modules'));
});

afterEach(async () => {
  if (started?.exitCode === null && started.signalCode === null) {
    started.kill('SIGTERM');
    await once(started, 'exit');
  }
});

afterAll(() => {
  rmSync(project, { recursive: true, force: true });
});

/** Runs the start command until it says that it is ready, or ends. */
async function start(environment: Record<string, string>): Promise<{ output: string; child: ChildProcess }> {
  const { DATABASE_URL: _unused, ...env } = process.env;
  const child = spawn(process.execPath, ['server/setup/start.mjs'], {
    cwd: project,
    env: { ...env, ...environment },
    stdio: ['ignore', 'pipe', 'pipe'],
  });
  started = child;
  let output = '';
  await new Promise<void>((resolve) => {
    const read = (chunk: Buffer) => {
      output += chunk.toString();
      if (output.includes('Ctrl-C stops')) resolve();
    };
    child.stdout.on('data', read);
    child.stderr.on('data', read);
    child.once('close', () => resolve());
  });
  return { output, child };
}

/** A port of the loopback address, held by the server that is returned with it. */
async function holdPort(): Promise<{ port: number; free: () => Promise<void> }> {
  const holder = createServer().listen(0, '127.0.0.1');
  await once(holder, 'listening');
  const address = holder.address();
  if (address === null || typeof address === 'string') throw new Error('no port');
  return { port: address.port, free: () => new Promise((resolve) => holder.close(() => resolve())) };
}

async function findFreePort(): Promise<number> {
  const { port, free } = await holdPort();
  await free();
  return port;
}

describe('npm start', () => {
  test(
    'goes from sources to a demo account, survives being killed, and stops its database',
    { timeout: 240_000 },
    async () => {
      const port = String(await findFreePort());
      const first = await start({ PORT: port });
      expect(first.output).toContain(`Open http://localhost:${port}`);
      const account = /(\S+@example\.org) +(\S+)/.exec(first.output);
      const signIn = await fetch(`http://localhost:${port}/api/session`, {
        method: 'POST',
        headers: { 'content-type': 'application/json' },
        body: JSON.stringify({ email: account?.[1], password: account?.[2] }),
      });
      expect(signIn.status).toBe(200);
      const page = await fetch(`http://localhost:${port}/`);
      expect(await page.text()).toContain('<div id="root">');
      first.child.kill('SIGKILL');
      await once(first.child, 'exit');

      const second = await start({ PORT: port });
      expect(second.output).toMatch(/Database … runs already/);
      expect(second.output).not.toMatch(/Demo …/);
      expect((await fetch(`http://localhost:${port}/api/health`)).status).toBe(200);
      second.child.kill('SIGTERM');
      expect(await once(second.child, 'exit')).toEqual([143, null]);

      const third = await start({ PORT: port });
      expect(third.output).toMatch(/Database … started/);
    },
  );

  test('says at once that the port is taken, and which to take', async () => {
    const { port, free } = await holdPort();
    const { output, child } = await start({ PORT: String(port) });
    await free();
    expect(output).toContain(`Port ${port} is in use`);
    expect(output).toContain(`PORT=${port + 1} npm start`);
    expect(child.exitCode).toBe(1);
  });

  test('uses the database it is given, and says so when that cannot be reached', async () => {
    const { output, child } = await start({
      PORT: String(await findFreePort()),
      DATABASE_URL: `postgres://nobody@127.0.0.1:${await findFreePort()}/nothing`,
    });
    expect(output).toContain('The database of DATABASE_URL could not be brought to the newest schema');
    expect(output).not.toContain('.local/postgres');
    expect(child.exitCode).toBe(1);
  });
});
