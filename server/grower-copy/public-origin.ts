import type { Request } from 'express';
import type { ServerSettings } from '#server/env.ts';

/** Where growers reach the product: as it is set, else as whoever asks has reached it. */
export function publicOriginOf(
  request: Pick<Request, 'protocol' | 'get'>,
  { publicOrigin }: ServerSettings,
): string {
  return publicOrigin ?? `${request.protocol}://${request.get('host') ?? 'localhost'}`;
}

/** The whole address of the copy that is asked for, its secret last: what its paper leads back to. */
export const copyLinkOf = (request: Request<{ token: string }>, settings: ServerSettings): string =>
  `${publicOriginOf(request, settings)}/copy/${request.params.token}`;
