import type { z } from 'zod';
import type { Role } from './account.ts';

/** Who may call a route: anyone, anyone signed in, or the roles listed. */
export type Access = 'anyone' | 'signed-in' | readonly Role[];

/**
 * One route of the API: the single truth that types the client's call, the server's parse and its reply.
 * `path` holds Express parameters (`/api/trials/:trialId`); `upload` names the multipart file field, if any.
 */
export type Contract<
  Params extends z.ZodType = z.ZodType,
  Query extends z.ZodType = z.ZodType,
  Body extends z.ZodType = z.ZodType,
  Reply extends z.ZodType = z.ZodType,
> = {
  method: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';
  path: `/api/${string}`;
  access: Access;
  params?: Params;
  query?: Query;
  body?: Body;
  upload?: string;
  reply: Reply;
};

/** Declares a contract, keeping the exact types of its parts. */
export function defineContract<
  Params extends z.ZodType = z.ZodUndefined,
  Query extends z.ZodType = z.ZodUndefined,
  Body extends z.ZodType = z.ZodUndefined,
  Reply extends z.ZodType = z.ZodUndefined,
>(contract: Contract<Params, Query, Body, Reply>): Contract<Params, Query, Body, Reply> {
  return contract;
}
