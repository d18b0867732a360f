import type { RequestHandler } from 'express';
import { CodedError } from '#shared/error-codes.ts';

const safeMethods = new Set(['GET', 'HEAD', 'OPTIONS']);

/**
 * Refuses unsafe requests that another site or another port started: SameSite cookies alone let the latter through.
 * Browsers say where a request comes from in Sec-Fetch-Site; older ones in Origin. A client without either is no browser.
 */
export const requireSameOrigin: RequestHandler = (request, _response, next) => {
  if (safeMethods.has(request.method)) {
    next();
    return;
  }
  const fetchSite = request.get('sec-fetch-site');
  if (fetchSite !== undefined) {
    if (fetchSite !== 'same-origin' && fetchSite !== 'none') throw new CodedError('cross-site-request');
    next();
    return;
  }
  const origin = request.get('origin');
  if (origin !== undefined && hostOf(origin) !== request.get('host'))
    throw new CodedError('cross-site-request');
  next();
};

function hostOf(origin: string): string | null {
  return URL.canParse(origin) ? new URL(origin).host : null;
}
