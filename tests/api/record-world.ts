import type { WeighUp, WeighUpInput } from '#shared/weigh-up.ts';
import { openApiWorld, type ApiWorld, type SignedIn } from './api-world.ts';
import { askSmallQuestion, fullPrices } from './small-question.ts';
import {
  foundSmallWorld,
  idIn,
  noise,
  publishPlanted,
  varietyNames,
  type PlantedTrial,
  type SmallWorld,
} from './small-world.ts';

const merit: Record<string, number> = { Anchor: 0, Birch: 0.9, Cedar: 0.05, Dogwood: -0.8, Elder: 0.3 };

/** A trial in which Birch leads and Dogwood trails. */
export const plantedTrial = (site: string, season: number): PlantedTrial => ({
  site,
  season,
  entries: varietyNames,
  yieldOf: (entry, rep) =>
    5 +
    (merit[entry] ?? 0) +
    0.2 * noise(season, site.charCodeAt(0), entry.charCodeAt(0)) +
    0.4 * noise(rep, entry.charCodeAt(0)),
});

export type RecordWorld = {
  world: ApiWorld;
  small: SmallWorld;
  advisor: SignedIn;
  other: SignedIn;
  variety: (name: string) => string;
  /** Trial ids by `site season`. */
  trialIds: ReadonlyMap<string, string>;
  question: (change?: Partial<WeighUpInput>) => WeighUpInput;
  /** Stores a question as the advisor's own. */
  make: (change?: Partial<WeighUpInput>) => Promise<WeighUp>;
};

/** Three sites by three seasons in the north, an advisor of the region and another one. */
export async function openRecordWorld(environment: NodeJS.ProcessEnv = {}): Promise<RecordWorld> {
  const world = await openApiWorld('empty', environment);
  const { db } = world.database;
  const small = await foundSmallWorld(db);
  const trialIds = new Map<string, string>();
  for (const site of ['elm', 'fir', 'gorse'])
    for (const season of [2023, 2024, 2025])
      trialIds.set(`${site} ${season}`, await publishPlanted(db, small, plantedTrial(site, season)));
  const regionIds = [small.regionIds.north];
  const advisor = await world.signInAs('advisor', { regionIds });
  const other = await world.signInAs('advisor', { regionIds });
  const variety = (name: string) => idIn(small.varietyIds, name);
  const question = (change: Partial<WeighUpInput> = {}): WeighUpInput =>
    askSmallQuestion(small, {
      candidateIds: [variety('Birch'), variety('Dogwood')],
      assumptions: fullPrices(small),
      ...change,
    });
  const make = async (change: Partial<WeighUpInput> = {}): Promise<WeighUp> =>
    (await advisor.agent.post('/api/weigh-ups').send(question(change)).expect(200)).body.weighUp;
  return { world, small, advisor, other, variety, trialIds, question, make };
}
