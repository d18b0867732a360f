import { connectDatabase } from '#server/db.ts';
import { importUsage, runImport } from './run-import.ts';

/** `npm run trials:import`: takes a file of plots into the database of DATABASE_URL. */
async function main(): Promise<number> {
  const url = process.env['DATABASE_URL'];
  const args = process.argv.slice(2);
  if (url === undefined || args.length === 0 || args.includes('--help')) {
    console.error(importUsage);
    return 1;
  }
  const { db, close } = connectDatabase(url, (error) => console.error(error.message));
  try {
    return await runImport(db, args, { say: console.log, refuse: console.error });
  } finally {
    await close();
  }
}

process.exitCode = await main();
