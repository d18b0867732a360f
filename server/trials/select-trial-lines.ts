import { and, asc, desc, eq, type SQL, sql } from 'drizzle-orm';
import { crops, traits } from '#drizzle/schema/crops.ts';
import { regions, sites } from '#drizzle/schema/geography.ts';
import { trials, versionFits } from '#drizzle/schema/trials.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';
import { newestPublications, newestVersions } from './latest-versions.ts';

/** The trait whose figures stand for a trial in lists. */
const headlineTrait = 'yield';

/**
 * Trials as lists show them, newest season first, those that were never published among them. Figures are of the newest
 * publication; `plainMean` is of the working copy, and null where the publication has a mean.
 */
export async function selectTrialLines(
  db: DatabaseOrTransaction,
  choose: (newest: ReturnType<typeof newestVersions>) => SQL | undefined,
) {
  const newest = newestVersions(db);
  const publication = newestPublications(db);
  const plainMean = sql<number | null>`case when ${versionFits.grandMean} is null then (
    select avg(o.value) from observations o join plots p on p.id = o.plot_id
    where p.trial_id = ${trials.id} and o.trait_id = ${traits.id} and p.excluded_reason is null) end`;
  const rows = await db
    .select({
      id: trials.id,
      name: trials.name,
      cropId: trials.cropId,
      siteId: trials.siteId,
      siteName: sites.name,
      regionId: sites.regionId,
      season: trials.season,
      design: trials.design,
      kind: trials.kind,
      state: trials.state,
      /** What the newest version does; null where there is none. */
      action: newest.action,
      entries: sql<number>`(select count(*)::int from entries where trial_id = ${trials.id})`,
      plots: sql<number>`(select count(*)::int from plots where trial_id = ${trials.id})`,
      meanYield: versionFits.grandMean,
      plainMean,
      cvPercent: versionFits.cvPercent,
      lsd: versionFits.lsd,
      entryP: versionFits.entryP,
      cvLimitPercent: crops.cvLimitPercent,
      version: publication.number,
    })
    .from(trials)
    .innerJoin(sites, eq(sites.id, trials.siteId))
    .innerJoin(regions, eq(regions.id, sites.regionId))
    .innerJoin(crops, eq(crops.id, trials.cropId))
    .leftJoin(newest, eq(newest.trialId, trials.id))
    .leftJoin(publication, eq(publication.trialId, trials.id))
    .leftJoin(traits, and(eq(traits.cropId, crops.id), eq(traits.slug, headlineTrait)))
    .leftJoin(
      versionFits,
      and(eq(versionFits.versionId, publication.versionId), eq(versionFits.traitId, traits.id)),
    )
    .where(choose(newest))
    .orderBy(desc(trials.season), asc(sites.name), asc(trials.name));
  return rows.map(({ cvLimitPercent, ...row }) => ({
    ...row,
    isWeak: row.cvPercent !== null && row.cvPercent > cvLimitPercent,
  }));
}
