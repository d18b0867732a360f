import { once } from 'node:events';
import { createServer } from 'node:http';
import type { AddressInfo } from 'node:net';
import { Worker } from 'node:worker_threads';
import express, { Router } from 'express';
import { afterAll, expect, test } from 'vitest';
import { z } from 'zod';
import { defineContract } from '#shared/contract.ts';
import { CodedError } from '#shared/error-codes.ts';
import { closeComputing, compute } from '#server/computing/compute.ts';
import { packFailure, unpackFailure } from '#server/computing/computing-message.ts';
import { createWorkerPool, type WorkerPool } from '#server/computing/worker-pool.ts';
import { route } from '#server/route.ts';
import { weighEvidence } from '#server/weigh-up/weigh-evidence.ts';
import { askAboutAll, growRegion } from '#tests/support/region-evidence.ts';

afterAll(closeComputing);

test('others are answered while a long weighing runs', async () => {
  const evidence = growRegion({ sites: 16, seasons: 5, varieties: 16 });
  const server = createServer((_request, response) => response.end('well'));
  server.listen(0, '127.0.0.1');
  await once(server, 'listening');
  // listen() on a host and port gives an AddressInfo, never a pipe's name.
  const { port } = server.address() as AddressInfo;
  const order: string[] = [];
  try {
    await Promise.all([
      compute('weighEvidence', [evidence, askAboutAll(evidence, 'yield')]).then(() => order.push('weighed')),
      fetch(`http://127.0.0.1:${port}/`).then(() => order.push('health')),
    ]);
  } finally {
    server.close();
  }
  expect(order).toEqual(['health', 'weighed']);
});

test('a thread gives what the same function gives here', async () => {
  const evidence = growRegion({ sites: 3, seasons: 2, varieties: 5 });
  const question = askAboutAll(evidence, 'yield');
  const { computedAt: _there, ...there } = await compute('weighEvidence', [evidence, question]);
  const { computedAt: _here, ...here } = weighEvidence(evidence, question);
  expect(there).toEqual(here);
});

test('a refusal keeps its code, values and fields on its way between threads', () => {
  const refusal = new CodedError('invalid-input', {
    values: { limit: 3 },
    issues: [{ path: 'a.b', reason: 'too_big' }],
  });
  const packed = structuredClone(packFailure(refusal));
  if (packed.outcome === 'done') throw new Error('it failed');
  expect(unpackFailure(packed)).toMatchObject({
    name: 'CodedError',
    code: 'invalid-input',
    values: { limit: 3 },
    issues: [{ path: 'a.b', reason: 'too_big' }],
  });
});

test('an unexpected failure comes back with its words', async () => {
  const evidence = growRegion({ sites: 2, seasons: 1, varieties: 3 });
  const { currentVarietyId: id, ...question } = askAboutAll(evidence, 'yield');
  const broken = { ...question, currentVarietyId: id, candidateIds: [id] };
  await expect(compute('weighEvidence', [evidence, broken])).rejects.toThrow(
    'the current variety is among the candidates',
  );
});

/** Counts in shared memory for as long as it lives when told to, and answers everything else at once. */
const countingCode = `
  const { parentPort, workerData } = require('node:worker_threads');
  parentPort.on('message', ({ task }) => {
    if (task === 'count') for (;;) Atomics.add(workerData, 0, 1);
    parentPort.postMessage({ outcome: 'done', value: task });
  });
`;

function openCountingPool(mostWaiting: number) {
  const counter = new Int32Array(new SharedArrayBuffer(4));
  const started: Worker[] = [];
  const pool = createWorkerPool({
    threads: 1,
    mostWaiting,
    startWorker: () => {
      const worker = new Worker(countingCode, { eval: true, workerData: counter });
      started.push(worker);
      return worker;
    },
  });
  return { counter, started, pool };
}

const isCounting = async (counter: Int32Array): Promise<void> => {
  while (Atomics.load(counter, 0) === 0) await new Promise((resolve) => setImmediate(resolve));
};

