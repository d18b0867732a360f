import type { Request, RequestHandler, Response, Router } from 'express';
import multer from 'multer';
import type { z } from 'zod';
import type { Me } from '#shared/account.ts';
import type { Access, Contract } from '#shared/contract.ts';
import { CodedError } from '#shared/error-codes.ts';
import { importByteLimit } from '#shared/trial-desk.ts';

const readUpload = multer({
  storage: multer.memoryStorage(),
  limits: { fileSize: importByteLimit, files: 1, fields: 20 },
});

type Call = { request: Request; response: Response; signal: AbortSignal };
type Answer = (call: Call) => Promise<unknown>;

/** How each contract of a router is answered, for who asks from inside. */
const answersByRouter = new WeakMap<Router, Map<Contract, Answer>>();

/**
 * The reply that a registered contract gives to the person of another request, guarded as it is for its own.
 * @param call its request has the contract's parameters in its path; the contract asks for no query and no body
 * @throws CodedError not-signed-in, not-allowed and what the handler throws
 */
export async function answerContract(router: Router, contract: Contract, call: Call): Promise<unknown> {
  const answer = answersByRouter.get(router)?.get(contract);
  if (answer === undefined) throw new Error(`${contract.path} is not a contract of this router`);
  checkAccess(contract.access, call.request.user ?? null);
  return answer(call);
}

/**
 * Registers one contract: guards it, parses what comes in once, calls the handler and parses the reply,
 * which drops every field the contract does not declare. The handler throws; the error handler answers.
 * @throws CodedError not-signed-in, not-allowed, invalid-input
 */
export function route<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, R extends z.ZodType>(
  router: Router,
  contract: Contract<P, Q, B, R>,
  handler: (input: {
    params: z.output<P>;
    query: z.output<Q>;
    body: z.output<B>;
    me: Me | null;
    file: { name: string; bytes: Buffer } | null;
    request: Request;
    response: Response;
    /** Aborted when the client goes away before it is answered. */
    signal: AbortSignal;
  }) => Promise<z.input<R>>,
): void {
  const answer: Answer = async ({ request, response, signal }) => {
    const reply = await handler({
      params: parsePart(contract.params, request.params, 'params'),
      query: parsePart(contract.query, request.query, 'query'),
      body: parsePart(contract.body, request.body, 'body'),
      me: request.user ?? null,
      file:
        request.file === undefined ? null : { name: request.file.originalname, bytes: request.file.buffer },
      request,
      response,
      signal,
    });
    return contract.reply.parse(reply);
  };
  const serve: RequestHandler = async (request, response) => {
    response.json(await answer({ request, response, signal: leavingSignal(response) }));
  };
  const guard: RequestHandler = (request, _response, next) => {
    checkAccess(contract.access, request.user ?? null);
    next();
  };
  const upload: RequestHandler[] = contract.upload === undefined ? [] : [readUpload.single(contract.upload)];
  router[methodNames[contract.method]](contract.path, guard, ...upload, serve);
  const answers = answersByRouter.get(router) ?? new Map<Contract, Answer>();
  answersByRouter.set(router, answers.set(contract, answer));
}

/** Aborted when the client goes away before it is answered. */
export function leavingSignal(response: Response): AbortSignal {
  const leaving = new AbortController();
  response.once('close', () => {
    if (!response.writableFinished) leaving.abort();
  });
  return leaving.signal;
}

const methodNames = { GET: 'get', POST: 'post', PUT: 'put', PATCH: 'patch', DELETE: 'delete' } as const;

/** @throws CodedError not-signed-in or not-allowed */
function checkAccess(access: Access, me: Me | null): void {
  if (access === 'anyone') return;
  if (me === null) throw new CodedError('not-signed-in');
  if (access !== 'signed-in' && !access.includes(me.role)) throw new CodedError('not-allowed');
}

function parsePart<T extends z.ZodType>(shape: T | undefined, value: unknown, part: string): z.output<T> {
  // A contract without this part hands its handler undefined; z.output of the missing shape is undefined as well.
  if (shape === undefined) return undefined as z.output<T>;
  const parsed = shape.safeParse(value ?? {});
  if (parsed.success) return parsed.data;
  // A path that cannot be an id names nothing: it answers like one that does not exist.
  if (part === 'params') throw new CodedError('not-found');
  throw new CodedError('invalid-input', {
    issues: parsed.error.issues.map((issue) => ({
      path: issue.path.join('.'),
      reason: issue.code === 'custom' ? issue.message : issue.code,
      message: issue.message,
    })),
  });
}

/** The signed-in caller of a route whose contract asks for one. */
export function requireMe(me: Me | null): Me {
  if (me === null) throw new CodedError('not-signed-in');
  return me;
}
