import type { Request } from 'express';
import type { ServerSettings } from '#server/env.ts';

/** Where growers reach the product: as it is set, else as whoever asks has reached it. */
export function publicOriginOf(request: Request, { publicOrigin }: ServerSettings): string {
  return publicOrigin ?? `${request.protocol}://${request.get('host') ?? 'localhost'}`;
}
