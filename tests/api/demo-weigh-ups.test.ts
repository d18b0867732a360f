import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Crop, Region, Variety } from '#shared/catalogue.ts';
import { cautionValues } from '#shared/caution.ts';
import type { WeighUpResult } from '#shared/weigh-up.ts';
import { demoAccounts } from '#server/demo/demo-accounts.ts';
import { drawTruth } from '#server/demo/demo-truth.ts';
import { openApiWorld, type Agent, type ApiWorld } from './api-world.ts';

let world: ApiWorld;
let regions: Region[];
let crops: Crop[];
const agents: Agent[] = [];
beforeAll(async () => {
  world = await openApiWorld('demo');
  const advisor = await world.signIn(demoAccounts.advisor.email, demoAccounts.advisor.password);
  const agronomist = await world.signIn(demoAccounts.agronomist.email, demoAccounts.agronomist.password);
  agents.push(advisor, agronomist);
  ({ regions, crops } = (await advisor.get('/api/catalogue').expect(200)).body);
});
afterAll(() => world.close());

const cropSlugs = ['spring-barley', 'field-pea', 'winter-wheat'] as const;
const regionSlugs = ['upper-velmar', 'lower-velmar', 'orlaine-plateau', 'sarrow-coast'] as const;

type Ranking = { crop: Crop; region: Region; current: Variety; result: WeighUpResult };

const rankings = new Map<string, Promise<Ranking>>();

/** The candidates of a crop in a region against its first check; asked once. */
function rank(cropSlug: string, regionSlug: string): Promise<Ranking> {
  const key = `${cropSlug} ${regionSlug}`;
  const asked = rankings.get(key) ?? askToRank(cropSlug, regionSlug);
  rankings.set(key, asked);
  return asked;
}

/** Asks as whoever works in the region. */
async function askToRank(cropSlug: string, regionSlug: string): Promise<Ranking> {
  const crop = crops.find((one) => one.slug === cropSlug);
  const region = regions.find((one) => one.slug === regionSlug);
  const current = crop?.varieties.find((one) => one.isCheck);
  if (crop === undefined || region === undefined || current === undefined)
    throw new Error(`the demo has ${cropSlug} in ${regionSlug}`);
  const query = {
    cropId: crop.id,
    regionId: region.id,
    currentVarietyId: current.id,
    seasonFrom: 2022,
    seasonTo: 2026,
  };
  for (const agent of agents) {
    const reply = await agent.get('/api/candidates').query(query);
    if (reply.body.error?.code === 'region-not-yours') continue;
    expect(reply.status).toBe(200);
    const result: WeighUpResult = reply.body.result;
    return { crop, region, current, result };
  }
  throw new Error(`nobody works in ${regionSlug}`);
}

describe.each(cropSlugs)('%s', (cropSlug) => {
  test.each(regionSlugs)('is answered in %s', async (regionSlug) => {
    const { crop, region, result } = await rank(cropSlug, regionSlug);
    const hasTrials = (region.publishedTrials[crop.slug] ?? 0) > 0;
    expect(result.answer).toBe(hasTrials ? 'weighed' : 'no-trials');
    if (!hasTrials) return;
    expect(result.trials.length + result.leftOut.length).toBe(region.publishedTrials[crop.slug]);
    for (const { verdict, gap, siteYears } of result.candidates) {
      if (siteYears < 2) expect(verdict).toBe('thin');
      if (gap === null) continue;
      expect(gap.region.low).toBeLessThan(gap.estimate);
      // One season on one field is never surer than the region's average over seasons.
      const own = gap.ownSeason;
      expect((own?.se ?? 0) > gap.se).toBe(true);
      // Both sides are pulled, each by what is known of it, so a small gap may open a little.
      expect(Math.abs(gap.shrunken ?? 0)).toBeLessThan(Math.abs(gap.estimate) + gap.se);
    }
    for (const { code, values } of [
      ...result.cautions,
      ...result.candidates.flatMap((candidate) => candidate.cautions),
    ])
      expect(Object.keys(values)).toEqual(expect.arrayContaining([...cautionValues[code]]));
  });
});

test('the hail-hit trial is left out wherever it lies', async () => {
  const answers = [];
  for (const cropSlug of cropSlugs)
    for (const regionSlug of regionSlugs) answers.push((await rank(cropSlug, regionSlug)).result);
  const leftOut = answers.flatMap((result) => result.leftOut);
  expect(leftOut.filter((trial) => trial.reason === 'weak-cv' && (trial.cvPercent ?? 0) > 25)).toHaveLength(
    1,
  );
});

test('the truth that the demo grew from lies in the intervals, and nothing is wrongly ahead or behind', async () => {
  let inside = 0;
  let all = 0;
  let wrong = 0;
  for (const cropSlug of cropSlugs) {
    const truth = drawTruth()
      .find((one) => one.crop === cropSlug)
      ?.varieties.get('yield');
    for (const regionSlug of regionSlugs) {
      const { result, current } = await rank(cropSlug, regionSlug);
      for (const { varietyName, gap, verdict } of result.candidates) {
        if (gap === null) continue;
        const gapInTruth = (truth?.get(varietyName) ?? NaN) - (truth?.get(current.name) ?? NaN);
        all += 1;
        if (gap.region.low <= gapInTruth && gapInTruth <= gap.region.high) inside += 1;
        if ((verdict === 'ahead' && gapInTruth < 0) || (verdict === 'behind' && gapInTruth > 0)) wrong += 1;
      }
    }
  }
  expect(all).toBeGreaterThan(80);
  // Each region's family of intervals covers together in 95 of 100; single ones more often.
  expect(inside / all).toBeGreaterThan(0.95);
  expect(wrong).toBe(0);
});
