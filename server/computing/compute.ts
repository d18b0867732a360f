import { createHash } from 'node:crypto';
import { readFileSync } from 'node:fs';
import { availableParallelism } from 'node:os';
import { Worker } from 'node:worker_threads';
import type { ComputingTasks, TaskName } from './computing-tasks.ts';
import { createWorkerPool } from './worker-pool.ts';

/** Built, the worker lies beside this code as a bundle of its own. */
const isBuilt = !import.meta.url.endsWith('.ts');
const workerUrl = new URL(isBuilt ? './computing-worker.js' : './source-worker.mjs', import.meta.url);

/** One core is left to the event loop; more than two threads would only take memory. */
const threads = Math.max(1, Math.min(2, availableParallelism() - 1));
/** A weighing takes well under a second: whoever would be thirty-third is better told to come back. */
const mostWaiting = 32;

const pool = createWorkerPool({
  threads,
  mostWaiting,
  startWorker: () => new Worker(workerUrl, { execArgv: [] }),
});

/**
 * Computes a task in a thread of its own.
 * @param signal once aborted, the computation stops
 * @throws CodedError busy, and what the task throws
 */
export async function compute<Name extends TaskName>(
  task: Name,
  input: Parameters<ComputingTasks[Name]>,
  signal?: AbortSignal,
): Promise<Awaited<ReturnType<ComputingTasks[Name]>>> {
  // The worker runs the function of this name on this input, so this is what comes back.
  return (await pool.run({ task, input }, signal)) as Awaited<ReturnType<ComputingTasks[Name]>>;
}

/** Ends the threads of this process; the next computation starts new ones. */
export function closeComputing(): Promise<void> {
  return pool.close();
}

/**
 * Stands for the code that computes: what it gave may be kept as long as this is the same. The built worker names the
 * chunks that it consists of by their content; from source, every start of the process is taken for another code.
 */
export const codeMark: string = createHash('sha256')
  .update(isBuilt ? readFileSync(workerUrl) : `${process.pid} ${Date.now()}`)
  .digest('hex');