async function usePool<T>(pool: WorkerPool, use: () => Promise<T>): Promise<T> {
  try {
    return await use();
  } finally {
    await pool.close();
  }
}

test('an abandoned computation stops, and its thread is replaced by one that answers the next', async () => {
  const { counter, started, pool } = openCountingPool(4);
  await usePool(pool, async () => {
    const leaving = new AbortController();
    const counting = pool.run({ task: 'count', input: [] }, leaving.signal);
    const next = pool.run({ task: 'next', input: [] });
    await isCounting(counter);
    const [first] = started;
    if (first === undefined) throw new Error('a thread was started');
    const gone = once(first, 'exit');
    leaving.abort();
    await expect(counting).rejects.toMatchObject({ name: 'AbortError' });
    expect(await next).toBe('next');
    await gone;
    const reached = Atomics.load(counter, 0);
    for (let turn = 0; turn < 5; turn += 1) await pool.run({ task: 'turn', input: [] });
    expect(Atomics.load(counter, 0)).toBe(reached);
    expect(started).toHaveLength(2);
    expect(pool.load()).toEqual({ running: 0, waiting: 0 });
  });
});

test('what waits too long a queue is refused, and what is abandoned in it leaves it', async () => {
  const { pool } = openCountingPool(1);
  await usePool(pool, async () => {
    const [running, waiting] = [new AbortController(), new AbortController()];
    const first = pool.run({ task: 'count', input: [] }, running.signal);
    const second = pool.run({ task: 'second', input: [] }, waiting.signal);
    await expect(pool.run({ task: 'third', input: [] })).rejects.toMatchObject({ code: 'busy' });
    waiting.abort();
    await expect(second).rejects.toMatchObject({ name: 'AbortError' });
    expect(pool.load()).toEqual({ running: 1, waiting: 0 });
    running.abort();
    await expect(first).rejects.toMatchObject({ name: 'AbortError' });
  });
});

test('a client that goes away aborts what its request asked for; one that is answered does not', async () => {
  const seen: AbortSignal[] = [];
  const router = Router();
  const reply = z.object({ isDone: z.boolean() });
  const long = defineContract({ method: 'GET', path: '/api/long', access: 'anyone', reply });
  const short = defineContract({ method: 'GET', path: '/api/short', access: 'anyone', reply });
  const leaving = new AbortController();
  route(router, long, async ({ signal }) => {
    seen.push(signal);
    leaving.abort();
    await once(signal, 'abort');
    return { isDone: false };
  });
  route(router, short, ({ signal }) => {
    seen.push(signal);
    return Promise.resolve({ isDone: true });
  });
  const server = express().use(router).listen(0, '127.0.0.1');
  await once(server, 'listening');
  // listen() on a host and port gives an AddressInfo, never a pipe's name.
  const { port } = server.address() as AddressInfo;
  try {
    const asked = fetch(`http://127.0.0.1:${port}/api/long`, { signal: leaving.signal });
    await expect(asked).rejects.toMatchObject({ name: 'AbortError' });
    await (await fetch(`http://127.0.0.1:${port}/api/short`)).json();
    const [abandoned] = seen;
    if (abandoned && !abandoned.aborted) await once(abandoned, 'abort');
    expect(seen.map((signal) => signal.aborted)).toEqual([true, false]);
  } finally {
    server.close();
  }
});

test('what was abandoned before it was asked for is not begun', async () => {
  const { pool, started } = openCountingPool(1);
  await usePool(pool, async () => {
    await expect(pool.run({ task: 'count', input: [] }, AbortSignal.abort())).rejects.toMatchObject({
      name: 'AbortError',
    });
    expect(started).toHaveLength(0);
  });
});

test('a thread that dies rejects what it was at, and the next is answered', async () => {
  const { counter, started, pool } = openCountingPool(1);
  await usePool(pool, async () => {
    const counting = pool.run({ task: 'count', input: [] });
    await isCounting(counter);
    void started[0]?.terminate();
    await expect(counting).rejects.toThrow('ended');
    expect(await pool.run({ task: 'after', input: [] })).toBe('after');
  });
});
