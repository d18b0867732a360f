import { expect, test } from 'vitest';
import { createWorkSharing } from '#server/computing/share-work.ts';

/** Work that ends when it is told to, and counts how often it was begun and abandoned. */
function openWork() {
  const seen = { begun: 0, abandoned: 0 };
  const ends: ((value: string) => void)[] = [];
  const fails: ((reason: Error) => void)[] = [];
  const start = (signal: AbortSignal): Promise<string> => {
    seen.begun += 1;
    signal.addEventListener('abort', () => (seen.abandoned += 1));
    return new Promise((resolve, reject) => {
      ends.push(resolve);
      fails.push(reject);
    });
  };
  return {
    seen,
    start,
    end: (k: number, value: string) => ends[k]?.(value),
    fail: (e: Error) => fails[0]?.(e),
  };
}

test('what two ask at once is worked out once, and given to both', async () => {
  const sharing = createWorkSharing<string>();
  const { seen, start, end } = openWork();
  const both = [
    sharing.share('a', start, undefined),
    sharing.share('a', start, new AbortController().signal),
  ];
  end(0, 'done');
  expect(await Promise.all(both)).toEqual(['done', 'done']);
  expect(seen).toEqual({ begun: 1, abandoned: 0 });
});

test('other questions, and the same one asked again later, are worked out for themselves', async () => {
  const sharing = createWorkSharing<string>();
  const { seen, start, end } = openWork();
  const [first, other] = [sharing.share('a', start, undefined), sharing.share('b', start, undefined)];
  end(0, 'of a');
  end(1, 'of b');
  expect([await first, await other]).toEqual(['of a', 'of b']);
  const later = sharing.share('a', start, undefined);
  end(2, 'of a again');
  expect(await later).toBe('of a again');
  expect(seen.begun).toBe(3);
});

test('the first to ask may leave without taking the answer from the second', async () => {
  const sharing = createWorkSharing<string>();
  const { seen, start, end } = openWork();
  const leaving = new AbortController();
  const first = sharing.share('a', start, leaving.signal);
  const second = sharing.share('a', start, new AbortController().signal);
  leaving.abort();
  await expect(first).rejects.toMatchObject({ name: 'AbortError' });
  expect(seen.abandoned).toBe(0);
  end(0, 'done');
  expect(await second).toBe('done');
});

test('work that nobody waits for is abandoned, and who comes then does not join it', async () => {
  const sharing = createWorkSharing<string>();
  const { seen, start, end } = openWork();
  const leaving = [new AbortController(), new AbortController()];
  const left = leaving.map(({ signal }) => sharing.share('a', start, signal));
  for (const one of leaving) one.abort();
  for (const one of left) await expect(one).rejects.toMatchObject({ name: 'AbortError' });
  expect(seen).toEqual({ begun: 1, abandoned: 1 });
  const next = sharing.share('a', start, undefined);
  end(1, 'anew');
  expect(await next).toBe('anew');
});

test('a failure reaches all who wait, and is not kept', async () => {
  const sharing = createWorkSharing<string>();
  const { start, end, fail } = openWork();
  const both = [sharing.share('a', start, undefined), sharing.share('a', start, undefined)];
  fail(new Error('out of order'));
  for (const one of both) await expect(one).rejects.toThrow('out of order');
  const next = sharing.share('a', start, undefined);
  end(1, 'mended');
  expect(await next).toBe('mended');
});

test('who has left before asking begins nothing', async () => {
  const sharing = createWorkSharing<string>();
  const { seen, start } = openWork();
  await expect(sharing.share('a', start, AbortSignal.abort())).rejects.toMatchObject({ name: 'AbortError' });
  expect(seen.begun).toBe(0);
});
