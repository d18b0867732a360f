import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { existsSync, mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { isProcessAlive, markProcess, withProcessLock } from '#server/setup/process-lock.mjs';

let folder: string;
const lock = () => join(folder, 'lock');

beforeAll(() => {
  folder = mkdtempSync(join(tmpdir(), 'gavelrow-lock-'));
});

afterAll(() => {
  rmSync(folder, { recursive: true, force: true });
});

/** A process that has ended, and the mark it had. */
async function markOfTheDead(): Promise<string> {
  const child = spawn(process.execPath, ['--eval', 'setInterval(() => {}, 1000)'], { stdio: 'ignore' });
  const mark = markProcess(child.pid);
  child.kill('SIGKILL');
  await once(child, 'exit');
  return mark;
}

test('what is done under one lock is done one after the other', async () => {
  const events: string[] = [];
  const work = (name: string) =>
    withProcessLock(lock(), async () => {
      events.push(`${name} begins`);
      await sleep(30);
      events.push(`${name} ends`);
    });
  await Promise.all([work('a'), work('b')]);
  expect(events).toHaveLength(4);
  expect(events[1]).toBe(events[0]?.replace('begins', 'ends'));
  expect(existsSync(lock())).toBe(false);
});

test('the lock of a process that was killed is taken over', async () => {
  writeFileSync(lock(), await markOfTheDead());
  expect(await withProcessLock(lock(), async () => 'done')).toBe('done');
});

test('a program that a killed process had started still holds the lock', async () => {
  const child = spawn(process.execPath, ['--eval', 'setInterval(() => {}, 1000)'], { stdio: 'ignore' });
  writeFileSync(lock(), `${await markOfTheDead()}\n${markProcess(child.pid)}`);
  let isDone = false;
  const waiting = withProcessLock(lock(), async () => {
    isDone = true;
  });
  await sleep(300);
  expect(isDone).toBe(false);
  child.kill('SIGKILL');
  await waiting;
  expect(isDone).toBe(true);
});

test('failed work gives the lock back', async () => {
  await expect(withProcessLock(lock(), () => Promise.reject(new Error('no')))).rejects.toThrow('no');
  expect(existsSync(lock())).toBe(false);
});

test.runIf(process.platform === 'linux')('another process with the same number is not the same', () => {
  expect(isProcessAlive(markProcess())).toBe(true);
  expect(isProcessAlive(`${process.pid} 1`)).toBe(false);
});
