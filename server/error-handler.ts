import type { ErrorRequestHandler, Request, Response } from 'express';
import { CodedError, type ErrorCode, type ErrorReply } from '#shared/error-codes.ts';
import { isDatabaseAway, isPoolTaken, sqlStateOf } from './db.ts';

const statusOf = {
  'invalid-input': 400,
  'not-signed-in': 401,
  'not-allowed': 403,
  'not-found': 404,
  'wrong-credentials': 401,
  'account-suspended': 403,
  'too-many-attempts': 429,
  'cross-site-request': 403,
  'body-too-large': 413,
  'database-away': 503,
  busy: 503,
  internal: 500,
  'revision-conflict': 409,
  'state-conflict': 409,
  'email-taken': 409,
  'last-administrator': 409,
  'own-account': 409,
  'import-refused': 422,
  'import-too-large': 413,
  'trial-exists': 409,
  'trial-not-analysable': 422,
  'trait-without-data': 404,
  'variety-not-of-crop': 422,
  'region-not-yours': 403,
  'link-unknown': 404,
  'link-expired': 410,
  'link-revoked': 410,
  'mail-not-set-up': 409,
} satisfies Record<ErrorCode, number>;

/** Text or figures that PostgreSQL cannot hold: a NUL in text, in JSON, a number out of range. */
const unstorableStates: ReadonlySet<string | null> = new Set(['22021', '22P05', '22003']);

/** Seconds after which a client may try again when the database is away, or its connections or the computing threads are taken. */
const retrySeconds = 5;

/**
 * The one place where a failure becomes a status and a code; routes never catch. Sets the status and what belongs to it,
 * and notes what only the log may know. How the failure is told is left to who calls.
 * @returns null where it can no longer be told: the answer has begun
 */
export function settleFailure(error: unknown, request: Request, response: Response): CodedError | null {
  if (response.headersSent) return null;
  const coded = codeFailure(error);
  if (coded.code === 'internal' || coded.code === 'database-away')
    request.log?.error({ err: error }, coded.code);
  if (statusOf[coded.code] === 503) response.set('Retry-After', String(retrySeconds));
  response.status(statusOf[coded.code]);
  return coded;
}

/** Tells a failure as the API does. */
export const handleError: ErrorRequestHandler = (error: unknown, request, response, next) => {
  // Whoever asked is gone: there is nobody to answer, and an ended computation is no failure.
  if (response.closed) return;
  const coded = settleFailure(error, request, response);
  if (coded === null) {
    next(error);
    return;
  }
  const reply: ErrorReply = {
    error: {
      code: coded.code,
      ...(coded.values === undefined ? {} : { values: coded.values }),
      ...(coded.issues === undefined ? {} : { issues: coded.issues }),
    },
  };
  response.json(reply);
};

/** Brings what the body parser, the upload parser, the pool and our own code throw to one type. */
function codeFailure(error: unknown): CodedError {
  if (error instanceof CodedError) return error;
  if (isPoolTaken(error)) return new CodedError('busy', { cause: error });
  if (isDatabaseAway(error)) return new CodedError('database-away', { cause: error });
  if (unstorableStates.has(sqlStateOf(error))) return new CodedError('invalid-input', { cause: error });
  const type = error instanceof Error && 'type' in error ? error.type : null;
  const code = error instanceof Error && 'code' in error ? error.code : null;
  if (type === 'entity.too.large') return new CodedError('body-too-large', { cause: error });
  if (code === 'LIMIT_FILE_SIZE') return new CodedError('import-too-large', { cause: error });
  const isClientFault =
    error instanceof Error && 'status' in error && typeof error.status === 'number' && error.status < 500;
  if (isClientFault || (typeof code === 'string' && code.startsWith('LIMIT_'))) {
    return new CodedError('invalid-input', { cause: error });
  }
  return new CodedError('internal', { cause: error });
}
