import { and, count, desc, eq, inArray, sql } from 'drizzle-orm';
import { users } from '#drizzle/schema/accounts.ts';
import { crops, varieties } from '#drizzle/schema/crops.ts';
import { regions } from '#drizzle/schema/geography.ts';
import { weighUpCandidates, weighUps } from '#drizzle/schema/weigh-ups.ts';
import { decisionLine } from '#shared/decision.ts';
import { CodedError } from '#shared/error-codes.ts';
import { soilTexture } from '#shared/farm.ts';
import { moneyAssumptions } from '#shared/money.ts';
import type { WeighUp, WeighUpInput, WeighUpLine } from '#shared/weigh-up.ts';
import type { Database, DatabaseOrTransaction } from '#server/db.ts';
import { deleteOwnDraft } from './draft-store.ts';

/** The one predicate of ownership: somebody else's weigh-up answers like one that does not exist. */
export const isOwn = (ownerId: string, weighUpId: string) =>
  and(eq(weighUps.id, weighUpId), eq(weighUps.ownerId, ownerId));

/** What of a decision stands in a list; the evidence frozen with it stays in the database. */
const selectDecisionLine = sql<unknown>`case when ${weighUps.decision} is not null then jsonb_build_object(
  'choice', ${weighUps.decision} -> 'choice',
  'varietyName', ${weighUps.decision} -> 'varietyName',
  'areaHectares', ${weighUps.decision} -> 'areaHectares'
) end`;

/** The weigh-ups of one person, archived ones too, last changed first. */
export async function listOwnWeighUps(db: Database, ownerId: string): Promise<WeighUpLine[]> {
  const rows = await db
    .select({
      id: weighUps.id,
      cropNameEn: crops.nameEn,
      cropNameFr: crops.nameFr,
      regionNameEn: regions.nameEn,
      regionNameFr: regions.nameFr,
      growerName: weighUps.growerName,
      farmName: weighUps.farmName,
      currentVarietyName: varieties.name,
      candidates: sql<number>`(select count(*)::int from weigh_up_candidates where weigh_up_id = ${weighUps.id})`,
      seasonFrom: weighUps.seasonFrom,
      seasonTo: weighUps.seasonTo,
      decision: selectDecisionLine,
      archivedAt: weighUps.archivedAt,
      updatedAt: weighUps.updatedAt,
    })
    .from(weighUps)
    .innerJoin(crops, eq(crops.id, weighUps.cropId))
    .innerJoin(regions, eq(regions.id, weighUps.regionId))
    .innerJoin(varieties, eq(varieties.id, weighUps.currentVarietyId))
    .where(eq(weighUps.ownerId, ownerId))
    .orderBy(desc(weighUps.updatedAt), weighUps.id);
  return rows.map((row) => ({
    ...row,
    cropName: { en: row.cropNameEn, fr: row.cropNameFr },
    regionName: { en: row.regionNameEn, fr: row.regionNameFr },
    decision: decisionLine.nullable().parse(row.decision),
    archivedAt: row.archivedAt?.toISOString() ?? null,
    updatedAt: row.updatedAt.toISOString(),
  }));
}

/** @throws CodedError not-found, also for somebody else's */
export async function readOwnWeighUp(
  db: DatabaseOrTransaction,
  ownerId: string,
  weighUpId: string,
): Promise<WeighUp> {
  const [row] = await db
    .select({
      weighUp: weighUps,
      ownerName: users.name,
      cropName: { en: crops.nameEn, fr: crops.nameFr },
      regionName: { en: regions.nameEn, fr: regions.nameFr },
      currentVarietyName: varieties.name,
      candidateIds: sql<
        string[]
      >`array(select variety_id from weigh_up_candidates where weigh_up_id = ${weighUps.id} order by position)`,
    })
    .from(weighUps)
    .innerJoin(users, eq(users.id, weighUps.ownerId))
    .innerJoin(crops, eq(crops.id, weighUps.cropId))
    .innerJoin(regions, eq(regions.id, weighUps.regionId))
    .innerJoin(varieties, eq(varieties.id, weighUps.currentVarietyId))
    .where(isOwn(ownerId, weighUpId));
  if (row === undefined) throw new CodedError('not-found');
  const { weighUp, ...named } = row;
  return {
    ...weighUp,
    ...named,
    farmSoilTexture: soilTexture.nullable().parse(weighUp.farmSoilTexture),
    assumptions: moneyAssumptions.parse(weighUp.assumptions),
    createdAt: weighUp.createdAt.toISOString(),
    updatedAt: weighUp.updatedAt.toISOString(),
  };
}

