import { randomUUID } from 'node:crypto';
import { eq } from 'drizzle-orm';
import { crops, traits, varieties } from '#drizzle/schema/crops.ts';
import { regions, sites } from '#drizzle/schema/geography.ts';
import { priceSheets, seedCosts } from '#drizzle/schema/price-sheets.ts';
import { trials } from '#drizzle/schema/trials.ts';
import type { TrialContent } from '#shared/trial-content.ts';
import type { Database } from '#server/db.ts';
import { publishTrial, withdrawTrial } from '#server/trials/publish-trial.ts';
import { insertTrialContents } from '#server/trials/trial-content-insert.ts';

/** Two crops, three regions (one without trials) and a few varieties, with every id by its name. */
export type SmallWorld = {
  cropId: string;
  otherCropId: string;
  /** north, south, and coast without trials or price sheet */
  regionIds: Record<'north' | 'south' | 'coast', string>;
  siteIds: ReadonlyMap<string, string>;
  varietyIds: ReadonlyMap<string, string>;
  traitIds: ReadonlyMap<string, string>;
  otherVarietyId: string;
};

export const varietyNames = ['Anchor', 'Birch', 'Cedar', 'Dogwood', 'Elder'] as const;

/** Lies on any lattice of plots without looking like a trend; the same arguments give the same noise, in ±0.5. */
export function noise(...at: number[]): number {
  const x = Math.sin(at.reduce((sum, value, i) => sum + value * (12.9898 + 65.233 * i), 4.1)) * 43_758.5453;
  return x - Math.floor(x) - 0.5;
}

/** Stores the catalogue of the small world. */
export async function foundSmallWorld(db: Database): Promise<SmallWorld> {
  const regionIds = { north: randomUUID(), south: randomUUID(), coast: randomUUID() };
  await db
    .insert(regions)
    .values(
      Object.entries(regionIds).map(([slug, id]) => ({ id, slug, nameEn: slug, nameFr: `${slug} (fr)` })),
    );
  const siteRows = (['elm', 'fir', 'gorse', 'heath'] as const).map((slug) => ({
    id: randomUUID(),
    slug,
    name: slug.toUpperCase(),
    regionId: slug === 'heath' ? regionIds.south : regionIds.north,
    latitude: 50,
    longitude: -100,
    elevationM: 300,
    seasonRainMm: 250,
    heatSumDegreeDays: 1500,
    soilTexture: 'loam',
    soilPh: 7,
  }));
  await db.insert(sites).values(siteRows);
  const [cropId, otherCropId] = [randomUUID(), randomUUID()];
  await db.insert(crops).values([cropRow(cropId, 'barley'), cropRow(otherCropId, 'pea')]);
  const traitRows = [
    traitRow(cropId, { slug: 'yield', unit: 't/ha', practicalMargin: 0.15 }),
    traitRow(cropId, { slug: 'protein', unit: '%', practicalMargin: 0.3, position: 1 }),
    traitRow(cropId, { slug: 'lodging', unit: '', kind: 'ordinal', direction: 'lower', position: 2 }),
  ];
  await db.insert(traits).values(traitRows);
  const varietyRows = varietyNames.map((name) => ({
    id: randomUUID(),
    cropId,
    name,
    isCheck: name === 'Anchor',
  }));
  const otherVarietyId = randomUUID();
  await db
    .insert(varieties)
    .values([...varietyRows, { id: otherVarietyId, cropId: otherCropId, name: 'Sweetpea', isCheck: false }]);
  const world: SmallWorld = {
    cropId,
    otherCropId,
    regionIds,
    otherVarietyId,
    siteIds: new Map(siteRows.map((row) => [row.slug, row.id])),
    varietyIds: new Map(varietyRows.map((row) => [row.name, row.id])),
    traitIds: new Map(traitRows.map((row) => [row.slug, row.id])),
  };
  await insertPriceSheets(db, world);
  return world;
}

const cropRow = (id: string, slug: string) => ({
  id,
  slug,
  nameEn: slug,
  nameFr: `${slug} (fr)`,
  eppoCode: 'XXXXX',
  standardMoisturePercent: 13.5,
  bushelWeightLb: 48,
  cvLimitPercent: 15,
  typicalYield: 5,
});

const traitRow = (
  cropId: string,
  row: { slug: string; unit: string } & Partial<typeof traits.$inferInsert>,
) => ({
  id: randomUUID(),
  cropId,
  nameEn: row.slug,
  nameFr: `${row.slug} (fr)`,
  kind: 'numeric' as const,
  direction: 'higher' as const,
  ...row,
});

