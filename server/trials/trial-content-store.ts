import { asc, eq, sql } from 'drizzle-orm';
import { crops, traits, varieties } from '#drizzle/schema/crops.ts';
import { sites } from '#drizzle/schema/geography.ts';
import { entries, observations, plots, summaryErrors, summaryMeans, trials } from '#drizzle/schema/trials.ts';
import { CodedError } from '#shared/error-codes.ts';
import type { TrialContent } from '#shared/trial-content.ts';
import type { TrialState } from '#shared/trial.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';

/** What an analysis must know of a trait. */
export type ContentTrait = {
  id: string;
  slug: string;
  kind: 'numeric' | 'ordinal';
  /** Which end is the better one. */
  direction: 'higher' | 'lower' | 'neutral';
  scaleMin: number | null;
  scaleMax: number | null;
};

/** The working copy of a trial whole, with the ids behind the names in its content. */
export type StoredTrial = {
  id: string;
  cropId: string;
  siteId: string;
  regionId: string;
  state: TrialState;
  revision: number;
  createdBy: string | null;
  cvLimitPercent: number;
  content: TrialContent;
  /** By plot number. */
  plotIds: ReadonlyMap<string, string>;
  /** By entry label; entries that are no variety are absent. */
  varietyIds: ReadonlyMap<string, string>;
  /** All traits of the crop, in their order. */
  traits: readonly ContentTrait[];
};

/** Plot numbers are text; this puts 9 before 10 and 101 before 1101. */
const plotOrder = sql`length(${plots.plotNumber}), ${plots.plotNumber} collate "C"`;
const labelOrder = sql`${entries.label} collate "C"`;

/**
 * Reads the working copy of a trial, in an order that depends on the data alone.
 * @throws CodedError not-found
 */
export async function loadTrialContent(db: DatabaseOrTransaction, trialId: string): Promise<StoredTrial> {
  const [head] = await db
    .select({ trial: trials, crop: crops, site: sites })
    .from(trials)
    .innerJoin(crops, eq(crops.id, trials.cropId))
    .innerJoin(sites, eq(sites.id, trials.siteId))
    .where(eq(trials.id, trialId));
  if (head === undefined) throw new CodedError('not-found');
  const { trial, crop, site } = head;
  const cropTraits = await readCropTraits(db, crop.id);
  const entryRows = await db
    .select({
      label: entries.label,
      varietyId: entries.varietyId,
      varietyName: varieties.name,
      isCheck: entries.isCheck,
    })
    .from(entries)
    .leftJoin(varieties, eq(varieties.id, entries.varietyId))
    .where(eq(entries.trialId, trialId))
    .orderBy(labelOrder);
  const { contents, ids } = await readPlots(db, trialId);
  const { season, name, design, kind, alpha, management, sownOn, harvestedOn } = trial;
  return {
    id: trial.id,
    cropId: crop.id,
    siteId: site.id,
    regionId: site.regionId,
    state: trial.state,
    revision: trial.revision,
    createdBy: trial.createdBy,
    cvLimitPercent: crop.cvLimitPercent,
    traits: cropTraits,
    plotIds: ids,
    varietyIds: new Map(
      entryRows.flatMap((row) => (row.varietyId === null ? [] : [[row.label, row.varietyId] as const])),
    ),
    content: {
      format: 1,
      cropSlug: crop.slug,
      siteSlug: site.slug,
      ...{ season, name, design, kind, alpha, management, sownOn, harvestedOn },
      entries: entryRows.map(({ label, varietyName, isCheck }) => ({ label, varietyName, isCheck })),
      plots: contents,
      summary: kind === 'summary' ? await readSummary(db, trialId) : [],
    },
  };
}

/** What a view of a version needs beside its content; the trial's working copy is not read whole. */
export type TrialSurroundings = {
  createdBy: string | null;
  cvLimitPercent: number;
  traits: readonly ContentTrait[];
  plotIds: ReadonlyMap<string, string>;
};

