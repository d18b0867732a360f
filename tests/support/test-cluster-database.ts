import pg from 'pg';

/** The migrated database without rows, and the one with the demo in it. */
export const emptyTemplate = 'empty_template';
export const demoTemplate = 'demo_template';

/** Any fixed numbers: what several test files want at once is made once. */
const demoLock = 811_402;

/**
 * Creates a database in the cluster.
 * @param clusterUrl address of any database of the cluster, as superuser
 * @param template name of a database to copy, to which nobody is connected
 * @returns its address
 */
export async function createDatabase(
  clusterUrl: string,
  name: string,
  template = 'template0',
): Promise<string> {
  await runIn(clusterUrl, (client) => client.query(`create database ${name} template ${template}`));
  return addressOf(clusterUrl, name);
}

/** Ends all connections to a database and deletes it. */
export async function dropDatabase(clusterUrl: string, name: string): Promise<void> {
  await runIn(clusterUrl, (client) => client.query(`drop database if exists ${name} with (force)`));
}

/** Makes the demo's template if this run has not made it yet; others that ask meanwhile wait. */
export async function ensureDemoTemplate(
  clusterUrl: string,
  fill: (url: string) => Promise<void>,
): Promise<void> {
  await runIn(clusterUrl, async (client) => {
    await client.query('select pg_advisory_lock($1)', [demoLock]);
    const made = await client.query('select 1 from pg_database where datname = $1', [demoTemplate]);
    if (made.rowCount === 1) return;
    const making = `${demoTemplate}_in_the_making`;
    await client.query(`drop database if exists ${making} with (force)`);
    await client.query(`create database ${making} template ${emptyTemplate}`);
    await fill(addressOf(clusterUrl, making));
    await client.query(`alter database ${making} rename to ${demoTemplate}`);
  });
}

function addressOf(clusterUrl: string, name: string): string {
  const url = new URL(clusterUrl);
  url.pathname = `/${name}`;
  return url.href;
}

async function runIn(url: string, work: (client: pg.Client) => Promise<unknown>): Promise<void> {
  const client = new pg.Client({ connectionString: url });
  await client.connect();
  try {
    await work(client);
  } finally {
    await client.end();
  }
}
