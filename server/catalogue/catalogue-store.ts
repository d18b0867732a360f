import { asc, count, desc, eq } from 'drizzle-orm';
import { crops, traits, varieties } from '#drizzle/schema/crops.ts';
import { places, regions, sites } from '#drizzle/schema/geography.ts';
import { trials } from '#drizzle/schema/trials.ts';
import type { Crop, Place, Region, Site } from '#shared/catalogue.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { Database } from '#server/db.ts';
import { newestVersions } from '#server/trials/latest-versions.ts';

export type Catalogue = { regions: Region[]; sites: Site[]; places: Place[]; crops: Crop[] };

/** Everything there is to choose from, with how many published trials stand behind each choice. */
export async function loadCatalogue(db: Database): Promise<Catalogue> {
  const [regionRows, siteRows, placeRows, cropRows, traitRows, varietyRows, published] = await Promise.all([
    db.select().from(regions).orderBy(asc(regions.nameEn)),
    db.select().from(sites).orderBy(asc(sites.name)),
    db.select().from(places).orderBy(asc(places.name)),
    db.select().from(crops).orderBy(asc(crops.nameEn)),
    db.select().from(traits).orderBy(asc(traits.position), asc(traits.slug)),
    db.select().from(varieties).orderBy(asc(varieties.name)),
    countPublishedTrials(db),
  ]);
  return {
    sites: siteRows,
    places: placeRows,
    regions: regionRows.map((region) => ({
      id: region.id,
      slug: region.slug,
      name: { en: region.nameEn, fr: region.nameFr },
      publishedTrials: Object.fromEntries(
        cropRows.map((crop) => [crop.slug, sumTrials(published, crop.id, region.id)]),
      ),
    })),
    crops: cropRows.map((crop) => ({
      ...crop,
      name: { en: crop.nameEn, fr: crop.nameFr },
      traits: traitRows
        .filter((trait) => trait.cropId === crop.id)
        .map((trait) => ({ ...trait, name: { en: trait.nameEn, fr: trait.nameFr } })),
      varieties: varietyRows.filter((variety) => variety.cropId === crop.id),
      seasons: [...new Set(published.filter((row) => row.cropId === crop.id).map((row) => row.season))],
    })),
  };
}

/**
 * A crop's bushel of account, in pounds.
 * @throws CodedError not-found
 */
export async function readBushelWeight(db: Database, cropId: string): Promise<number> {
  const [row] = await db
    .select({ bushelWeightLb: crops.bushelWeightLb })
    .from(crops)
    .where(eq(crops.id, cropId));
  if (row === undefined) throw new CodedError('not-found');
  return row.bushelWeightLb;
}

type PublishedCount = { cropId: string; regionId: string; season: number; trials: number };

/** Newest season first. */
function countPublishedTrials(db: Database): Promise<PublishedCount[]> {
  const newest = newestVersions(db);
  return db
    .select({ cropId: trials.cropId, regionId: sites.regionId, season: trials.season, trials: count() })
    .from(trials)
    .innerJoin(sites, eq(sites.id, trials.siteId))
    .innerJoin(newest, eq(newest.trialId, trials.id))
    .where(eq(newest.action, 'publish'))
    .groupBy(trials.cropId, sites.regionId, trials.season)
    .orderBy(desc(trials.season));
}

const sumTrials = (published: PublishedCount[], cropId: string, regionId: string): number =>
  published
    .filter((row) => row.cropId === cropId && row.regionId === regionId)
    .reduce((sum, row) => sum + row.trials, 0);
