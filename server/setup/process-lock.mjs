import { linkSync, mkdirSync, readFileSync, renameSync, rmSync, writeFileSync } from 'node:fs';
import { dirname } from 'node:path';
import { setTimeout as sleep } from 'node:timers/promises';
import { SetupError } from './setup-error.mjs';

/**
 * Names this process so that a later process with the same number is not taken for it:
 * its number and, where /proc tells, when it started.
 */
export function markProcess(pid = process.pid) {
  return `${pid} ${readStartTime(pid)}`;
}

/**
 * Whether the process that wrote this mark still runs.
 * @param {string} mark
 */
export function isProcessAlive(mark) {
  const [pidText, startTime = ''] = mark.trim().split(' ');
  const pid = Number(pidText);
  if (!Number.isInteger(pid) || pid <= 0) return false;
  try {
    process.kill(pid, 0);
  } catch (error) {
    if (error.code !== 'EPERM') return false;
  }
  const now = readStartTime(pid);
  return now === '' || startTime === '' || now === startTime;
}

/** Field 22 of /proc/PID/stat, counted after the name, which may hold blanks; '' where there is no /proc. */
function readStartTime(pid) {
  try {
    const stat = readFileSync(`/proc/${pid}/stat`, 'utf8');
    return stat.slice(stat.lastIndexOf(')') + 2).split(' ')[19] ?? '';
  } catch {
    return '';
  }
}

/**
 * Does some work while no other process does work under the same lock file. A lock whose holders died is taken over.
 * @template T
 * @param {string} path of the lock file
 * @param {(addHolder: (pid: number) => void) => Promise<T>} work may add programs that it starts: they hold the lock
 *   as well, should this process be killed before them
 * @returns {Promise<T>}
 * @throws SetupError when another process holds the lock for ten minutes
 */
export async function withProcessLock(path, work) {
  await takeLock(path);
  try {
    return await work((pid) => {
      const own = `${path}.${process.pid}`;
      writeFileSync(own, `${readFileSync(path, 'utf8')}\n${markProcess(pid)}`);
      renameSync(own, path);
    });
  } finally {
    rmSync(path, { force: true });
  }
}

async function takeLock(path) {
  mkdirSync(dirname(path), { recursive: true });
  const own = `${path}.${process.pid}`;
  writeFileSync(own, markProcess());
  try {
    const giveUpAt = Date.now() + 600_000;
    for (;;) {
      try {
        // A link appears whole and only once, with its content: nobody reads a half-written lock.
        linkSync(own, path);
        return;
      } catch (error) {
        if (error.code !== 'EEXIST') throw error;
      }
      dropDeadLock(path);
      if (Date.now() > giveUpAt) {
        throw new SetupError('Another start has been busy for ten minutes.', `End it, or delete ${path}.`);
      }
      await sleep(100);
    }
  } finally {
    rmSync(own, { force: true });
  }
}

function dropDeadLock(path) {
  let holder;
  try {
    holder = readFileSync(path, 'utf8');
  } catch {
    return;
  }
  if (holder.split('\n').some(isProcessAlive)) return;
  const aside = `${path}.dead.${process.pid}`;
  try {
    renameSync(path, aside);
    // Another process may have taken the lock since we read it: then it was alive, and gets it back.
    if (readFileSync(aside, 'utf8') !== holder) linkSync(aside, path);
  } catch {
    // Somebody else dropped it first.
  }
  rmSync(aside, { force: true });
}
