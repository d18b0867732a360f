import { pino } from 'pino';
import supertest from 'supertest';
import { users, userRegions } from '#drizzle/schema/accounts.ts';
import type { Role } from '#shared/account.ts';
import { hashPassword } from '#server/accounts/password.ts';
import { buildApp } from '#server/app.ts';
import { readSettings } from '#server/env.ts';
import { createDemoDatabase, createTestDatabase, type TestDatabase } from '#tests/support/test-database.ts';

/** The password of every account that a test makes. */
export const testPassword = 'gravel and chalk 7';

/** Argon2 takes its time on purpose: the one password is hashed once a file. */
const testPasswordHash = hashPassword(testPassword);

export type Agent = ReturnType<typeof supertest.agent>;

export type ApiWorld = {
  database: TestDatabase;
  app: ReturnType<typeof buildApp>;
  /** A browser that nobody has signed in with yet. */
  visitor: () => Agent;
  /** Makes an account and signs in with it. */
  signInAs: (role: Role, options?: { email?: string; regionIds?: string[] }) => Promise<SignedIn>;
  /** Signs in with an account that is there. */
  signIn: (email: string, password?: string) => Promise<Agent>;
  close: () => Promise<void>;
};

export type SignedIn = { agent: Agent; id: string; email: string };

/** The API on a database of its own: empty, or with the demo in it; with further settings where a test asks. */
export async function openApiWorld(
  content: 'empty' | 'demo',
  environment: NodeJS.ProcessEnv = {},
): Promise<ApiWorld> {
  const database = content === 'demo' ? await createDemoDatabase() : await createTestDatabase();
  return buildWorld(database, environment);
}

/** The API on a given database, which the world closes when it is closed. */
export function buildWorld(database: TestDatabase, environment: NodeJS.ProcessEnv = {}): ApiWorld {
  const settings = readSettings(
    { DATABASE_URL: database.url, SESSION_SECRET: 'a secret of no worth, for tests alone', ...environment },
    null,
  );
  const app = buildApp(database.db, database.pool, settings, pino({ level: 'silent' }));
  let made = 0;
  const signIn = async (email: string, password = testPassword): Promise<Agent> => {
    const agent = supertest.agent(app);
    await agent.post('/api/session').send({ email, password }).expect(200);
    return agent;
  };
  return {
    database,
    app,
    visitor: () => supertest.agent(app),
    signIn,
    signInAs: async (role, options = {}) => {
      made += 1;
      const email = options.email ?? `${role}-${made}@example.org`;
      const id = await insertUser(database, role, email, options.regionIds ?? []);
      return { agent: await signIn(email), id, email };
    },
    close: () => database.close(),
  };
}

async function insertUser(
  { db }: TestDatabase,
  role: Role,
  email: string,
  regionIds: string[],
): Promise<string> {
  const [row] = await db
    .insert(users)
    .values({ name: `Test ${role}`, email, role, passwordHash: await testPasswordHash })
    .returning({ id: users.id });
  if (row === undefined) throw new Error('the account was not stored');
  if (regionIds.length > 0)
    await db.insert(userRegions).values(regionIds.map((regionId) => ({ userId: row.id, regionId })));
  return row.id;
}
