import { drizzle } from 'drizzle-orm/node-postgres';
import { migrate } from 'drizzle-orm/node-postgres/migrator';
import pg from 'pg';

/** Any fixed number: two servers that start at once take turns. */
const migrationLock = 7_240_311;

/**
 * Brings a database to the newest schema; waits while another process does so.
 * @param url PostgreSQL connection string
 * @param folder the folder of the generated migrations
 */
export async function migrateDatabase(url: string, folder: string): Promise<void> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    await client.query('select pg_advisory_lock($1)', [migrationLock]);
    await migrate(drizzle(client), { migrationsFolder: folder });
  } finally {
    await client.end();
  }
}
