import { z } from 'zod';
import { defineContract } from './contract.ts';

const access = ['advisor', 'agronomist'] as const;
const figure = z.number().nullable();

/** A weigh-up being written: the question as it stands in the address, and what was typed so far. */
export const draftContent = z.object({
  /** The address's query, which holds the question. */
  question: z.string().max(4000),
  growerName: z.string().max(500),
  farmName: z.string().max(500),
  areaHectares: figure,
  usualYield: figure,
  /** null where the price sheet's price stands. */
  priceLow: figure,
  priceMiddle: figure,
  priceHigh: figure,
});
export type DraftContent = z.infer<typeof draftContent>;

export const weighUpDraft = z.object({
  id: z.uuid(),
  revision: z.number().int(),
  updatedAt: z.iso.datetime(),
  content: draftContent,
});
export type WeighUpDraft = z.infer<typeof weighUpDraft>;

const params = z.object({ draftId: z.uuid() });

/** One's own drafts, last changed first. */
export const listDrafts = defineContract({
  method: 'GET',
  path: '/api/weigh-up-drafts',
  access,
  reply: z.object({ drafts: z.array(weighUpDraft) }),
});

export const createDraft = defineContract({
  method: 'POST',
  path: '/api/weigh-up-drafts',
  access,
  body: z.object({ content: draftContent }),
  reply: z.object({ draft: weighUpDraft }),
});

/** `revision-conflict` when it was written on in another tab. */
export const saveDraft = defineContract({
  method: 'PUT',
  path: '/api/weigh-up-drafts/:draftId',
  access,
  params,
  body: z.object({ revision: z.number().int(), content: draftContent }),
  reply: z.object({ draft: weighUpDraft }),
});

export const deleteDraft = defineContract({
  method: 'DELETE',
  path: '/api/weigh-up-drafts/:draftId',
  access,
  params,
  reply: z.object({}),
});
