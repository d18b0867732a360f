/** Names a process so that a later one with the same number is not taken for it. */
export function markProcess(pid?: number): string;
/** Whether the process that wrote this mark still runs. */
export function isProcessAlive(mark: string): boolean;
/** Does some work while nobody else does work under the same lock file. */
export function withProcessLock<T>(
  path: string,
  work: (addHolder: (pid: number) => void) => Promise<T>,
): Promise<T>;
