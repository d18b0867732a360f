import { z } from 'zod';
import { defineContract } from './contract.ts';

/** Names that depend on the language are carried in both; the client picks. */
export const bilingualName = z.object({ en: z.string(), fr: z.string() });
export type BilingualName = z.infer<typeof bilingualName>;

export const traitDirection = z.enum(['higher', 'lower', 'neutral']);
export const traitKind = z.enum(['numeric', 'ordinal']);

export const trait = z.object({
  id: z.uuid(),
  slug: z.string(),
  name: bilingualName,
  unit: z.string(),
  kind: traitKind,
  direction: traitDirection,
  practicalMargin: z.number().nullable(),
  scaleMin: z.number().nullable(),
  scaleMax: z.number().nullable(),
});
export type Trait = z.infer<typeof trait>;

export const region = z.object({
  id: z.uuid(),
  slug: z.string(),
  name: bilingualName,
  /** Published trials by crop slug: 0 where the region has none, so that the client can say so at once. */
  publishedTrials: z.record(z.string(), z.number().int()),
});
export type Region = z.infer<typeof region>;

export const site = z.object({
  id: z.uuid(),
  slug: z.string(),
  name: z.string(),
  regionId: z.uuid(),
  latitude: z.number(),
  longitude: z.number(),
  elevationM: z.number(),
  seasonRainMm: z.number(),
  heatSumDegreeDays: z.number(),
  soilTexture: z.string(),
  soilPh: z.number(),
});
export type Site = z.infer<typeof site>;

/** A town that may be named for a farm, with the normal of its growing season. */
export const place = z.object({
  id: z.uuid(),
  name: z.string(),
  regionId: z.uuid(),
  latitude: z.number(),
  longitude: z.number(),
  seasonRainMm: z.number(),
  heatSumDegreeDays: z.number(),
  soilTexture: z.string(),
});
export type Place = z.infer<typeof place>;

export const variety = z.object({
  id: z.uuid(),
  name: z.string(),
  aliases: z.array(z.string()),
  isCheck: z.boolean(),
  firstSeason: z.number().int().nullable(),
});
export type Variety = z.infer<typeof variety>;

export const crop = z.object({
  id: z.uuid(),
  slug: z.string(),
  name: bilingualName,
  eppoCode: z.string(),
  standardMoisturePercent: z.number(),
  bushelWeightLb: z.number(),
  cvLimitPercent: z.number(),
  traits: z.array(trait),
  varieties: z.array(variety),
  /** Seasons with a published trial, newest first. */
  seasons: z.array(z.number().int()),
});
export type Crop = z.infer<typeof crop>;

/** Regions, sites, towns and crops with their traits and varieties: small, asked once, kept by the client. */
export const readCatalogue = defineContract({
  method: 'GET',
  path: '/api/catalogue',
  access: 'signed-in',
  reply: z.object({
    regions: z.array(region),
    sites: z.array(site),
    places: z.array(place).default([]),
    crops: z.array(crop),
  }),
});
