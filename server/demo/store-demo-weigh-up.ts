import type { MoneyAssumptions } from '#shared/money.ts';
import type { Database } from '#server/db.ts';
import { makeCopy } from '#server/grower-copy/make-copy.ts';
import { insertWeighUp } from '#server/weigh-up/weigh-up-store.ts';
import { demoAccounts } from './demo-accounts.ts';
import { demoCrops } from './demo-crops.ts';
import type { DemoPriceSheet } from './demo-prices.ts';
import { pick, type CatalogueIds } from './store-demo-catalogue.ts';

const crop = 'spring-barley';
const region = 'upper-velmar';
const current = 'Tamberlow';
/** In the order in which the advisor keeps them: the last is so new that its seed has no price yet. */
const candidates = ['Quillane', 'Ostermay', 'Marrasby', 'Ilvane', 'Larkhollow'];

/** One question already asked at a kitchen table, with the copy that the grower took home. */
export async function storeDemoWeighUp(
  db: Database,
  priceSheets: readonly DemoPriceSheet[],
  ids: CatalogueIds,
): Promise<{ growerPath: string }> {
  const varieties = ids.varieties.get(crop) ?? new Map<string, string>();
  const sheet = priceSheets.find((one) => one.crop === crop && one.region === region);
  if (sheet === undefined) throw new Error(`The demo has no price sheet for ${crop} in ${region}`);
  const advisor = { ...demoAccounts.advisor, id: ids.accounts.advisor };
  const weighUp = await insertWeighUp(db, advisor.id, {
    cropId: pick(ids.crops, crop),
    regionId: pick(ids.regions, region),
    seasonFrom: 2022,
    seasonTo: 2026,
    growerName: 'Joss Penhallow',
    farmName: 'Cold Acre',
    areaHectares: 120,
    // Between Penhollow and Haverlin, in the midst of the region's sites.
    ...{ farmLatitude: 47.58, farmLongitude: -38.7, farmSeasonRainMm: 320, farmHeatSumDegreeDays: 1380 },
    farmSoilTexture: 'loam',
    usualYield: 4.8,
    currentVarietyId: pick(varieties, current),
    candidateIds: candidates.map((name) => pick(varieties, name)),
    assumptions: assume(sheet, varieties),
  });
  const { path } = await makeCopy(db, advisor, weighUp.id, {
    language: 'en',
    validDays: 365,
    // Velmar lies nowhere; its days are told as those of one place, so that no copy has to say UTC.
    timeZone: 'America/Halifax',
  });
  return { growerPath: path };
}

/** The sheet as an advisor takes it over: nothing changed. */
function assume(sheet: DemoPriceSheet, varieties: ReadonlyMap<string, string>): MoneyAssumptions {
  const { crop: _, region: _in, effectiveOn, seedCosts, ...terms } = sheet;
  const moisture = demoCrops.find(({ slug }) => slug === crop)?.standardMoisturePercent;
  return {
    ...terms,
    ...(moisture !== undefined && { standardMoisturePercent: moisture }),
    seedCosts: Object.fromEntries(seedCosts.map(({ variety, ...cost }) => [pick(varieties, variety), cost])),
    priceSheetDate: effectiveOn,
  };
}
