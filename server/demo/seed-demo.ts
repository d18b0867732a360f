import { eq, inArray, sql } from 'drizzle-orm';
import { users } from '#drizzle/schema/accounts.ts';
import { usualVariances } from '#drizzle/schema/usual-variances.ts';
import type { Language, Role } from '#shared/account.ts';
import type { Database } from '#server/db.ts';
import { estimateCropVariances } from '#server/usual-variances/estimate-crop.ts';
import { listOwnWeighUps } from '#server/weigh-up/weigh-up-store.ts';
import { demoAccounts } from './demo-accounts.ts';
import type { DemoPriceSheet } from './demo-prices.ts';
import { generateDemo } from './generate-demo.ts';
import {
  listDemoIds,
  storeDemoCatalogue,
  storeDemoPrices,
  type CatalogueIds,
} from './store-demo-catalogue.ts';
import { storeDemoTrials } from './store-demo-trials.ts';
import { storeDemoWeighUp } from './store-demo-weigh-up.ts';

export type SeededDemo = {
  /** Whether this call filled the database; false where it held trials or accounts already. */
  isFresh: boolean;
  accounts: { role: Role; name: string; email: string; password: string; language: Language }[];
  /** Path of a demo grower link; null where none was made by this call, since a link's secret is never stored. */
  growerPath: string | null;
};

/** Any fixed number: two starts at once take turns, and the second finds the database filled. */
const seedLock = 7_240_312;

/**
 * Fills an empty database with the demo of Velmar. A database that holds trials, regions or accounts is left as it is;
 * of the demo's accounts those are told that it has.
 */
export async function seedDemo(db: Database): Promise<SeededDemo> {
  const ids = listDemoIds();
  const { trials, priceSheets } = generateDemo();
  const isFresh = await db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(${seedLock})`);
    const found = await tx.execute<{ filled: boolean }>(
      sql`select exists (select from trials) or exists (select from users) or exists (select from regions) as filled`,
    );
    if (found.rows[0]?.filled !== false) return false;
    await storeDemoCatalogue(tx, ids);
    await storeDemoPrices(tx, priceSheets, ids);
    await storeDemoTrials(tx, trials, ids);
    return true;
  });
  await learnUsualVariances(db, ids);
  const accounts = await findDemoAccounts(db);
  return { isFresh, accounts, growerPath: await giveAdvisorWeighUp(db, priceSheets, ids) };
}

/**
 * What an organisation does as soon as it has trials enough: its own usual variances in place of the crops' defaults.
 * Only in a demo whose trials stand and for which nobody has asked yet.
 */
async function learnUsualVariances(db: Database, ids: CatalogueIds): Promise<void> {
  const [agronomist] = await db
    .select({ id: users.id })
    .from(users)
    .where(eq(users.id, ids.accounts.agronomist));
  const known = await db.select({ id: usualVariances.id }).from(usualVariances).limit(1);
  if (agronomist === undefined || known.length > 0) return;
  for (const cropId of ids.crops.values()) await estimateCropVariances(db, cropId, agronomist.id);
}

/** After the trials, not with them: so a start that was killed in between is made good by the next. */
async function giveAdvisorWeighUp(
  db: Database,
  priceSheets: readonly DemoPriceSheet[],
  ids: CatalogueIds,
): Promise<string | null> {
  const [advisor] = await db.select({ id: users.id }).from(users).where(eq(users.id, ids.accounts.advisor));
  if (advisor === undefined || (await listOwnWeighUps(db, advisor.id)).length > 0) return null;
  return (await storeDemoWeighUp(db, priceSheets, ids)).growerPath;
}

/** The demo's accounts that this database knows under their addresses. */
async function findDemoAccounts(db: Database): Promise<SeededDemo['accounts']> {
  const all = Object.values(demoAccounts);
  const known = await db
    .select({ email: users.email })
    .from(users)
    .where(
      inArray(
        users.email,
        all.map((account) => account.email),
      ),
    );
  const emails = new Set(known.map((row) => row.email));
  return all
    .filter((account) => emails.has(account.email))
    .map(({ role, name, email, password, language }) => ({ role, name, email, password, language }));
}
