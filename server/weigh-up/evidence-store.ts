import { and, asc, between, desc, eq, inArray, isNotNull, sql, type SQL } from 'drizzle-orm';
import { crops, traits, varieties } from '#drizzle/schema/crops.ts';
import { places, regions, sites } from '#drizzle/schema/geography.ts';
import { entryMeans, trials, versionFits } from '#drizzle/schema/trials.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { Database } from '#server/db.ts';
import { newestVersions } from '#server/trials/latest-versions.ts';
import { readUsualVariances } from '#server/usual-variances/usual-variances-store.ts';
import type { Evidence, EvidenceFit, EvidenceGround, EvidenceMean, EvidenceTrial } from './evidence.ts';
import { asksForOtherRegions, chooseTrials, type EvidenceScope, type Geography } from './trial-choice.ts';

/**
 * Which trials a question rests on, and what is known of their crop, without the figures.
 * @throws CodedError not-found when there is no such crop
 */
export async function loadEvidenceGround(db: Database, scope: EvidenceScope): Promise<EvidenceGround> {
  const { cropId, regionId, seasonFrom, seasonTo } = scope;
  const inSeasons = between(trials.season, seasonFrom, seasonTo);
  if (!asksForOtherRegions(scope))
    return loadGround(db, cropId, and(eq(sites.regionId, regionId), inSeasons));
  const [ground, geography] = await Promise.all([loadGround(db, cropId, inSeasons), loadGeography(db)]);
  const chosen = chooseTrials(ground.trials, scope, geography);
  return {
    ...ground,
    trials: chosen.map((trial) => ({ ...trial, inRegion: trial.regionId === regionId })),
  };
}

/** Where the sites and towns of all regions lie. */
async function loadGeography(db: Database): Promise<Geography> {
  const [siteRows, townRows] = await Promise.all([
    db.select({ regionId: sites.regionId, latitude: sites.latitude, longitude: sites.longitude }).from(sites),
    db
      .select({ regionId: places.regionId, latitude: places.latitude, longitude: places.longitude })
      .from(places),
  ]);
  return { sites: siteRows, towns: townRows };
}

/**
 * The ground of all published trials of a crop.
 * @throws CodedError not-found when there is no such crop
 */
export function loadCropGround(db: Database, cropId: string): Promise<EvidenceGround> {
  return loadGround(db, cropId, undefined);
}

async function loadGround(db: Database, cropId: string, choose: SQL | undefined): Promise<EvidenceGround> {
  const [[crop], traitRows, varietyRows, trialRows, usual] = await Promise.all([
    db.select().from(crops).where(eq(crops.id, cropId)),
    db.select().from(traits).where(eq(traits.cropId, cropId)).orderBy(asc(traits.position), asc(traits.slug)),
    db
      .select({ id: varieties.id, name: varieties.name, isCheck: varieties.isCheck })
      .from(varieties)
      .where(eq(varieties.cropId, cropId))
      .orderBy(asc(varieties.name)),
    selectTrials(db, and(eq(trials.cropId, cropId), choose)),
    readUsualVariances(db, cropId),
  ]);
  if (crop === undefined) throw new CodedError('not-found');
  return {
    crop,
    traits: traitRows.map((trait) => ({ ...trait, name: { en: trait.nameEn, fr: trait.nameFr } })),
    varieties: varietyRows,
    trials: trialRows,
    usual,
  };
}

/** The figures of the trials of a ground: two queries, however many there are. */
export async function loadFigures(db: Database, ground: EvidenceGround): Promise<Evidence> {
  const versionIds = ground.trials.map((trial) => trial.versionId);
  if (versionIds.length === 0) return { ...ground, fits: [], means: [] };
  const [fits, means] = await Promise.all([selectFits(db, versionIds), selectMeans(db, versionIds)]);
  return { ...ground, fits, means };
}

/** Trials whose newest version is a publication: withdrawn ones give no evidence. */
async function selectTrials(db: Database, choose: SQL | undefined): Promise<EvidenceTrial[]> {
  const newest = newestVersions(db);
  const rows = await db
    .select({
      trialId: trials.id,
      versionId: newest.versionId,
      version: newest.number,
      sha256: newest.sha256,
      name: trials.name,
      siteId: sites.id,
      siteName: sites.name,
      place: {
        latitude: sites.latitude,
        longitude: sites.longitude,
        seasonRainMm: sites.seasonRainMm,
        heatSumDegreeDays: sites.heatSumDegreeDays,
        soilTexture: sites.soilTexture,
      },
      regionId: sites.regionId,
      regionName: { en: regions.nameEn, fr: regions.nameFr },
      season: trials.season,
      kind: trials.kind,
      isStrips: sql<boolean>`${trials.design} = 'strips'`,
      management: trials.management,
    })
    .from(trials)
    .innerJoin(sites, eq(sites.id, trials.siteId))
    .innerJoin(regions, eq(regions.id, sites.regionId))
    .innerJoin(newest, eq(newest.trialId, trials.id))
    .where(and(choose, eq(newest.action, 'publish')))
    .orderBy(desc(trials.season), asc(sites.name), asc(trials.name));
  return rows.map((row) => ({ ...row, inRegion: true }));
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

/** Ids of the varieties with a figure of a trait in one of the ground's trials, in the order of their names. */
export async function listStanding(
  db: Database,
  ground: EvidenceGround,
  traitSlug: string,
): Promise<string[]> {
  const trait = ground.traits.find(({ slug }) => slug === traitSlug);
  const versionIds = ground.trials.map((trial) => trial.versionId);
  if (trait === undefined || versionIds.length === 0) return [];
  const rows = await db
    .selectDistinct({ varietyId: entryMeans.varietyId })
    .from(entryMeans)
    .where(and(eq(entryMeans.traitId, trait.id), inArray(entryMeans.versionId, versionIds)));
  const standing = new Set(rows.map((row) => row.varietyId));
  return ground.varieties.flatMap((variety) => (standing.has(variety.id) ? [variety.id] : []));
}
