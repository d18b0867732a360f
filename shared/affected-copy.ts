import { z } from 'zod';
import { bilingualName } from './catalogue.ts';
import { defineContract } from './contract.ts';
import { growerCopyLine, laterChange } from './grower-copy.ts';

/** An open copy in which trials have changed since it was handed over, and which no fresh one has followed yet. */
export const affectedCopy = z.object({
  copyId: z.uuid(),
  weighUpId: z.uuid(),
  growerName: z.string(),
  farmName: z.string(),
  cropName: bilingualName,
  madeAt: z.iso.datetime(),
  laterChanges: z.array(laterChange).min(1),
  /** Where the link was sent; null where it went by other ways. */
  sentTo: z.string().nullable(),
});
export type AffectedCopy = z.infer<typeof affectedCopy>;

/** The caller's own, the one made longest ago first. */
export const listAffectedCopies = defineContract({
  method: 'GET',
  path: '/api/affected-copies',
  access: ['advisor', 'agronomist'],
  reply: z.object({ copies: z.array(affectedCopy), isMailSetUp: z.boolean() }),
});

/**
 * Makes a fresh copy of the same weigh-up from the trials as they are now, in the same language and for as long; the
 * old one stays open with its numbers. `state-conflict` when a fresh one has been made already.
 */
export const renewGrowerCopy = defineContract({
  method: 'POST',
  path: '/api/grower-copies/:copyId/fresh',
  access: ['advisor', 'agronomist'],
  params: z.object({ copyId: z.uuid() }),
  /** Whether the link goes to the address to which the old copy went. */
  body: z.object({ isSent: z.boolean() }),
  reply: z.object({ copy: growerCopyLine, link: z.url() }),
});
