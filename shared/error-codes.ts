import { z } from 'zod';

/** Every way a request can fail, as the client sees it. The sentence for each is `errors:<code>` in locales/. */
export const errorCodes = [
  'invalid-input',
  'not-signed-in',
  'not-allowed',
  'not-found',
  'wrong-credentials',
  'account-suspended',
  'too-many-attempts',
  'cross-site-request',
  'body-too-large',
  'database-away',
  'busy',
  'internal',
  'revision-conflict',
  'state-conflict',
  'email-taken',
  'last-administrator',
  'own-account',
  'import-refused',
  'import-too-large',
  'trial-exists',
  'trial-not-analysable',
  'trait-without-data',
  'variety-not-of-crop',
  'region-not-yours',
  'link-unknown',
  'link-expired',
  'link-revoked',
  'mail-not-set-up',
] as const;

export type ErrorCode = (typeof errorCodes)[number];

/** A field that was refused: a dotted path into the input and the code of the reason (`errors:fields.<reason>`). */
export const fieldIssue = z.object({ path: z.string(), reason: z.string(), message: z.string().optional() });
export type FieldIssue = z.infer<typeof fieldIssue>;

export const errorReply = z.object({
  error: z.object({
    code: z.enum(errorCodes),
    /** Values for the sentence's placeholders, e.g. { limit: 100000 }. */
    values: z.record(z.string(), z.union([z.string(), z.number()])).optional(),
    issues: z.array(fieldIssue).optional(),
  }),
});
export type ErrorReply = z.infer<typeof errorReply>;

/** An expected failure; the server's one error handler turns its code into a status. */
export class CodedError extends Error {
  readonly code: ErrorCode;
  readonly values: Record<string, string | number> | undefined;
  readonly issues: FieldIssue[] | undefined;

  constructor(
    code: ErrorCode,
    extra: { values?: Record<string, string | number>; issues?: FieldIssue[]; cause?: unknown } = {},
  ) {
    super(code, { cause: extra.cause });
    this.name = 'CodedError';
    this.code = code;
    this.values = extra.values;
    this.issues = extra.issues;
  }
}
