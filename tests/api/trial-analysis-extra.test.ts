import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { TrialAnalysisView, TrialLine } from '#shared/trial.ts';
import { demoAccounts } from '#server/demo/demo-accounts.ts';
import { openApiWorld, type Agent, type ApiWorld } from './api-world.ts';

let world: ApiWorld;
let advisor: Agent;
let agronomist: Agent;
let trials: TrialLine[];

beforeAll(async () => {
  world = await openApiWorld('demo');
  const accounts = Object.values(demoAccounts);
  const signIn = async (role: string): Promise<Agent> => {
    const account = accounts.find((one) => one.role === role);
    if (account === undefined) throw new Error(`The demo has no ${role}`);
    return world.signIn(account.email, account.password);
  };
  advisor = await signIn('advisor');
  agronomist = await signIn('agronomist');
  trials = (await advisor.get('/api/trials').expect(200)).body.trials;
}, 120_000);
afterAll(() => world.close());

function find(is: (trial: TrialLine) => boolean): TrialLine {
  const found = trials.find(is);
  if (found === undefined) throw new Error('The demo has no such trial');
  return found;
}

const analyse = async (id: string, query: Record<string, string> = {}): Promise<TrialAnalysisView> =>
  (await advisor.get(`/api/trials/${id}/analysis`).query(query).expect(200)).body.analysis;

/** Grown with a drift across its columns. */
const marrowfen = () =>
  find(({ siteName, season, design }) => siteName === 'Marrowfen' && season === 2025 && design === 'rcbd');

describe('a published trial', () => {
  test('whose field drifts points to the model that follows the trend, and shows it beside the design', async () => {
    const { spatial, cautions, lsd } = await analyse(marrowfen().id, { view: 'analysis' });
    expect(spatial.map(({ code }) => code)).toEqual(['design', 'autoregressive', 'surface']);
    expect(spatial[0]?.lsd).toBe(lsd?.mean);
    const caution = cautions.find(({ code }) => code === 'spatial-trend');
    expect(caution).toMatchObject({ severity: 'warning', values: { usual: lsd?.mean } });
    expect((await analyse(marrowfen().id)).cautions).toEqual(cautions);
  });

  test('names who may be the best at the level asked for', async () => {
    const query = { comparison: 'best', trait: 'yield' };
    const { best, means, outcomes } = await analyse(marrowfen().id, query);
    expect(outcomes).toEqual([]);
    expect(best).toHaveLength(means.length);
    const may = best.filter(({ mayBeBest }) => mayBeBest).length;
    expect(may).toBeGreaterThan(0);
    expect(may).toBeLessThan(means.length);
    const strict = (await analyse(marrowfen().id, { ...query, alpha: '0.01' })).best;
    expect(strict.filter(({ mayBeBest }) => mayBeBest).length).toBeGreaterThanOrEqual(may);
    expect((await analyse(marrowfen().id)).best).toEqual([]);
  });

  test('in split plots gives the factor on its main plots beside the varieties', async () => {
    const split = find(({ design }) => design === 'split-plot');
    const { factors, means, layout } = await analyse(split.id);
    expect(factors.map(({ name }) => name)).toEqual(['main', 'main:sub']);
    expect(factors[0]?.gaps).toHaveLength(1);
    expect(means).toHaveLength(split.entries);
    expect(layout).toEqual([]);
  });

  test('known by its means alone has no layout to check', async () => {
    const summary = find(({ kind }) => kind === 'summary');
    expect(await analyse(summary.id, { view: 'analysis' })).toMatchObject({
      layout: null,
      spatial: [],
      factors: [],
      best: [],
    });
  });

  test('refuses a view that there is not', async () => {
    const reply = await advisor.get(`/api/trials/${marrowfen().id}/analysis`).query({ view: 'whole' });
    expect(reply.status).toBe(400);
  });
});

test('the desk sees the models and the check of the layout without asking', async () => {
  const { body } = await agronomist.get('/api/desk/trials').expect(200);
  const draft = body.trials.find(({ state }: TrialLine) => state === 'draft');
  const { analysis } = (await agronomist.get(`/api/desk/trials/${draft.id}/analysis`).expect(200)).body;
  expect(analysis.layout).toEqual([]);
  expect(analysis.spatial.length).toBeGreaterThan(1);
});
