import { type Worker } from 'node:worker_threads';
import { CodedError } from '#shared/error-codes.ts';
import { unpackFailure, type ComputingOrder, type ComputingReply } from './computing-message.ts';

type Job = {
  order: ComputingOrder;
  resolve: (value: unknown) => void;
  reject: (error: unknown) => void;
  /** Stops listening to the asker's signal. */
  release: () => void;
};

/** A thread and what it is at. */
type Thread = { worker: Worker; job: Job | null };

export type PoolOptions = {
  /** Threads at most; each is started when it is first needed. */
  threads: number;
  /** Jobs that may wait; one more is refused. */
  mostWaiting: number;
  startWorker: () => Worker;
};

/** A few threads that compute, so that the event loop stays free. */
export type WorkerPool = {
  /**
   * Has a task computed.
   * @param signal once aborted, the job is dropped; one under way ends with its thread, which is replaced when needed
   * @throws CodedError busy when too many jobs wait, and whatever code the task throws; the signal's reason when aborted
   */
  run: (order: ComputingOrder, signal?: AbortSignal) => Promise<unknown>;
  /** Ends every thread; what is still asked for is rejected. */
  close: () => Promise<void>;
  /** Jobs under way and waiting. */
  load: () => { running: number; waiting: number };
};

export function createWorkerPool({ threads: most, mostWaiting, startWorker }: PoolOptions): WorkerPool {
  const threads = new Set<Thread>();
  const waiting: Job[] = [];

  const settle = (thread: Thread, settleJob: (job: Job) => void): void => {
    const { job } = thread;
    thread.job = null;
    // An idle thread does not keep the process alive.
    thread.worker.unref();
    if (job === null) return;
    job.release();
    settleJob(job);
  };

  const discard = (thread: Thread, reason: unknown): void => {
    threads.delete(thread);
    settle(thread, (job) => job.reject(reason));
    startNext();
  };

  const addThread = (): Thread => {
    const thread: Thread = { worker: startWorker(), job: null };
    thread.worker.on('message', (reply: ComputingReply) => {
      settle(thread, (job) =>
        reply.outcome === 'done' ? job.resolve(reply.value) : job.reject(unpackFailure(reply)),
      );
      startNext();
    });
    thread.worker.on('error', (error) => discard(thread, error));
    thread.worker.on('exit', () => {
      if (threads.has(thread)) discard(thread, new Error('a computing thread ended'));
    });
    threads.add(thread);
    return thread;
  };

  const startNext = (): void => {
    const idle = [...threads].find((thread) => thread.job === null);
    const thread = idle ?? (threads.size < most && waiting.length > 0 ? addThread() : undefined);
    const job = thread && waiting.shift();
    if (thread === undefined || job === undefined) return;
    thread.job = job;
    thread.worker.ref();
    thread.worker.postMessage(job.order);
  };

  /** A job that nobody waits for any more: taken out of the queue, or ended with its thread. */
  const drop = (job: Job, reason: unknown): void => {
    const place = waiting.indexOf(job);
    if (place >= 0) waiting.splice(place, 1);
    const thread = [...threads].find((one) => one.job === job);
    if (thread === undefined) {
      job.reject(reason);
      return;
    }
    void thread.worker.terminate();
    discard(thread, reason);
  };

  return {
    run: (order, signal) =>
      new Promise((resolve, reject) => {
        signal?.throwIfAborted();
        if (waiting.length >= mostWaiting) throw new CodedError('busy');
        const onAbort = (): void => drop(job, signal?.reason);
        const job: Job = {
          order,
          resolve,
          reject,
          release: () => signal?.removeEventListener('abort', onAbort),
        };
        signal?.addEventListener('abort', onAbort, { once: true });
        waiting.push(job);
        startNext();
      }),
    close: async () => {
      const ended = new Error('the computing threads are closed');
      for (const job of waiting.splice(0)) job.reject(ended);
      const open = [...threads];
      threads.clear();
      for (const thread of open) settle(thread, (job) => job.reject(ended));
      await Promise.all(open.map((thread) => thread.worker.terminate()));
    },
    load: () => ({
      running: [...threads].filter((thread) => thread.job !== null).length,
      waiting: waiting.length,
    }),
  };
}
