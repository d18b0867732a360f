import { z } from 'zod';
import { language } from './account.ts';
import { trait } from './catalogue.ts';
import { defineContract } from './contract.ts';
import type { Language } from './language.ts';
import { weighUp, weighUpResult } from './weigh-up.ts';

const frozen = z.object({
  weighUp,
  result: weighUpResult,
  traits: z.array(trait),
  advisorName: z.string(),
  advisorEmail: z.string(),
  /** Copies made before advisors could give one have none. */
  advisorPhone: z.string().nullable().default(null),
  madeAt: z.iso.datetime(),
  /** Where its advisor sat (IANA): its days are those of that place. Copies made before it was asked for have none. */
  timeZone: z.string().optional(),
  engineVersion: z.string(),
});

/**
 * Everything the copy shows, frozen when it was made; the page renders from this and the sentences that it names. Copies
 * of format 1 name none: they speak as the product does today, and cannot be read in bushels.
 */
export const growerCopySnapshot = z.discriminatedUnion('format', [
  frozen.extend({ format: z.literal(1) }),
  frozen.extend({
    format: z.literal(2),
    /** SHA-256 in hex of the sentences that it was made with. */
    sentencesHash: z.string().regex(/^[0-9a-f]{64}$/),
    /** The crop's bushel of account, pounds. */
    bushelWeightLb: z.number().positive(),
  }),
]);
export type GrowerCopySnapshot = z.infer<typeof growerCopySnapshot>;

/** What became of a trial after the copy was made; shown beside the frozen numbers. */
export const laterChange = z.object({
  trialId: z.uuid(),
  siteName: z.string(),
  season: z.number().int(),
  change: z.enum(['corrected', 'withdrawn']),
});
export type LaterChange = z.infer<typeof laterChange>;

/** A copy as whoever has its link reads it. */
export type OpenedCopy = {
  snapshot: GrowerCopySnapshot;
  /** Language that it was made in. */
  language: Language;
  /** ISO 8601, UTC. */
  expiresAt: string;
  laterChanges: readonly LaterChange[];
};

/** Why a mail has not arrived (`weigh-up:copies.mail.failure.<code>`). */
export const mailFailure = z.enum([
  'server-away',
  'sign-in-refused',
  'put-off',
  'recipient-refused',
  'mail-refused',
  'link-closed',
]);
export type MailFailure = z.infer<typeof mailFailure>;

/** What became of the mail that brings a copy. */
export const copyMail = z.object({
  recipient: z.string(),
  state: z.enum(['waiting', 'sending', 'sent', 'failed']),
  attempts: z.number().int(),
  sentAt: z.iso.datetime().nullable(),
  /** When it is tried next; null where nothing waits. */
  nextAttemptAt: z.iso.datetime().nullable(),
  /** Of the last try. */
  failure: mailFailure.nullable(),
  /** The mail server's own words about it. */
  serverWords: z.string().nullable(),
});
export type CopyMail = z.infer<typeof copyMail>;

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
  /** The newest mail that brings it; null where none was asked for. */
  mail: copyMail.nullable(),
});
export type GrowerCopyLine = z.infer<typeof growerCopyLine>;

const copyParams = z.object({ copyId: z.uuid() });
/** Where a copy's link is sent: one whole address. */
export const mailRecipient = z.string().trim().pipe(z.email().max(254));

const weighUpParams = z.object({ weighUpId: z.uuid() });

export const listGrowerCopies = defineContract({
  method: 'GET',
  path: '/api/weigh-ups/:weighUpId/grower-copies',
  access: ['advisor', 'agronomist'],
  params: weighUpParams,
  /** Without a mail server in the settings, copies are handed over by link alone. */
  reply: z.object({ copies: z.array(growerCopyLine), isMailSetUp: z.boolean() }),
});

export const makeGrowerCopy = defineContract({
  method: 'POST',
  path: '/api/weigh-ups/:weighUpId/grower-copies',
  access: ['advisor', 'agronomist'],
  params: weighUpParams,
  body: z.object({
    language,
    validDays: z.number().int().min(1).max(1095).default(365),
    /** Of the advisor (IANA); one that is not known here is taken as not said. */
    timeZone: z.string().max(100).optional(),
    /** Where to send the link; left out, nothing is sent. */
    email: mailRecipient.optional(),
  }),
  /** `path` holds the secret, `/copy/<token>`; `link` is the same with the public address before it. */
  reply: z.object({ copy: growerCopyLine, path: z.string(), link: z.url() }),
});

/** Sends the link of a copy, to another address say. The caller gives the secret: the server does not keep it. */
export const mailGrowerCopy = defineContract({
  method: 'POST',
  path: '/api/grower-copies/:copyId/mails',
  access: ['advisor', 'agronomist'],
  params: copyParams,
  body: z.object({ email: mailRecipient, token: z.string().min(1).max(500) }),
  reply: z.object({ copy: growerCopyLine }),
});

/** Tries a mail that waits for its next try at once. */
export const retryGrowerCopyMail = defineContract({
  method: 'POST',
  path: '/api/grower-copies/:copyId/mail-retries',
  access: ['advisor', 'agronomist'],
  params: copyParams,
  reply: z.object({ copy: growerCopyLine }),
});

export const revokeGrowerCopy = defineContract({
  method: 'DELETE',
  path: '/api/grower-copies/:copyId',
  access: ['advisor', 'agronomist'],
  params: copyParams,
  reply: z.object({ copy: growerCopyLine }),
});
