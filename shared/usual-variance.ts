import { z } from 'zod';
import { defineContract } from './contract.ts';

const spread = z.object({ site: z.number(), season: z.number(), rest: z.number() });
const spreadInterval = z.object({ low: z.number(), high: z.number(), level: z.number() }).nullable();

/** How much varieties usually move in one trait, as standard deviations in its unit. */
export const usualEstimate = z.object({
  id: z.uuid(),
  sd: spread,
  /** Null for a movement that the trials do not show: it stands at the least share that the method keeps. */
  intervals: z.object({ site: spreadInterval, season: spreadInterval, rest: spreadInterval }),
  environments: z.number().int(),
  seasons: z.number().int(),
  entries: z.number().int(),
  engineVersion: z.string(),
  estimatedAt: z.iso.datetime(),
  /** Null where a command estimated it. */
  estimatedBy: z.string().nullable(),
});
export type UsualEstimate = z.infer<typeof usualEstimate>;

export const usualOfTrait = z.object({
  traitSlug: z.string(),
  /** Mean of the trait over the published trials, its unit; null where there are none. */
  mean: z.number().nullable(),
  /** What holds where nothing was estimated, with its source in domain terms; null: the trials at hand alone. */
  cropDefault: spread.nullable(),
  /** Newest first: the first counts, the others are its history. */
  estimates: z.array(usualEstimate),
});
export type UsualOfTrait = z.infer<typeof usualOfTrait>;

export const usualOfCrop = z.object({ cropId: z.uuid(), traits: z.array(usualOfTrait) });
export type UsualOfCrop = z.infer<typeof usualOfCrop>;

/** What trials must hold before their usual variances replace the crop's default. */
export const usualNeeds = z.object({
  environments: z.number().int(),
  seasons: z.number().int(),
  entries: z.number().int(),
});

export const usualOutcome = usualNeeds.extend({
  traitSlug: z.string(),
  outcome: z.enum(['estimated', 'not-enough', 'not-fitted']),
});
export type UsualOutcome = z.infer<typeof usualOutcome>;

/** Usual variances of every crop's measured traits, with their history. */
export const listUsualVariances = defineContract({
  method: 'GET',
  path: '/api/usual-variances',
  access: ['advisor', 'agronomist'],
  reply: z.object({ crops: z.array(usualOfCrop) }),
});

/** Estimates a crop's usual variances from all its published trials; what cannot be estimated says what it has and what it needs. */
export const estimateUsual = defineContract({
  method: 'POST',
  path: '/api/usual-variances',
  access: ['agronomist'],
  body: z.object({ cropId: z.uuid() }),
  reply: z.object({ outcomes: z.array(usualOutcome), needs: usualNeeds }),
});
