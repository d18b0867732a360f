import { queryOptions } from '@tanstack/react-query';
import { readCatalogue, type Crop, type Region, type Trait } from '#shared/catalogue.ts';
import type { ReplyOf } from './api-client.ts';
import { callApi } from './api-client.ts';
import { takeFirstAnswer } from './first-answers.ts';

export type Catalogue = ReplyOf<typeof readCatalogue>;

/** Regions, sites, crops, traits and varieties: small, asked once, kept for the visit. */
export const catalogueQuery = queryOptions({
  queryKey: ['catalogue'],
  queryFn: ({ signal }) => callApi(readCatalogue, {}, signal),
  initialData: () => takeFirstAnswer(readCatalogue, {}),
  staleTime: 5 * 60_000,
});

/** The crop of that id, with what belongs to it. */
export function findCrop(catalogue: Catalogue | undefined, cropId: string): Crop | undefined {
  return catalogue?.crops.find((crop) => crop.id === cropId);
}

export function findRegion(catalogue: Catalogue | undefined, regionId: string): Region | undefined {
  return catalogue?.regions.find((region) => region.id === regionId);
}

/** The trait of that slug among the crop's. */
export function findTrait(crop: Crop | undefined, slug: string): Trait | undefined {
  return crop?.traits.find((trait) => trait.slug === slug);
}
