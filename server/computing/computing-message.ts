import { CodedError, errorReply } from '#shared/error-codes.ts';

/** One computation on its way to a worker. */
export type ComputingOrder = { task: string; input: readonly unknown[] };

/** What comes back. A failure is taken apart, since a thread's errors lose their class on the way. */
export type ComputingReply =
  | { outcome: 'done'; value: unknown }
  | { outcome: 'refused'; reply: unknown }
  | { outcome: 'failed'; message: string; stack: string | undefined };

export function packFailure(error: unknown): ComputingReply {
  if (error instanceof CodedError) {
    const { code, values, issues } = error;
    return { outcome: 'refused', reply: { error: { code, values, issues } } };
  }
  const { message, stack } = error instanceof Error ? error : new Error(String(error));
  return { outcome: 'failed', message, stack };
}

/** The error that a reply tells of, for the thread that asked. */
export function unpackFailure(reply: Exclude<ComputingReply, { outcome: 'done' }>): Error {
  if (reply.outcome === 'refused') {
    const { code, values, issues } = errorReply.parse(reply.reply).error;
    return new CodedError(code, { ...(values && { values }), ...(issues && { issues }) });
  }
  const error = new Error(reply.message);
  if (reply.stack !== undefined) error.stack = reply.stack;
  return error;
}
