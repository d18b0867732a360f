/**
 * The database that a command works on: DATABASE_URL where it is set, else the project's private one,
 * which is started for as long as the command needs it unless a server runs it already.
 * Call `close` at the end, also after a failure. The schema may be older than the code: migrate first.
 */
export function openDatabaseUrl(): Promise<{ url: string; close: () => Promise<void> }>;
