import type { z } from 'zod';
import type { Contract } from '#shared/contract.ts';
import { errorReply, type ErrorCode, type FieldIssue } from '#shared/error-codes.ts';

/** What went wrong without an answer of the server: no network, or an answer that is not the contract's. */
export type ClientErrorCode = 'offline' | 'unreadable-reply';

/** A request that failed, with the code whose sentence is `errors:<code>`. `status` is 0 where no answer came. */
export class ApiError extends Error {
  readonly code: ErrorCode | ClientErrorCode;
  readonly status: number;
  readonly values: Record<string, string | number>;
  readonly issues: readonly FieldIssue[];

  constructor(
    code: ErrorCode | ClientErrorCode,
    status: number,
    extra: { values?: Record<string, string | number>; issues?: FieldIssue[]; cause?: unknown } = {},
  ) {
    super(code, { cause: extra.cause });
    this.name = 'ApiError';
    this.code = code;
    this.status = status;
    this.values = extra.values ?? {};
    this.issues = extra.issues ?? [];
  }

  /** True where the same request may well succeed in a moment. */
  get isPassing(): boolean {
    return this.code === 'offline' || this.status === 502 || this.status === 503 || this.status === 504;
  }
}

/** The parts of a request that its contract asks for, and none that it does not. */
export type CallInput<C extends Contract> = Part<C, 'params'> &
  Part<C, 'query'> &
  Part<C, 'body'> & { file?: File };

type Part<C extends Contract, Name extends 'params' | 'query' | 'body'> =
  NonNullable<C[Name]> extends z.ZodUndefined
    ? { [N in Name]?: undefined }
    : { [N in Name]: z.input<NonNullable<C[Name]>> };

export type ReplyOf<C extends Contract> = z.output<C['reply']>;

/** How a request is sent: `keepalive` lets it arrive though its page is closed meanwhile, up to 64 kB. */
export type CallOptions = Pick<RequestInit, 'keepalive'>;

/** Asks the person to sign in again; true once they have. */
export type SignInAgain = () => Promise<boolean>;

let signInAgain: SignInAgain = () => Promise.resolve(false);

/** Says who asks the person to sign in again when a session has run out: the dialog over the page. */
export function onSessionExpired(ask: SignInAgain): void {
  signInAgain = ask;
}

/**
 * Calls a route of the API by its contract.
 * A session that has run out opens the sign-in dialog and the same request is sent again after it, so nothing typed is lost.
 * @throws ApiError with the server's code, `offline` when no answer came, `unreadable-reply` when it breaks the contract
 */
export async function callApi<C extends Contract>(
  contract: C,
  input: CallInput<C>,
  signal?: AbortSignal,
  options: CallOptions = {},
): Promise<ReplyOf<C>> {
  const response = await sendOrSignInAgain(contract, input, signal, options);
  const reply: unknown = await response.json().catch(() => undefined);
  const parsed = contract.reply.safeParse(reply);
  if (!parsed.success) throw new ApiError('unreadable-reply', response.status, { cause: parsed.error });
  // The contract's own schema has just parsed it.
  return parsed.data as ReplyOf<C>;
}

/**
 * The address of a contract with its parameters and query filled in; also for links to files.
 */
export function addressOf(contract: Contract, input: { params?: unknown; query?: unknown } = {}): string {
  const params = toRecord(input.params);
  const path = contract.path.replace(/:(\w+)/g, (_, name: string) =>
    encodeURIComponent(String(params[name])),
  );
  const query = new URLSearchParams();
  for (const [name, value] of Object.entries(toRecord(input.query))) {
    for (const one of Array.isArray(value) ? value : [value]) {
      if (one !== undefined && one !== null) query.append(name, String(one));
    }
  }
  const search = query.toString();
  return search === '' ? path : `${path}?${search}`;
}

function toRecord(value: unknown): Record<string, unknown> {
  return typeof value === 'object' && value !== null ? { ...value } : {};
}

type SentInput = { params?: unknown; query?: unknown; body?: unknown; file?: File };

async function sendOrSignInAgain(
  contract: Contract,
  input: SentInput,
  signal: AbortSignal | undefined,
  options: CallOptions,
): Promise<Response> {
  try {
    return await send(contract, input, signal, options);
  } catch (error) {
    const isExpired = error instanceof ApiError && error.code === 'not-signed-in';
    if (!isExpired || !(await signInAgain())) throw error;
    return send(contract, input, signal, options);
  }
}

async function send(
  contract: Contract,
  input: SentInput,
  signal: AbortSignal | undefined,
  options: CallOptions,
): Promise<Response> {
  let response: Response;
  try {
    response = await fetch(addressOf(contract, input), {
      method: contract.method,
      credentials: 'same-origin',
      signal: signal ?? null,
      ...options,
      ...encodeBody(contract, input),
    });
  } catch (error) {
    if (signal?.aborted) throw error;
    throw new ApiError('offline', 0, { cause: error });
  }
  if (!response.ok) throw await readError(response);
  return response;
}

function encodeBody(contract: Contract, input: SentInput): RequestInit {
  if (contract.upload !== undefined && input.file) {
    const form = new FormData();
    for (const [name, value] of Object.entries(toRecord(input.body))) {
      if (value === undefined || value === null) continue;
      form.append(name, typeof value === 'string' ? value : JSON.stringify(value));
    }
    form.append(contract.upload, input.file);
    return { body: form };
  }
  if (input.body === undefined) return {};
  return { body: JSON.stringify(input.body), headers: { 'content-type': 'application/json' } };
}

async function readError(response: Response): Promise<ApiError> {
  const parsed = errorReply.safeParse(await response.json().catch(() => undefined));
  if (parsed.success) {
    const { code, values, issues } = parsed.data.error;
    return new ApiError(code, response.status, { ...(values && { values }), ...(issues && { issues }) });
  }
  // A gateway in between answers in its own words when the server is away.
  if (response.status >= 502 && response.status <= 504) return new ApiError('database-away', response.status);
  return new ApiError('unreadable-reply', response.status);
}
