import type { Request } from 'express';

/** A choice that the client left in a cookie: letters, digits and hyphens; null where it left none. */
export function readCookie(request: Request, name: string): string | null {
  const pairs = (request.headers.cookie ?? '').split('; ').map((pair) => pair.split('='));
  const value = pairs.find(([key]) => key === name)?.[1];
  return value !== undefined && /^[\w-]+$/.test(value) ? value : null;
}
