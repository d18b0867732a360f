import { Socket } from 'node:net';
import { drizzle, type NodePgDatabase } from 'drizzle-orm/node-postgres';
import pg from 'pg';
import * as accounts from '#drizzle/schema/accounts.ts';
import * as audit from '#drizzle/schema/audit.ts';
import * as crops from '#drizzle/schema/crops.ts';
import * as geography from '#drizzle/schema/geography.ts';
import * as outbox from '#drizzle/schema/outbox.ts';
import * as priceSheets from '#drizzle/schema/price-sheets.ts';
import * as trials from '#drizzle/schema/trials.ts';
import * as usualVariances from '#drizzle/schema/usual-variances.ts';
import * as weighUps from '#drizzle/schema/weigh-ups.ts';

const schema = {
  ...accounts,
  ...audit,
  ...crops,
  ...geography,
  ...outbox,
  ...priceSheets,
  ...trials,
  ...usualVariances,
  ...weighUps,
};

export type Database = NodePgDatabase<typeof schema>;
/** A transaction offers what the database does, so stores take either. */
export type DatabaseOrTransaction = Database | Parameters<Parameters<Database['transaction']>[0]>[0];

/** Milliseconds that a request waits for its database. */
export type DatabaseWaits = {
  /** For the line to its server: what takes longer is away. */
  reach: number;
  /** For a connection, new or taken by others, of a server that was reached: a busy machine is slow, not away. */
  turn: number;
};

const usualWaits: DatabaseWaits = { reach: 3000, turn: 15_000 };

/** A socket that fails, as the operating system would much later, when it is not connected in time. */
export function openSocketWithin(ms: number): Socket {
  const socket = new Socket();
  const tooLong = setTimeout(
    () => socket.destroy(Object.assign(new Error(`not reached in ${ms} ms`), { code: 'ETIMEDOUT' })),
    ms,
  );
  const settle = (): void => clearTimeout(tooLong);
  return socket.once('connect', settle).once('close', settle);
}

/**
 * A pool of connections and Drizzle on top of it. A lost connection is replaced at the next query:
 * the server outlives its database.
 * @param onIdleError told of connections that break while nobody uses them; without a listener they would end the process
 */
export function connectDatabase(
  url: string,
  onIdleError: (error: Error) => void,
  waits = usualWaits,
): { db: Database; pool: pg.Pool; close: () => Promise<void> } {
  const pool = new pg.Pool({
    connectionString: url,
    max: 10,
    connectionTimeoutMillis: waits.turn,
    stream: () => openSocketWithin(waits.reach),
    idleTimeoutMillis: 30_000,
    statement_timeout: 30_000,
  });
  pool.on('error', onIdleError);
  return { db: drizzle(pool, { schema }), pool, close: () => pool.end() };
}

/** SQLSTATE of a failed query, through Drizzle's wrapping; null when the failure came from elsewhere. */
export function sqlStateOf(error: unknown): string | null {
  for (let at: unknown = error; at instanceof Error; at = at.cause) {
    if (at instanceof pg.DatabaseError && at.code !== undefined) return at.code;
  }
  return null;
}

/** Whether a failed query broke a unique constraint: what it was to write is there already. */
export const isUniqueViolation = (error: unknown): boolean => sqlStateOf(error) === '23505';

const connectionCodes = new Set(['ECONNREFUSED', 'ECONNRESET', 'ENOTFOUND', 'ETIMEDOUT', 'EPIPE']);
/** Shutting down, starting up, crashed, too many connections, connection failures. */
const awayStates = /^(57P0[123]|53300|08...)$/;

/** Whether a failure means that the database cannot be reached now, so that trying again later makes sense. */
export function isDatabaseAway(error: unknown): boolean {
  for (let at: unknown = error; at instanceof Error; at = at.cause) {
    if (at instanceof AggregateError && at.errors.some(isDatabaseAway)) return true;
    const code = 'code' in at && typeof at.code === 'string' ? at.code : '';
    if (connectionCodes.has(code) || awayStates.test(code)) return true;
    if (/Connection terminated|connection timeout/i.test(at.message)) return true;
  }
  return false;
}

/** Whether every connection of the pool was taken for so long that a query gave up waiting for its turn. */
export function isPoolTaken(error: unknown): boolean {
  for (let at: unknown = error; at instanceof Error; at = at.cause) {
    if (at.message === 'timeout exceeded when trying to connect') return true;
  }
  return false;
}
