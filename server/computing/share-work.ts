/** Work that several callers wait for at once. */
interface SharedWork<T> {
  readonly result: Promise<T>;
  readonly end: AbortController;
  waiting: number;
}

/** Lets callers who want the same at the same time wait for one piece of work instead of each for its own. */
export interface WorkSharing<T> {
  /**
   * Joins the work that runs under a key, or starts it. A caller who goes away leaves the others waiting; the work is
   * abandoned with the last of them, and whoever comes after that starts anew.
   * @param start is told by its signal when nobody waits any more
   * @param signal of the caller; its reason is what an abandoned call rejects with
   */
  share(key: string, start: (signal: AbortSignal) => Promise<T>, signal: AbortSignal | undefined): Promise<T>;
}

export function createWorkSharing<T>(): WorkSharing<T> {
  const running = new Map<string, SharedWork<T>>();

  function begin(key: string, start: (signal: AbortSignal) => Promise<T>): SharedWork<T> {
    const end = new AbortController();
    const work: SharedWork<T> = { result: start(end.signal), end, waiting: 0 };
    running.set(key, work);
    const forget = () => {
      if (running.get(key) === work) running.delete(key);
    };
    work.result.then(forget, forget);
    return work;
  }

  return {
    share(key, start, signal) {
      if (signal?.aborted === true) return Promise.reject(asError(signal.reason));
      const work = running.get(key) ?? begin(key, start);
      work.waiting += 1;
      return new Promise<T>((resolve, reject) => {
        const leave = () => {
          work.waiting -= 1;
          if (work.waiting === 0) {
            if (running.get(key) === work) running.delete(key);
            work.end.abort();
          }
          reject(asError(signal?.reason));
        };
        signal?.addEventListener('abort', leave, { once: true });
        work.result.then(resolve, reject).finally(() => signal?.removeEventListener('abort', leave));
      });
    },
  };
}

/** What a signal gives as its reason may be anything. */
function asError(reason: unknown): Error {
  return reason instanceof Error ? reason : new DOMException('the work was abandoned', 'AbortError');
}
