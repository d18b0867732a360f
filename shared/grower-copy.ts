import { z } from 'zod';
import { language } from './account.ts';
import { trait } from './catalogue.ts';
import { defineContract } from './contract.ts';
import { weighUp, weighUpResult } from './weigh-up.ts';

/** Everything the copy shows, frozen when it was made; the page renders from this alone. */
export const growerCopySnapshot = z.object({
  format: z.literal(1),
  weighUp,
  result: weighUpResult,
  traits: z.array(trait),
  advisorName: z.string(),
  advisorEmail: z.string(),
  madeAt: z.iso.datetime(),
  engineVersion: z.string(),
});
export type GrowerCopySnapshot = z.infer<typeof growerCopySnapshot>;

/** What became of a trial after the copy was made; shown beside the frozen numbers. */
export const laterChange = z.object({
  trialId: z.uuid(),
  siteName: z.string(),
  season: z.number().int(),
  change: z.enum(['corrected', 'withdrawn']),
});
export type LaterChange = z.infer<typeof laterChange>;

/** The copy as the advisor sees it: the link itself is shown once, at its making, and never stored. */
export const growerCopyLine = z.object({
  id: z.uuid(),
  language,
  createdAt: z.iso.datetime(),
  expiresAt: z.iso.datetime(),
  revokedAt: z.iso.datetime().nullable(),
  openings: z.number().int(),
  lastOpenedAt: z.iso.datetime().nullable(),
  laterChanges: z.array(laterChange),
});
export type GrowerCopyLine = z.infer<typeof growerCopyLine>;

const weighUpParams = z.object({ weighUpId: z.uuid() });

export const listGrowerCopies = defineContract({
  method: 'GET',
  path: '/api/weigh-ups/:weighUpId/grower-copies',
  access: ['advisor', 'agronomist'],
  params: weighUpParams,
  reply: z.object({ copies: z.array(growerCopyLine) }),
});

export const makeGrowerCopy = defineContract({
  method: 'POST',
  path: '/api/weigh-ups/:weighUpId/grower-copies',
  access: ['advisor', 'agronomist'],
  params: weighUpParams,
  body: z.object({ language, validDays: z.number().int().min(1).max(1095).default(365) }),
  /** `path` holds the secret: `/copy/<token>`. */
  reply: z.object({ copy: growerCopyLine, path: z.string() }),
});

export const revokeGrowerCopy = defineContract({
  method: 'DELETE',
  path: '/api/grower-copies/:copyId',
  access: ['advisor', 'agronomist'],
  params: z.object({ copyId: z.uuid() }),
  reply: z.object({ copy: growerCopyLine }),
});

/** Opens a copy by the secret of its link: no account needed. Unknown is 404, expired or revoked 410. */
export const openGrowerCopy = defineContract({
  method: 'GET',
  path: '/api/copies/:token',
  access: 'anyone',
  /** Whatever stands in the link: one that was cut short is as unknown as an invented one. */
  params: z.object({ token: z.string().min(1).max(500) }),
  reply: z.object({
    snapshot: growerCopySnapshot,
    language,
    expiresAt: z.iso.datetime(),
    laterChanges: z.array(laterChange),
  }),
});
