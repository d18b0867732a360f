import type { UsualEstimate, UsualOfCrop } from '#shared/usual-variance.ts';
import type { Database } from '#server/db.ts';
import { defaultUsualVariances, varianceInterval } from '#server/stats/engine.ts';
import {
  listMeasuredTraits,
  listStoredVariances,
  type MeasuredTrait,
  type StoredUsualVariances,
} from './usual-variances-store.ts';

/** Usual variances of every crop as standard deviations, with what holds where nothing was estimated. */
export async function describeUsualVariances(db: Database): Promise<UsualOfCrop[]> {
  const [traits, stored] = await Promise.all([listMeasuredTraits(db), listStoredVariances(db)]);
  const cropIds = [...new Set(traits.map((trait) => trait.cropId))];
  return cropIds.map((cropId) => ({
    cropId,
    traits: traits
      .filter((trait) => trait.cropId === cropId)
      .map((trait) => ({
        traitSlug: trait.slug,
        mean: trait.mean,
        cropDefault: readDefault(trait),
        estimates: stored.filter((row) => row.traitId === trait.id).map(describeEstimate),
      })),
  }));
}

/** Only yield has values that are usual for every crop. */
function readDefault({ slug, typicalYield }: MeasuredTrait): UsualOfCrop['traits'][number]['cropDefault'] {
  if (slug !== 'yield') return null;
  const { site, year, rest } = defaultUsualVariances(typicalYield);
  return { site: Math.sqrt(site), season: Math.sqrt(year), rest: Math.sqrt(rest) };
}

function describeEstimate(row: StoredUsualVariances): UsualEstimate {
  return {
    id: row.id,
    sd: { site: Math.sqrt(row.site), season: Math.sqrt(row.season), rest: Math.sqrt(row.rest) },
    intervals: {
      site: toInterval(row.site, row.siteSe),
      season: toInterval(row.season, row.seasonSe),
      rest: toInterval(row.rest, row.restSe),
    },
    environments: row.environments,
    seasons: row.seasons,
    entries: row.entries,
    engineVersion: row.engineVersion,
    estimatedAt: row.estimatedAt.toISOString(),
    estimatedBy: row.estimatedByName,
  };
}

function toInterval(variance: number, se: number | null): UsualEstimate['intervals']['site'] {
  if (se === null) return null;
  const [low, high] = varianceInterval(variance, se);
  return { low: Math.sqrt(low), high: Math.sqrt(high), level: 0.95 };
}
