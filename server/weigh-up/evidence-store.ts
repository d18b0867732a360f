import { and, asc, between, desc, eq, inArray, isNotNull, sql } from 'drizzle-orm';
import { crops, traits, varieties } from '#drizzle/schema/crops.ts';
import { sites } from '#drizzle/schema/geography.ts';
import { entryMeans, trials, versionFits } from '#drizzle/schema/trials.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { Database } from '#server/db.ts';
import { newestVersions } from '#server/trials/latest-versions.ts';
import type { Evidence, EvidenceFit, EvidenceMean, EvidenceTrial } from './evidence.ts';

export type EvidenceScope = { cropId: string; regionId: string; seasonFrom: number; seasonTo: number };

/**
 * Reads the evidence of a crop in a region and span of seasons: five queries, however many trials there are.
 * @throws CodedError not-found when there is no such crop
 */
export async function loadEvidence(db: Database, scope: EvidenceScope): Promise<Evidence> {
  const [[crop], traitRows, varietyRows, trialRows] = await Promise.all([
    db.select().from(crops).where(eq(crops.id, scope.cropId)),
    db
      .select()
      .from(traits)
      .where(eq(traits.cropId, scope.cropId))
      .orderBy(asc(traits.position), asc(traits.slug)),
    db
      .select({ id: varieties.id, name: varieties.name, isCheck: varieties.isCheck })
      .from(varieties)
      .where(eq(varieties.cropId, scope.cropId))
      .orderBy(asc(varieties.name)),
    selectTrials(db, scope),
  ]);
  if (crop === undefined) throw new CodedError('not-found');
  const versionIds = trialRows.map((trial) => trial.versionId);
  const [fits, means] =
    versionIds.length === 0
      ? [[], []]
      : await Promise.all([selectFits(db, versionIds), selectMeans(db, versionIds)]);
  return {
    crop,
    traits: traitRows.map((trait) => ({ ...trait, name: { en: trait.nameEn, fr: trait.nameFr } })),
    varieties: varietyRows,
    trials: trialRows,
    fits,
    means,
  };
}

/** Trials whose newest version is a publication: withdrawn ones give no evidence. */
function selectTrials(db: Database, scope: EvidenceScope): Promise<EvidenceTrial[]> {
  const newest = newestVersions(db);
  return db
    .select({
      trialId: trials.id,
      versionId: newest.versionId,
      version: newest.number,
      sha256: newest.sha256,
      name: trials.name,
      siteId: sites.id,
      siteName: sites.name,
      season: trials.season,
      kind: trials.kind,
      isStrips: sql<boolean>`${trials.design} = 'strips'`,
      management: trials.management,
    })
    .from(trials)
    .innerJoin(sites, eq(sites.id, trials.siteId))
    .innerJoin(newest, eq(newest.trialId, trials.id))
    .where(
      and(
        eq(trials.cropId, scope.cropId),
        eq(sites.regionId, scope.regionId),
        between(trials.season, scope.seasonFrom, scope.seasonTo),
        eq(newest.action, 'publish'),
      ),
    )
    .orderBy(desc(trials.season), asc(sites.name), asc(trials.name));
}

function selectFits(db: Database, versionIds: string[]): Promise<EvidenceFit[]> {
  return db
    .select({
      versionId: versionFits.versionId,
      traitId: versionFits.traitId,
      grandMean: versionFits.grandMean,
      residualMs: versionFits.residualMs,
      residualDf: versionFits.residualDf,
      cvPercent: versionFits.cvPercent,
      entryP: versionFits.entryP,
    })
    .from(versionFits)
    .where(inArray(versionFits.versionId, versionIds))
    .orderBy(versionFits.versionId, versionFits.traitId);
}

/** Entries that are no variety (a seeding rate, an unknown name) connect to nothing and are left to their trial's page. */
async function selectMeans(db: Database, versionIds: string[]): Promise<EvidenceMean[]> {
  const rows = await db
    .select({
      versionId: entryMeans.versionId,
      traitId: entryMeans.traitId,
      varietyId: entryMeans.varietyId,
      mean: entryMeans.mean,
      variance: entryMeans.variance,
      df: entryMeans.df,
    })
    .from(entryMeans)
    .where(and(inArray(entryMeans.versionId, versionIds), isNotNull(entryMeans.varietyId)))
    // In one order always: sums come out the same to the last digit.
    .orderBy(entryMeans.versionId, entryMeans.traitId, entryMeans.entryLabel);
  return rows.flatMap(({ varietyId, ...row }) => (varietyId === null ? [] : [{ ...row, varietyId }]));
}