/** @throws CodedError not-found */
export async function readTrialSurroundings(
  db: DatabaseOrTransaction,
  trialId: string,
): Promise<TrialSurroundings> {
  const [head] = await db
    .select({ cropId: crops.id, cvLimitPercent: crops.cvLimitPercent, createdBy: trials.createdBy })
    .from(trials)
    .innerJoin(crops, eq(crops.id, trials.cropId))
    .where(eq(trials.id, trialId));
  if (head === undefined) throw new CodedError('not-found');
  const plotRows = await db
    .select({ id: plots.id, plotNumber: plots.plotNumber })
    .from(plots)
    .where(eq(plots.trialId, trialId));
  return {
    createdBy: head.createdBy,
    cvLimitPercent: head.cvLimitPercent,
    traits: await readCropTraits(db, head.cropId),
    plotIds: new Map(plotRows.map((row) => [row.plotNumber, row.id])),
  };
}

/** The traits of a crop in their order. */
export function readCropTraits(db: DatabaseOrTransaction, cropId: string): Promise<ContentTrait[]> {
  return db
    .select({
      id: traits.id,
      slug: traits.slug,
      kind: traits.kind,
      direction: traits.direction,
      scaleMin: traits.scaleMin,
      scaleMax: traits.scaleMax,
    })
    .from(traits)
    .where(eq(traits.cropId, cropId))
    .orderBy(asc(traits.position), asc(traits.slug));
}

async function readPlots(
  db: DatabaseOrTransaction,
  trialId: string,
): Promise<{ contents: TrialContent['plots']; ids: Map<string, string> }> {
  const values = sql<Record<string, number>>`coalesce((
    select jsonb_object_agg(${traits.slug}, ${observations.value})
    from ${observations} join ${traits} on ${traits.id} = ${observations.traitId}
    where ${observations.plotId} = ${plots.id}), '{}'::jsonb)`;
  const rows = await db
    .select({
      id: plots.id,
      plotNumber: plots.plotNumber,
      entry: entries.label,
      rep: plots.rep,
      block: plots.block,
      row: plots.row,
      col: plots.col,
      mainLevel: plots.mainLevel,
      factorLevels: plots.factorLevels,
      excludedReason: plots.excludedReason,
      values,
    })
    .from(plots)
    .innerJoin(entries, eq(entries.id, plots.entryId))
    .where(eq(plots.trialId, trialId))
    .orderBy(plotOrder);
  return {
    contents: rows.map(({ id: _, ...plot }) => plot),
    ids: new Map(rows.map((row) => [row.plotNumber, row.id])),
  };
}

async function readSummary(db: DatabaseOrTransaction, trialId: string): Promise<TrialContent['summary']> {
  const errors = await db
    .select({ trait: traits.slug, error: summaryErrors })
    .from(summaryErrors)
    .innerJoin(traits, eq(traits.id, summaryErrors.traitId))
    .where(eq(summaryErrors.trialId, trialId))
    .orderBy(asc(traits.position), asc(traits.slug));
  const means = await db
    .select({
      trait: traits.slug,
      entry: entries.label,
      mean: summaryMeans.mean,
      replicates: summaryMeans.replicates,
    })
    .from(summaryMeans)
    .innerJoin(entries, eq(entries.id, summaryMeans.entryId))
    .innerJoin(traits, eq(traits.id, summaryMeans.traitId))
    .where(eq(entries.trialId, trialId))
    .orderBy(labelOrder);
  return errors.map(({ trait, error }) => ({
    trait,
    means: means
      .filter((row) => row.trait === trait)
      .map(({ entry, mean, replicates }) => ({ entry, mean, replicates })),
    lsd: error.lsd,
    lsdAlpha: error.lsdAlpha,
    cvPercent: error.cvPercent,
    standardError: error.standardError,
    residualMs: error.residualMs,
    errorDf: error.errorDf,
  }));
}