/**
 * @param draftId the draft that the question was written in: it goes with the same step
 * @throws CodedError variety-not-of-crop; invalid-input for a crop or region that does not exist
 */
export async function insertWeighUp(
  db: Database,
  ownerId: string,
  input: WeighUpInput,
  draftId?: string,
): Promise<WeighUp> {
  return db.transaction(async (tx) => {
    await checkReferences(tx, input);
    const [row] = await tx
      .insert(weighUps)
      .values({ ownerId, ...toColumns(input) })
      .returning({ id: weighUps.id });
    if (row === undefined) throw new CodedError('internal');
    await insertCandidates(tx, row.id, input.candidateIds);
    if (draftId !== undefined) await deleteOwnDraft(tx, ownerId, draftId);
    return readOwnWeighUp(tx, ownerId, row.id);
  });
}

/** @throws CodedError not-found, revision-conflict, variety-not-of-crop; invalid-input as in insertWeighUp */
export async function updateWeighUp(
  db: Database,
  ownerId: string,
  weighUpId: string,
  revision: number,
  input: WeighUpInput,
): Promise<WeighUp> {
  return db.transaction(async (tx) => {
    await lockOwnWeighUp(tx, ownerId, weighUpId, revision);
    await checkReferences(tx, input);
    await tx
      .update(weighUps)
      .set({ ...toColumns(input), revision: revision + 1, updatedAt: sql`now()` })
      .where(eq(weighUps.id, weighUpId));
    await tx.delete(weighUpCandidates).where(eq(weighUpCandidates.weighUpId, weighUpId));
    await insertCandidates(tx, weighUpId, input.candidateIds);
    return readOwnWeighUp(tx, ownerId, weighUpId);
  });
}

/**
 * Holds a weigh-up until the transaction ends, at the revision that the change was made over.
 * @throws CodedError not-found, revision-conflict
 */
export async function lockOwnWeighUp(
  tx: DatabaseOrTransaction,
  ownerId: string,
  weighUpId: string,
  revision: number,
): Promise<void> {
  const [held] = await tx
    .select({ revision: weighUps.revision })
    .from(weighUps)
    .where(isOwn(ownerId, weighUpId))
    .for('update');
  if (held === undefined) throw new CodedError('not-found');
  if (held.revision !== revision) throw new CodedError('revision-conflict');
}

/** A question is saved whole: what it leaves unsaid about the farm is not known any more. */
function toColumns({ candidateIds: _candidates, ...columns }: WeighUpInput) {
  return {
    ...columns,
    farmLatitude: columns.farmLatitude ?? null,
    farmLongitude: columns.farmLongitude ?? null,
    farmSeasonRainMm: columns.farmSeasonRainMm ?? null,
    farmHeatSumDegreeDays: columns.farmHeatSumDegreeDays ?? null,
    farmSoilTexture: columns.farmSoilTexture ?? null,
    usualYield: columns.usualYield ?? null,
    trialChoice: columns.trialChoice ?? 'region',
    includeNeighbours: columns.includeNeighbours ?? false,
    question: columns.question ?? 'several',
  };
}

async function insertCandidates(tx: DatabaseOrTransaction, weighUpId: string, ids: string[]): Promise<void> {
  await tx
    .insert(weighUpCandidates)
    .values(ids.map((varietyId, position) => ({ weighUpId, varietyId, position })));
}

async function checkReferences(tx: DatabaseOrTransaction, input: WeighUpInput): Promise<void> {
  const [crop] = await tx.select({ id: crops.id }).from(crops).where(eq(crops.id, input.cropId));
  if (crop === undefined) refuseField('cropId');
  const [region] = await tx.select({ id: regions.id }).from(regions).where(eq(regions.id, input.regionId));
  if (region === undefined) refuseField('regionId');
  await checkVarietiesOfCrop(tx, input.cropId, [input.currentVarietyId, ...input.candidateIds]);
}

function refuseField(path: string): never {
  throw new CodedError('invalid-input', { issues: [{ path, reason: 'invalid_value' }] });
}

/** @throws CodedError variety-not-of-crop when one of the varieties belongs to another crop, or to none */
export async function checkVarietiesOfCrop(
  db: DatabaseOrTransaction,
  cropId: string,
  varietyIds: readonly string[],
): Promise<void> {
  const wanted = [...new Set(varietyIds)];
  const [found] = await db
    .select({ varieties: count() })
    .from(varieties)
    .where(and(eq(varieties.cropId, cropId), inArray(varieties.id, wanted)));
  if (found?.varieties !== wanted.length) throw new CodedError('variety-not-of-crop');
}