/** An old sheet and a new one for the north; Elder has no seed cost yet. */
async function insertPriceSheets(db: Database, world: SmallWorld): Promise<void> {
  const sheet = {
    cropId: world.cropId,
    regionId: world.regionIds.north,
    currency: 'CAD',
    haulagePerTonne: 15,
    dryingPerTonne: 5,
  };
  const [oldId, newId] = [randomUUID(), randomUUID()];
  await db.insert(priceSheets).values([
    { ...sheet, id: oldId, effectiveOn: '2020-10-15', priceLow: 150, priceMiddle: 180, priceHigh: 200 },
    { ...sheet, id: newId, effectiveOn: '2026-10-15', priceLow: 220, priceMiddle: 260, priceHigh: 300 },
    { ...sheet, id: randomUUID(), effectiveOn: '2099-10-15', priceLow: 1, priceMiddle: 1, priceHigh: 1 },
  ]);
  await db.insert(seedCosts).values(
    [oldId, newId].flatMap((priceSheetId) =>
      varietyNames
        .filter((name) => name !== 'Elder')
        .map((name, i) => ({
          priceSheetId,
          varietyId: idIn(world.varietyIds, name),
          seedPerHectare: 60 + 6 * i,
          treatmentPerHectare: 11,
          royaltyPerHectare: i === 3 ? 6.5 : 0,
        })),
    ),
  );
}

export type PlantedTrial = {
  site: string;
  season: number;
  entries: readonly string[];
  reps?: number;
  /** t/ha */
  yieldOf: (entry: string, rep: number) => number;
  proteinOf?: (entry: string, rep: number) => number;
  lodgingOf?: (entry: string, rep: number) => number;
  management?: TrialContent['management'];
};

/** Stores a trial in complete blocks as a draft. */
export async function plantTrial(db: Database, world: SmallWorld, planted: PlantedTrial): Promise<string> {
  const { site, season, entries, reps = 4 } = planted;
  const id = randomUUID();
  const content: TrialContent = {
    format: 1,
    cropSlug: 'barley',
    siteSlug: site,
    season,
    name: `${site} ${season}`,
    design: 'rcbd',
    kind: 'plots',
    alpha: 0.05,
    management: planted.management ?? {},
    sownOn: null,
    harvestedOn: null,
    entries: entries.map((label) => ({ label, varietyName: label, isCheck: label === 'Anchor' })),
    plots: Array.from({ length: reps }, (_, rep) =>
      entries.map((entry, i) => ({
        plotNumber: String((rep + 1) * 100 + i + 1),
        entry,
        rep: String(rep + 1),
        block: String(rep + 1),
        row: rep + 1,
        col: i + 1,
        mainLevel: null,
        factorLevels: null,
        excludedReason: null,
        values: {
          yield: planted.yieldOf(entry, rep),
          ...(planted.proteinOf && { protein: planted.proteinOf(entry, rep) }),
          ...(planted.lodgingOf && { lodging: planted.lodgingOf(entry, rep) }),
        },
      })),
    ).flat(),
    summary: [],
  };
  await insertTrialContents(db, [
    {
      id,
      cropId: world.cropId,
      siteId: idIn(world.siteIds, site),
      state: 'draft',
      createdBy: null,
      content,
      varietyIds: world.varietyIds,
      traitIds: world.traitIds,
    },
  ]);
  return id;
}

/** Stores a trial and publishes it. */
export async function publishPlanted(
  db: Database,
  world: SmallWorld,
  planted: PlantedTrial,
): Promise<string> {
  const trialId = await plantTrial(db, world, planted);
  await publishTrial(db, { trialId, authorId: null, reason: 'first results', revision: 1 });
  return trialId;
}

/** Publishes a trial at Elm in each season, in which all varieties yield alike but for the plots' noise. */
export async function publishLevelSeasons(
  db: Database,
  world: SmallWorld,
  seasons: readonly number[],
): Promise<string[]> {
  const trialIds: string[] = [];
  for (const season of seasons)
    trialIds.push(
      await publishPlanted(db, world, {
        site: 'elm',
        season,
        entries: varietyNames,
        yieldOf: (entry, rep) => 5 + 0.4 * noise(rep, season, entry.charCodeAt(0)),
      }),
    );
  return trialIds;
}

/** Publishes the working copy again, or withdraws the trial. */
export async function republish(db: Database, trialId: string): Promise<void> {
  await publishTrial(db, {
    trialId,
    authorId: null,
    reason: 'corrected',
    revision: await revisionOf(db, trialId),
  });
}

export async function withdraw(db: Database, trialId: string): Promise<void> {
  await withdrawTrial(db, {
    trialId,
    authorId: null,
    reason: 'drifted',
    revision: await revisionOf(db, trialId),
  });
}

async function revisionOf(db: Database, trialId: string): Promise<number> {
  const [row] = await db.select({ revision: trials.revision }).from(trials).where(eq(trials.id, trialId));
  if (row === undefined) throw new Error('no such trial');
  return row.revision;
}

/** The id behind a name of the small world. */
export function idIn(ids: ReadonlyMap<string, string>, name: string): string {
  const id = ids.get(name);
  if (id === undefined) throw new Error(`the small world has no ${name}`);
  return id;
}
