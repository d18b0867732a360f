import { fileURLToPath } from 'node:url';
import { migrateDatabase, readSettings, startServer } from '#server/main.ts';

// The API of `npm run dev`, in a process of its own that is started afresh when a source changes.
const settings = readSettings(process.env, null);
await migrateDatabase(
  settings.databaseUrl,
  fileURLToPath(new URL('../../drizzle/migrations', import.meta.url)),
);
const server = await startServer(settings);
console.log(`API ready on ${server.url}`);

for (const signal of ['SIGINT', 'SIGTERM'] as const) {
  process.once(signal, () => {
    void server.close().then(() => process.exit(0));
  });
}
