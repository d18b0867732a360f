import { afterAll, beforeAll, expect, test } from 'vitest';
import { openApiWorld, type Agent, type ApiWorld } from './api-world.ts';
import { foundSmallWorld, noise, publishPlanted, varietyNames } from './small-world.ts';

let world: ApiWorld;
let agent: Agent;
const trialIds = { small: '', large: '' };
const replicates = { small: 4, large: 44 };
const yieldOf = (entry: string, rep: number) => 5 + noise(entry.charCodeAt(0), rep);

beforeAll(async () => {
  world = await openApiWorld('empty');
  const { db } = world.database;
  const small = await foundSmallWorld(db);
  for (const size of ['small', 'large'] as const) {
    const reps = replicates[size];
    const planted = {
      site: size === 'small' ? 'elm' : 'fir',
      season: 2024,
      entries: varietyNames,
      reps,
      yieldOf,
    };
    trialIds[size] = await publishPlanted(db, small, planted);
  }
  agent = (await world.signInAs('advisor')).agent;
});
afterAll(() => world.close());

test.each(['small', 'large'] as const)(
  'a %s trial’s analysis is the same whichever thread it is made in',
  async (size) => {
    const reply = await agent.get(`/api/trials/${trialIds[size]}/analysis`).expect(200);
    const reps = Array.from({ length: replicates[size] }, (_, rep) => rep);
    const { analysis } = reply.body;
    expect(analysis).toMatchObject({ trialId: trialIds[size], plotsUsed: 5 * reps.length });
    for (const { entry, mean } of analysis.means) {
      const own = reps.reduce((sum, rep) => sum + yieldOf(entry, rep), 0) / reps.length;
      expect(mean).toBeCloseTo(own, 9);
    }
    expect(analysis.means).toHaveLength(varietyNames.length);
    const ids = new Set(analysis.plots.map((plot: { id: string }) => plot.id));
    expect(ids.size).toBe(5 * reps.length);
    expect(ids.has(undefined)).toBe(false);
  },
);
