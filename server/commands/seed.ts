import { connectDatabase } from '#server/db.ts';
import { seedDemo } from '#server/demo/seed-demo.ts';

/** `npm run db:seed`: fills the database of DATABASE_URL with the demo and prints its accounts. */
async function main(): Promise<number> {
  const url = process.env['DATABASE_URL'];
  if (url === undefined || url === '') {
    console.error(
      'DATABASE_URL is not set: it names the database to fill, e.g. postgres://user@localhost/gavelrow',
    );
    return 1;
  }
  const { db, close } = connectDatabase(url, (error) => console.error(error.message));
  try {
    const demo = await seedDemo(db);
    if (!demo.isFresh) {
      console.error('This database is not empty: the demo was left out.');
      return 1;
    }
    for (const account of demo.accounts) {
      console.log(`${account.role.padEnd(14)} ${account.email.padEnd(28)} ${account.password}`);
    }
    if (demo.growerPath !== null) console.log(`grower link    ${demo.growerPath}`);
    return 0;
  } finally {
    await close();
  }
}

process.exitCode = await main();
