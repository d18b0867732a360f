import { z } from 'zod';
import { and, desc, eq, lte, sql } from 'drizzle-orm';
import { crops } from '#drizzle/schema/crops.ts';
import { priceSheets, seedCosts } from '#drizzle/schema/price-sheets.ts';
import { qualityRule, seedCost, type MoneyAssumptions, type SeedCost } from '#shared/money.ts';
import type { Database } from '#server/db.ts';

/** The newest price sheet of a crop in a region that is in force today, as assumptions; null when there is none. */
export async function loadMoneyDefaults(
  db: Database,
  cropId: string,
  regionId: string,
): Promise<MoneyAssumptions | null> {
  const [found] = await db
    .select({ sheet: priceSheets, standardMoisturePercent: crops.standardMoisturePercent })
    .from(priceSheets)
    .innerJoin(crops, eq(crops.id, priceSheets.cropId))
    .where(
      and(
        eq(priceSheets.cropId, cropId),
        eq(priceSheets.regionId, regionId),
        lte(priceSheets.effectiveOn, sql`current_date`),
      ),
    )
    .orderBy(desc(priceSheets.effectiveOn))
    .limit(1);
  if (found === undefined) return null;
  const { sheet, standardMoisturePercent } = found;
  const costs = await db.select().from(seedCosts).where(eq(seedCosts.priceSheetId, sheet.id));
  return {
    currency: sheet.currency,
    priceLow: sheet.priceLow,
    priceMiddle: sheet.priceMiddle,
    priceHigh: sheet.priceHigh,
    haulagePerTonne: sheet.haulagePerTonne,
    dryingPerTonne: sheet.dryingPerTonne,
    ...(sheet.harvestPerTonne !== null && { harvestPerTonne: sheet.harvestPerTonne }),
    ...(sheet.dryingPerPoint !== null && { dryingPerPoint: sheet.dryingPerPoint }),
    standardMoisturePercent,
    qualityRules: z.array(qualityRule).parse(sheet.qualityRules),
    seedCosts: Object.fromEntries(costs.map((row) => [row.varietyId, toSeedCost(row)])),
    priceSheetDate: sheet.effectiveOn,
  };
}

/** What the sheet does not say of a variety is left out. */
function toSeedCost({ priceSheetId: _, varietyId: _of, ...row }: typeof seedCosts.$inferSelect): SeedCost {
  return seedCost.parse(Object.fromEntries(Object.entries(row).filter(([, value]) => value !== null)));
}
