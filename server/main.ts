import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { pino } from 'pino';
import { buildApp } from './app.ts';
import { closeComputing } from './computing/compute.ts';
import { connectDatabase } from './db.ts';
import type { ServerSettings } from './env.ts';
import { startMailWorker } from './mail/outbox-worker.ts';

export { readSettings } from './env.ts';
export { migrateDatabase } from './migrate-database.ts';

export type RunningServer = { url: string; close: () => Promise<void> };

/**
 * Connects to the database, builds the application and listens.
 * @throws when the port is taken (EADDRINUSE) or the address cannot be bound
 */
export async function startServer(settings: ServerSettings): Promise<RunningServer> {
  const logger = pino({ level: settings.logLevel });
  const {
    db,
    pool,
    close: closeDatabase,
  } = connectDatabase(settings.databaseUrl, (error) =>
    logger.warn({ err: error }, 'an idle database connection was lost'),
  );
  const mailWorker = settings.mail === null ? null : startMailWorker(db, settings.mail, logger);
  const server = createServer(buildApp(db, pool, settings, logger, () => mailWorker?.kick()));
  try {
    await listen(server, settings);
  } catch (error) {
    await mailWorker?.close();
    await closeDatabase();
    throw error;
  }
  // listen() on a host and port gives an AddressInfo, never a pipe's name.
  const { port } = server.address() as AddressInfo;
  return {
    url: `http://${settings.host === '127.0.0.1' ? 'localhost' : settings.host}:${port}`,
    close: async () => {
      const closed = new Promise<void>((resolve) => server.close(() => resolve()));
      server.closeIdleConnections();
      const giveUp = setTimeout(() => server.closeAllConnections(), 3000);
      await closed;
      clearTimeout(giveUp);
      await mailWorker?.close();
      await closeComputing();
      await closeDatabase();
    },
  };
}

function listen(server: Server, settings: ServerSettings): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once('error', reject);
    server.listen(settings.port, settings.host, () => resolve());
  });
}
