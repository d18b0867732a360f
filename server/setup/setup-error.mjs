/** A failure that a person can do something about: what went wrong, and the next step to take. */
export class SetupError extends Error {
  /**
   * @param {string} message what went wrong, one sentence
   * @param {string} advice what to do now, one or two sentences or a command
   * @param {{ cause?: unknown, output?: string }} [more] the end of a failed program's output helps the reader
   */
  constructor(message, advice, more = {}) {
    super(message, { cause: more.cause });
    this.name = 'SetupError';
    this.advice = advice;
    this.output = more.output ?? '';
  }
}

/** Gives the failures of the machine (disk, permissions) their advice; leaves every other error as it is. */
export function explainError(error) {
  if (error instanceof SetupError && !/No space left|ENOSPC/.test(error.output)) return error;
  const text = `${error?.code ?? ''} ${error?.message ?? error} ${error?.output ?? ''}`;
  if (/ENOSPC|No space left on device/.test(text)) {
    return new SetupError(
      'The disk is full.',
      'Free some space (df -h shows where) and run the command again.',
      {
        cause: error,
      },
    );
  }
  if (/EACCES|EPERM|EROFS/.test(text)) {
    const path = error?.path === undefined ? 'the project folder' : error.path;
    return new SetupError(
      `No permission to write ${path}.`,
      `Make the project folder yours (sudo chown -R "$(id -un)" .) and run the command again.`,
      { cause: error },
    );
  }
  return error;
}

/** Prints a failure with its advice to standard error. */
export function printFailure(error) {
  const explained = explainError(error);
  if (explained instanceof SetupError) {
    if (explained.output !== '') console.error(`\n${lastLines(explained.output, 20)}`);
    console.error(`\n${explained.message}\n→ ${explained.advice}`);
  } else {
    console.error(explained);
  }
}

/** The last lines of a longer output. */
export function lastLines(text, count) {
  return text.trimEnd().split('\n').slice(-count).join('\n');
}
