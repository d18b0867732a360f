import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { chmodSync, mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import pg from 'pg';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { openPrivateCluster } from '#server/setup/private-cluster.mjs';

let project: string;

beforeAll(() => {
  project = mkdtempSync(join(tmpdir(), 'gavelrow-cluster-'));
  chmodSync(project, 0o755);
});

afterAll(() => {
  rmSync(project, { recursive: true, force: true });
});

async function ask(url: string, question: string): Promise<unknown> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    const { rows } = await client.query({ text: question, rowMode: 'array' });
    return (rows[0] as unknown[] | undefined)?.[0];
  } finally {
    await client.end();
  }
}

test('what was stored is there again when the cluster is opened again', async () => {
  const first = await openPrivateCluster(project);
  expect(first).toMatchObject({ isNew: true, wasRunning: false });
  await ask(first.url, 'create table kept as select 42 as answer');
  await first.close();
  await expect(ask(first.url, 'select 1')).rejects.toThrow(/ECONNREFUSED/);

  const second = await openPrivateCluster(project);
  expect(second).toMatchObject({ isNew: false, wasRunning: false });
  expect(await ask(second.url, 'select answer from kept')).toBe(42);
  await second.close();
});

test('the cluster runs until the last of its users closes it', async () => {
  const first = await openPrivateCluster(project);
  const second = await openPrivateCluster(project);
  expect(second).toMatchObject({ url: first.url, wasRunning: true });
  await first.close();
  expect(await ask(second.url, 'select 1')).toBe(1);
  await second.close();
  await expect(ask(second.url, 'select 1')).rejects.toThrow(/ECONNREFUSED/);
});

test('a cluster whose user was killed is taken over, and stopped by the next one', async () => {
  const script =
    `const { openPrivateCluster } = await import('#server/setup/private-cluster.mjs');` +
    `await openPrivateCluster(${JSON.stringify(project)}); console.log('open'); setInterval(() => {}, 1000);`;
  const killed = spawn(process.execPath, ['--input-type=module', '--eval', script], {
    stdio: ['ignore', 'pipe', 'inherit'],
  });
  await once(killed.stdout, 'data');
  killed.kill('SIGKILL');
  await once(killed, 'exit');

  const next = await openPrivateCluster(project);
  expect(next.wasRunning).toBe(true);
  expect(await ask(next.url, 'select 1')).toBe(1);
  await next.close();
  await expect(ask(next.url, 'select 1')).rejects.toThrow(/ECONNREFUSED/);
});

test('nobody gets in without the password, nor by a socket', async () => {
  const cluster = await openPrivateCluster(project);
  const withoutPassword = new URL(cluster.url);
  withoutPassword.password = '';
  await expect(ask(withoutPassword.href, 'select 1')).rejects.toThrow(/password/);
  expect(await ask(cluster.url, 'show unix_socket_directories')).toBe('');
  expect(await ask(cluster.url, 'show listen_addresses')).toBe('127.0.0.1');
  await cluster.close();
});
