import { parentPort } from 'node:worker_threads';
import { packFailure, type ComputingOrder, type ComputingReply } from './computing-message.ts';
import { computingTasks, type TaskName } from './computing-tasks.ts';

/** A worker thread's entry: one order at a time, each answered by one message. */
parentPort?.on('message', (order: ComputingOrder) => {
  void carryOut(order).then((reply) => parentPort?.postMessage(reply));
});

async function carryOut({ task, input }: ComputingOrder): Promise<ComputingReply> {
  try {
    // The pool names only tasks of the table, and gives each what it takes.
    const compute = computingTasks[task as TaskName] as (...input: readonly unknown[]) => unknown;
    return { outcome: 'done', value: await compute(...input) };
  } catch (error) {
    return packFailure(error);
  }
}
