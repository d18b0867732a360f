import { userRegions, users } from '#drizzle/schema/accounts.ts';
import { crops, traits, varieties } from '#drizzle/schema/crops.ts';
import { places, regions, sites } from '#drizzle/schema/geography.ts';
import { priceSheets, seedCosts } from '#drizzle/schema/price-sheets.ts';
import { hashPassword } from '#server/accounts/password.ts';
import type { DatabaseOrTransaction } from '#server/db.ts';
import { demoAccounts, type DemoAccountKey } from './demo-accounts.ts';
import { demoCrops } from './demo-crops.ts';
import type { DemoPriceSheet } from './demo-prices.ts';
import { demoSeed, yieldComponents } from './demo-settings.ts';
import { openRandomSource } from './random-source.ts';
import { velmarRegions, velmarSites, velmarTowns } from './velmar-geography.ts';

/** Ids of what the demo's trials, sheets and weigh-ups refer to, by slug or name. */
export type CatalogueIds = {
  regions: ReadonlyMap<string, string>;
  sites: ReadonlyMap<string, string>;
  crops: ReadonlyMap<string, string>;
  /** By crop slug, then by variety name or trait slug. */
  varieties: ReadonlyMap<string, ReadonlyMap<string, string>>;
  traits: ReadonlyMap<string, ReadonlyMap<string, string>>;
  accounts: Readonly<Record<DemoAccountKey, string>>;
};

/** The id of a thing of the demo: the same at every run, so that addresses of the demo stay good. */
export function demoId(label: string): string {
  return openRandomSource(demoSeed, `id ${label}`).uuid();
}

/** The ids of the demo, known without asking the database. */
export function listDemoIds(): CatalogueIds {
  return {
    regions: mapIds(velmarRegions, (region) => region.slug, 'region'),
    sites: mapIds(velmarSites, (site) => site.slug, 'site'),
    crops: mapIds(demoCrops, (crop) => crop.slug, 'crop'),
    varieties: new Map(
      demoCrops.map((crop) => [crop.slug, mapIds(crop.varieties, (one) => one.name, `variety ${crop.slug}`)]),
    ),
    traits: new Map(
      demoCrops.map((crop) => [crop.slug, mapIds(crop.traits, (one) => one.slug, `trait ${crop.slug}`)]),
    ),
    accounts: {
      advisor: demoId('account advisor'),
      conseillere: demoId('account conseillere'),
      agronomist: demoId('account agronomist'),
      agronome: demoId('account agronome'),
      administrator: demoId('account administrator'),
    },
  };
}

/** Stores regions, sites, towns, crops with traits and varieties, and accounts. */
export async function storeDemoCatalogue(tx: DatabaseOrTransaction, ids: CatalogueIds): Promise<void> {
  await tx
    .insert(regions)
    .values(velmarRegions.map((region) => ({ id: pick(ids.regions, region.slug), ...region })));
  await tx.insert(sites).values(
    velmarSites.map(({ region, ...site }) => ({
      id: pick(ids.sites, site.slug),
      regionId: pick(ids.regions, region),
      ...site,
    })),
  );
  await tx.insert(places).values(
    velmarTowns.map(({ region, ...town }) => ({
      id: demoId(`town ${town.name}`),
      regionId: pick(ids.regions, region),
      ...town,
    })),
  );
  await storeCrops(tx, ids.crops);
  await storeAccounts(tx, ids);
}

async function storeCrops(tx: DatabaseOrTransaction, cropIds: ReadonlyMap<string, string>): Promise<void> {
  await tx.insert(crops).values(
    demoCrops.map((crop) => ({
      id: pick(cropIds, crop.slug),
      slug: crop.slug,
      nameEn: crop.nameEn,
      nameFr: crop.nameFr,
      eppoCode: crop.eppoCode,
      standardMoisturePercent: crop.standardMoisturePercent,
      bushelWeightLb: crop.bushelWeightLb,
      cvLimitPercent: crop.cvLimitPercent,
      typicalYield: yieldComponents[crop.slug].mean,
    })),
  );
  await tx.insert(traits).values(
    demoCrops.flatMap((crop) =>
      crop.traits.map(({ grown: _grown, measured: _measured, ...trait }, position) => ({
        id: demoId(`trait ${crop.slug} ${trait.slug}`),
        cropId: pick(cropIds, crop.slug),
        position,
        ...trait,
      })),
    ),
  );
  await tx.insert(varieties).values(
    demoCrops.flatMap((crop) =>
      crop.varieties.map((variety) => ({
        id: demoId(`variety ${crop.slug} ${variety.name}`),
        cropId: pick(cropIds, crop.slug),
        name: variety.name,
        aliases: variety.alias === undefined ? [] : [variety.alias],
        isCheck: variety.isCheck ?? false,
        firstSeason: variety.from,
      })),
    ),
  );
}

async function storeAccounts(tx: DatabaseOrTransaction, ids: CatalogueIds): Promise<void> {
  // Object.keys forgets the literal types; the table has exactly these keys.
  const keys = Object.keys(demoAccounts) as DemoAccountKey[];
  const rows = await Promise.all(
    keys.map(async (key) => {
      const { name, email, phone, role, language, password } = demoAccounts[key];
      const passwordHash = await hashPassword(password);
      return { id: ids.accounts[key], name, email, phone, role, language, passwordHash };
    }),
  );
  await tx.insert(users).values(rows);
  await tx.insert(userRegions).values(
    keys.flatMap((key) =>
      demoAccounts[key].regions.map((region) => ({
        userId: ids.accounts[key],
        regionId: pick(ids.regions, region),
      })),
    ),
  );
}

/** Stores the price sheets with their seed costs. */
export async function storeDemoPrices(
  tx: DatabaseOrTransaction,
  sheets: readonly DemoPriceSheet[],
  ids: CatalogueIds,
): Promise<void> {
  const idOf = (sheet: DemoPriceSheet): string => demoId(`price sheet ${sheet.crop} ${sheet.region}`);
  await tx.insert(priceSheets).values(
    sheets.map(({ crop, region, seedCosts: _, ...sheet }) => ({
      ...sheet,
      id: demoId(`price sheet ${crop} ${region}`),
      cropId: pick(ids.crops, crop),
      regionId: pick(ids.regions, region),
    })),
  );
  await tx.insert(seedCosts).values(
    sheets.flatMap((sheet) =>
      sheet.seedCosts.map(({ variety, ...cost }) => ({
        ...cost,
        priceSheetId: idOf(sheet),
        varietyId: pick(ids.varieties.get(sheet.crop) ?? new Map<string, string>(), variety),
      })),
    ),
  );
}

function mapIds<T>(items: readonly T[], keyOf: (item: T) => string, kind: string): Map<string, string> {
  return new Map(items.map((item) => [keyOf(item), demoId(`${kind} ${keyOf(item)}`)]));
}

/** @throws Error when the demo's own lists do not agree */
export function pick(ids: ReadonlyMap<string, string>, key: string): string {
  const id = ids.get(key);
  if (id === undefined) throw new Error(`The demo refers to ${key}, which it does not have`);
  return id;
}
