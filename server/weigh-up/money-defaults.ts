import { and, desc, eq, lte, sql } from 'drizzle-orm';
import { priceSheets, seedCosts } from '#drizzle/schema/price-sheets.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import type { Database } from '#server/db.ts';

/** The newest price sheet of a crop in a region that is in force today, as assumptions; null when there is none. */
export async function loadMoneyDefaults(
  db: Database,
  cropId: string,
  regionId: string,
): Promise<MoneyAssumptions | null> {
  const [sheet] = await db
    .select()
    .from(priceSheets)
    .where(
      and(
        eq(priceSheets.cropId, cropId),
        eq(priceSheets.regionId, regionId),
        lte(priceSheets.effectiveOn, sql`current_date`),
      ),
    )
    .orderBy(desc(priceSheets.effectiveOn))
    .limit(1);
  if (sheet === undefined) return null;
  const costs = await db.select().from(seedCosts).where(eq(seedCosts.priceSheetId, sheet.id));
  return {
    currency: sheet.currency,
    priceLow: sheet.priceLow,
    priceMiddle: sheet.priceMiddle,
    priceHigh: sheet.priceHigh,
    haulagePerTonne: sheet.haulagePerTonne,
    dryingPerTonne: sheet.dryingPerTonne,
    seedCosts: Object.fromEntries(
      costs.map(({ varietyId, seedPerHectare, treatmentPerHectare, royaltyPerHectare }) => [
        varietyId,
        { seedPerHectare, treatmentPerHectare, royaltyPerHectare },
      ]),
    ),
    priceSheetDate: sheet.effectiveOn,
  };
}
