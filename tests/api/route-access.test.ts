import { eq } from 'drizzle-orm';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { users } from '#drizzle/schema/accounts.ts';
import * as account from '#shared/account.ts';
import * as affectedCopy from '#shared/affected-copy.ts';
import * as catalogue from '#shared/catalogue.ts';
import type { Contract } from '#shared/contract.ts';
import * as growerCopy from '#shared/grower-copy.ts';
import * as trialDesk from '#shared/trial-desk.ts';
import * as trial from '#shared/trial.ts';
import * as usualVariance from '#shared/usual-variance.ts';
import * as weighUpDraft from '#shared/weigh-up-draft.ts';
import * as weighUpRecord from '#shared/weigh-up-record.ts';
import * as weighUp from '#shared/weigh-up.ts';
import { openApiWorld, type Agent, type ApiWorld } from './api-world.ts';

type Who = 'anonymous' | 'advisor' | 'agronomist' | 'administrator' | 'suspended';

const everyone: Who[] = ['anonymous', 'advisor', 'agronomist', 'administrator', 'suspended'];
const signedIn: Who[] = ['advisor', 'agronomist', 'administrator'];
const weighers: Who[] = ['advisor', 'agronomist'];

/** Who may call what, as the product says; written by hand, so that a contract that says otherwise fails. */
const allowed: Record<string, Who[]> = {
  'POST /api/session': everyone,
  'DELETE /api/session': everyone,
  'GET /api/me': everyone,
  'PATCH /api/me': signedIn,
  'GET /api/accounts': ['administrator'],
  'POST /api/accounts': ['administrator'],
  'PATCH /api/accounts/:accountId': ['administrator'],
  'GET /api/audit-events': ['administrator'],
  'GET /api/catalogue': signedIn,
  'GET /api/trials': signedIn,
  'GET /api/trials/:trialId': signedIn,
  'GET /api/trials/:trialId/analysis': signedIn,
  'GET /api/desk/trials': ['agronomist'],
  'POST /api/desk/import-checks': ['agronomist'],
  'POST /api/desk/imports': ['agronomist'],
  'GET /api/desk/trials/:trialId': ['agronomist'],
  'GET /api/desk/trials/:trialId/analysis': ['agronomist'],
  'PATCH /api/desk/trials/:trialId/plots': ['agronomist'],
  'POST /api/desk/trials/:trialId/publications': ['agronomist'],
  'POST /api/desk/trials/:trialId/withdrawals': ['agronomist'],
  'GET /api/usual-variances': weighers,
  'POST /api/usual-variances': ['agronomist'],
  'GET /api/candidates': weighers,
  'GET /api/weigh-up-drafts': weighers,
  'POST /api/weigh-up-drafts': weighers,
  'PUT /api/weigh-up-drafts/:draftId': weighers,
  'DELETE /api/weigh-up-drafts/:draftId': weighers,
  'GET /api/weigh-ups': weighers,
  'POST /api/weigh-ups': weighers,
  'GET /api/weigh-ups/:weighUpId': weighers,
  'PUT /api/weigh-ups/:weighUpId': weighers,
  'GET /api/weigh-ups/:weighUpId/decision': weighers,
  'PUT /api/weigh-ups/:weighUpId/decision': weighers,
  'PUT /api/weigh-ups/:weighUpId/archived': weighers,
  'PUT /api/weigh-ups/:weighUpId/ticked-off': weighers,
  'POST /api/weigh-ups/:weighUpId/duplicates': weighers,
  'GET /api/weigh-ups/:weighUpId/grower-copies': weighers,
  'POST /api/weigh-ups/:weighUpId/grower-copies': weighers,
  'DELETE /api/grower-copies/:copyId': weighers,
  'POST /api/grower-copies/:copyId/mails': weighers,
  'POST /api/grower-copies/:copyId/mail-retries': weighers,
  'GET /api/affected-copies': weighers,
  'POST /api/grower-copies/:copyId/fresh': weighers,
};

const isContract = (value: unknown): value is Contract =>
  typeof value === 'object' && value !== null && 'method' in value && 'access' in value && 'reply' in value;

const contracts = [
  account,
  affectedCopy,
  catalogue,
  growerCopy,
  trialDesk,
  trial,
  usualVariance,
  weighUp,
  weighUpDraft,
  weighUpRecord,
]
  .flatMap((module) => Object.values(module))
  .filter(isContract);

const nameOf = ({ method, path }: Pick<Contract, 'method' | 'path'>): string => `${method} ${path}`;

let world: ApiWorld;
const agents = new Map<Who, Agent>();
beforeAll(async () => {
  world = await openApiWorld('empty');
  agents.set('anonymous', world.visitor());
  for (const role of account.roles) agents.set(role, (await world.signInAs(role)).agent);
  // The session is left on purpose: the account itself must close the door.
  const suspended = await world.signInAs('administrator');
  await world.database.db.update(users).set({ status: 'suspended' }).where(eq(users.id, suspended.id));
  agents.set('suspended', suspended.agent);
});
afterAll(() => world.close());

test('every contract has a row here, and every row a contract', () => {
  expect(contracts.map(nameOf).sort()).toEqual(Object.keys(allowed).sort());
});

/** Parts of Express 5's router that tell what is registered. */
type Layer = {
  route?: { path: string; methods: Record<string, boolean> };
  handle?: { stack?: Layer[] };
};

function listRoutes(stack: Layer[]): string[] {
  return stack.flatMap(({ route, handle }) =>
    route === undefined
      ? listRoutes(handle?.stack ?? [])
      : Object.keys(route.methods).map((method) => `${method.toUpperCase()} ${route.path}`),
  );
}

/** What is served as a page and not as JSON; whoever has a copy's link may open it. */
const pages = ['GET /copy/:token', 'GET /copy/:token/answer', 'GET /copy/:token/pdf'];

test('the application serves nothing but the contracts, its health and its pages', () => {
  // The router is a function with a stack; its type does not say so.
  const { stack } = world.app.router as unknown as { stack: Layer[] };
  const served = [...new Set(listRoutes(stack))].sort();
  expect(served).toEqual([...Object.keys(allowed), 'GET /api/health', ...pages].sort());
});

describe.each(everyone)('%s', (who) => {
  test.each(contracts.map((contract) => [nameOf(contract), contract] as const))(
    '%s',
    async (name, { method, path }) => {
      const agent = agents.get(who);
      if (agent === undefined) throw new Error(`nobody is ${who}`);
      // Signing out would end the session that the rows after it need.
      if (name === 'DELETE /api/session' && who !== 'anonymous') return;
      const url = path.replace(/:\w+/g, '00000000-0000-4000-8000-000000000000');
      const verb = method.toLowerCase() as 'get' | 'post' | 'put' | 'patch' | 'delete';
      const reply = await agent[verb](url);
      const code: unknown = reply.body.error?.code;
      if (allowed[name]?.includes(who)) {
        expect(['not-signed-in', 'not-allowed']).not.toContain(code);
        expect(reply.status).toBeLessThan(500);
        return;
      }
      const isNobody = who === 'anonymous' || who === 'suspended';
      expect([reply.status, code]).toEqual(isNobody ? [401, 'not-signed-in'] : [403, 'not-allowed']);
    },
  );
});
