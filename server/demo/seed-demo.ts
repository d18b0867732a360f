import { sql } from 'drizzle-orm';
import type { Language, Role } from '#shared/account.ts';
import type { Database } from '#server/db.ts';
import { demoAccounts } from './demo-accounts.ts';
import { generateDemo } from './generate-demo.ts';
import { storeDemoCatalogue, storeDemoPrices } from './store-demo-catalogue.ts';
import { storeDemoTrials } from './store-demo-trials.ts';

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
 * Fills an empty database with the demo of Velmar, in one transaction. A database that holds trials, regions or accounts
 * is left as it is.
 */
export async function seedDemo(db: Database): Promise<SeededDemo> {
  const accounts = Object.values(demoAccounts).map(({ role, name, email, password, language }) => ({
    role,
    name,
    email,
    password,
    language,
  }));
  const isFresh = await db.transaction(async (tx) => {
    await tx.execute(sql`select pg_advisory_xact_lock(${seedLock})`);
    const found = await tx.execute<{ filled: boolean }>(
      sql`select exists (select from trials) or exists (select from users) or exists (select from regions) as filled`,
    );
    if (found.rows[0]?.filled !== false) return false;
    const scenario = generateDemo();
    const ids = await storeDemoCatalogue(tx);
    await storeDemoPrices(tx, scenario.priceSheets, ids);
    await storeDemoTrials(tx, scenario.trials, ids);
    return true;
  });
  return { isFresh, accounts, growerPath: null };
}
