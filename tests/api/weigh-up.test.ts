import { sql } from 'drizzle-orm';
import { afterAll, beforeAll, expect, test } from 'vitest';
import { cautionValues } from '#shared/caution.ts';
import type { MoneyAssumptions } from '#shared/money.ts';
import { readMoneyBasis } from '#shared/money-basis.ts';
import { weighMoney } from '#shared/partial-budget.ts';
import type { CandidateResult, WeighUpInput, WeighUpResult } from '#shared/weigh-up.ts';
import { combineTrials, defaultUsualVariances } from '#server/stats/engine.ts';
import { openApiWorld, type ApiWorld, type SignedIn } from './api-world.ts';
import { askSmallQuestion, fullPrices } from './small-question.ts';
import {
  foundSmallWorld,
  idIn,
  noise,
  publishPlanted,
  varietyNames,
  withdraw,
  type PlantedTrial,
  type SmallWorld,
} from './small-world.ts';

let world: ApiWorld;
let small: SmallWorld;
let advisor: SignedIn;

const merit: Record<string, number> = { Anchor: 0, Birch: 0.9, Cedar: 0.05, Dogwood: -0.8, Elder: 0.3 };

/**
 * A balanced table: every variety in every trial, three sites by three seasons. The plots scatter alike in every trial,
 * so that all trials weigh the same and closed forms hold.
 */
const planted = (site: string, season: number): PlantedTrial => ({
  site,
  season,
  entries: varietyNames,
  yieldOf: (entry, rep) =>
    5 +
    0.3 * (season - 2024) +
    (merit[entry] ?? 0) +
    0.1 * rep +
    0.2 * noise(season, site.charCodeAt(0), entry.charCodeAt(0)) +
    0.4 * noise(rep, entry.charCodeAt(0)),
  proteinOf: (entry, rep) => 11.5 - 0.4 * (merit[entry] ?? 0) + 0.3 * noise(rep, season, entry.charCodeAt(0)),
  lodgingOf: (entry, rep) => 1 + ((entry.charCodeAt(0) + rep + season) % 3),
});

const sitesOfNorth = ['elm', 'fir', 'gorse'];
const seasons = [2023, 2024, 2025];

beforeAll(async () => {
  world = await openApiWorld('empty');
  const { db } = world.database;
  small = await foundSmallWorld(db);
  for (const site of sitesOfNorth)
    for (const season of seasons) await publishPlanted(db, small, planted(site, season));
  // Another region, another question: it must not leak into the north's answers.
  await publishPlanted(db, small, {
    ...planted('heath', 2025),
    yieldOf: (entry, rep) => 9 - 2 * (merit[entry] ?? 0) + noise(rep, entry.length),
  });
  advisor = await world.signInAs('advisor', {
    regionIds: [small.regionIds.north, small.regionIds.coast],
  });
});
afterAll(() => world.close());

const variety = (name: string): string => idIn(small.varietyIds, name);

const money = (): MoneyAssumptions => fullPrices(small);

const question = (change: Partial<WeighUpInput> = {}): WeighUpInput =>
  askSmallQuestion(small, {
    candidateIds: [variety('Birch'), variety('Cedar'), variety('Dogwood')],
    assumptions: money(),
    ...change,
  });

async function weigh(change: Partial<WeighUpInput> = {}): Promise<WeighUpResult> {
  const made = await advisor.agent.post('/api/weigh-ups').send(question(change)).expect(200);
  const { result } = (await advisor.agent.get(`/api/weigh-ups/${made.body.weighUp.id}`).expect(200)).body;
  checkCautions(result);
  return result;
}

/** Every caution brings the values that its sentence needs. */
function checkCautions({ cautions, candidates }: WeighUpResult): void {
  for (const { code, values } of [...cautions, ...candidates.flatMap((one) => one.cautions)])
    expect([code, Object.keys(values)]).toEqual([code, expect.arrayContaining([...cautionValues[code]])]);
}

const candidateIn = (result: WeighUpResult, name: string): CandidateResult => {
  const found = result.candidates.find((one) => one.varietyName === name);
  if (found === undefined) throw new Error(`${name} was not weighed`);
  return found;
};

const codes = (cautions: { code: string }[]): string[] => cautions.map((one) => one.code);

test('in a balanced table the gap is the difference of the plain means over all plots', async () => {
  const result = await weigh();
  const { rows } = await world.database.db.execute<{ label: string; mean: number }>(sql`
    select label, avg(value) as mean from observations join plots on plots.id = plot_id
    join entries on entries.id = entry_id join traits on traits.id = trait_id
    join trials on trials.id = plots.trial_id join sites on sites.id = site_id
    where traits.slug = 'yield' and region_id = ${small.regionIds.north}
      and season between 2023 and 2025 group by label`);
  const meanOf = (name: string) => rows.find((row) => row.label === name)?.mean ?? NaN;
  for (const name of ['Birch', 'Cedar', 'Dogwood']) {
    expect(candidateIn(result, name).gap?.estimate).toBeCloseTo(meanOf(name) - meanOf('Anchor'), 8);
  }
});

test('the figures are the engine’s own on the cells that the versions hold', async () => {
  const result = await weigh();
  const { rows } = await world.database.db.execute<{
    entry: string;
    site: string;
    year: number;
    mean: number;
    variance: number;
  }>(sql`
    select variety_id as entry, site_id as site, season as year, mean, variance from entry_means
    join trial_versions on trial_versions.id = version_id join trials on trials.id = trial_id
    join sites on sites.id = site_id join traits on traits.id = trait_id
    where traits.slug = 'yield' and region_id = ${small.regionIds.north} and season between 2023 and 2025`);
  expect(rows).toHaveLength(45);
  const combined = combineTrials(rows, {
    usual: defaultUsualVariances(5),
    spread: Math.LN2,
    current: variety('Anchor'),
  });
  if (combined.outcome !== 'combined') throw new Error('the cells can be combined');
  for (const name of ['Birch', 'Cedar', 'Dogwood']) {
    const gap = candidateIn(result, name).gap;
    const own = combined.gaps.find((one) => one.a === variety(name));
    expect(gap?.estimate).toBeCloseTo(own?.estimate ?? NaN, 9);
    expect(gap?.se).toBeCloseTo(own?.se ?? NaN, 9);
    expect(gap?.df).toBeCloseTo(own?.df ?? NaN, 6);
    expect(gap?.ownSeason?.low).toBeCloseTo(own?.ownSeason.interval95[0] ?? NaN, 8);
    expect(gap?.shrunken).toBeCloseTo(own?.shrunken ?? NaN, 8);
  }
  expect(result.components?.site).toBeCloseTo(Math.sqrt(combined.fit.components.site), 9);
  expect(result.components?.season).toBeCloseTo(Math.sqrt(combined.fit.components.year), 9);
});

test('three candidates are compared by Dunnett: wider than each alone, and never wider than Bonferroni', async () => {
  const three = candidateIn(await weigh(), 'Birch').gap;
  const one = candidateIn(await weigh({ candidateIds: [variety('Birch')] }), 'Birch').gap;
  const width = (gap: CandidateResult['gap']) => (gap ? gap.region.high - gap.region.low : NaN);
  expect(three?.estimate).toBeCloseTo(one?.estimate ?? NaN, 10);
  expect(width(three)).toBeGreaterThan(width(one));
  expect(three?.p).toBeGreaterThan(one?.p ?? NaN);
  expect(three?.p).toBeLessThanOrEqual(3 * (one?.p ?? NaN));
});

test('the answer says what it rests on', async () => {
  const result = await weigh();
  expect(result).toMatchObject({
    answer: 'weighed',
    comparison: 'dunnett',
    sites: 3,
    seasons: [2023, 2024, 2025],
    usualVariancesFrom: 'crop-default',
    leftOut: [],
  });
  // Fitted with the three components: the square root of the common factor of the variances.
  expect(result.usualFactor).toBeGreaterThanOrEqual(0.5);
  expect(result.usualFactor).toBeLessThan(4);
  expect(result.trials).toHaveLength(9);
  expect(result.trials[0]).toMatchObject({ version: 1, siteName: 'ELM' });
  expect(codes(result.cautions)).toEqual(
    expect.arrayContaining(['several-compared', 'rests-on-usual-variance', 'small-plots', 'local-advice']),
  );
});

test('a large gap is really ahead and pays, a large loss costs, and a small gap stays open', async () => {
  const result = await weigh();
  expect(candidateIn(result, 'Birch')).toMatchObject({ verdict: 'ahead', siteYearsToSettle: null });
  expect(candidateIn(result, 'Birch').money?.verdict).toBe('pays');
  expect(candidateIn(result, 'Dogwood').verdict).toBe('behind');
  expect(candidateIn(result, 'Dogwood').money?.verdict).toBe('costs');
  expect(['open', 'level']).toContain(candidateIn(result, 'Cedar').verdict);
});

test('money is reckoned on the shrunken gap, of one candidate as of several, by the code that the page runs', async () => {
  const results = [await weigh(), await weigh({ candidateIds: [variety('Birch')] })];
  for (const result of results) {
    const candidate = candidateIn(result, 'Birch');
    expect(candidate.moneyGap?.estimate).toBe(candidate.gap?.shrunken);
    expect(candidate.moneyGap?.estimate).toBeLessThan(candidate.gap?.estimate ?? NaN);
    expect(candidate.moneyGap?.df).toBe(candidate.gap?.ownSeason?.df);
    const basis = readMoneyBasis({ currentVarietyId: variety('Anchor'), usualYield: null }, result);
    expect(candidate.money).toEqual(weighMoney(candidate, basis, money()));
    expect(candidate.money?.breakEvenGap).toBeCloseTo(6 / 240, 12);
  }
});

test('a gap below the break-even gap is as good as level: dear seed widens the practical margin', async () => {
  const cheap = candidateIn(await weigh({ candidateIds: [variety('Cedar')] }), 'Cedar');
  const assumptions = money();
  const cost = assumptions.seedCosts[variety('Cedar')];
  if (cost === undefined) throw new Error('Cedar has a seed cost');
  cost.seedPerHectare = (cost.seedPerHectare ?? 0) + 300;
  const dear = candidateIn(await weigh({ candidateIds: [variety('Cedar')], assumptions }), 'Cedar');
  expect(cheap.verdict).toBe('open');
  expect(dear.verdict).toBe('level');
  expect(dear.money?.verdict).toBe('costs');
});

test('each trial has its line, sorted by its mean, and the lines average to the gap of a balanced table', async () => {
  const { trials, gap } = candidateIn(await weigh(), 'Birch');
  expect(trials).toHaveLength(9);
  const means = trials.map((trial) => trial.trialMean);
  expect(means).toEqual([...means].sort((a, b) => a - b));
  expect(trials.reduce((sum, trial) => sum + trial.estimate, 0) / 9).toBeCloseTo(gap?.estimate ?? NaN, 8);
  for (const { interval, estimate } of trials) {
    expect(interval.level).toBe(0.95);
    expect(interval.low).toBeLessThan(estimate);
    expect(interval.high).toBeGreaterThan(estimate);
  }
});

test('other traits have verdicts of their own; ratings are told as medians without one', async () => {
  const { traits } = candidateIn(await weigh(), 'Birch');
  expect(traits.map((trait) => trait.traitSlug)).toEqual(['protein', 'lodging']);
  const [protein, lodging] = traits;
  expect(protein).toMatchObject({ kind: 'numeric', siteYears: 9 });
  expect(protein?.gap?.estimate).toBeLessThan(0);
  expect(lodging).toMatchObject({ kind: 'ordinal', verdict: null, gap: null, siteYears: 9 });
  expect(lodging?.medianCandidate).not.toBeNull();
  expect(lodging?.medianCurrent).not.toBeNull();
  const { trials, lower, higher } = lodging?.rated ?? { trials: 0, lower: 0, higher: 0 };
  expect(trials).toBe(9);
  expect(lower + higher).toBeGreaterThan(0);
  expect(lower + higher).toBeLessThanOrEqual(trials);
});

test('a region without trials gets no verdict, and says why', async () => {
  const result = await weigh({ regionId: small.regionIds.coast });
  expect(result).toMatchObject({ answer: 'no-trials', candidates: [], trials: [], components: null });
  expect(result.cautions[0]).toMatchObject({ code: 'no-trial-in-region', severity: 'stop' });
});

test('one season alone says so; one site-year gives no verdict at all', async () => {
  const season = await weigh({ seasonFrom: 2024, seasonTo: 2024 });
  expect(codes(candidateIn(season, 'Birch').cautions)).toContain('one-season');
  const { db } = world.database;
  await publishPlanted(db, small, planted('elm', 2019));
  const single = candidateIn(await weigh({ seasonFrom: 2019, seasonTo: 2019 }), 'Birch');
  expect(single).toMatchObject({ verdict: 'thin', siteYears: 1, moneyGap: null, money: null });
  expect(codes(single.cautions)).toEqual(expect.arrayContaining(['few-site-years', 'old-seasons']));
});

test('a weak trial is left out and named, and a withdrawn one is no evidence', async () => {
  const { db } = world.database;
  const scattered = {
    ...planted('fir', 2021),
    yieldOf: (_: string, rep: number) => 5 + 6 * noise(rep, 3, rep),
  };
  await publishPlanted(db, small, { ...planted('elm', 2021), season: 2021 });
  await publishPlanted(db, small, {
    ...scattered,
    yieldOf: (entry, rep) => 5 + 6 * noise(rep, entry.charCodeAt(0)),
  });
  const gone = await publishPlanted(db, small, planted('gorse', 2021));
  await withdraw(db, gone);
  const result = await weigh({ seasonFrom: 2021, seasonTo: 2021 });
  expect(result.trials).toHaveLength(1);
  expect(result.leftOut).toMatchObject([{ siteName: 'FIR', season: 2021, reason: 'weak-cv' }]);
  const caution = result.cautions.find((one) => one.code === 'trial-left-out');
  expect(caution?.values).toMatchObject({ site: 'FIR', season: 2021, context: 'weak-cv', limit: 15 });
});

test('a variety that stood nowhere, or that no trial links, has no gap and says so', async () => {
  const { db } = world.database;
  await publishPlanted(db, small, { ...planted('elm', 2018), entries: ['Anchor', 'Birch'] });
  await publishPlanted(db, small, { ...planted('fir', 2018), entries: ['Cedar', 'Dogwood'] });
  const result = await weigh({
    seasonFrom: 2018,
    seasonTo: 2018,
    candidateIds: [variety('Cedar'), variety('Elder')],
  });
  expect(candidateIn(result, 'Cedar')).toMatchObject({ verdict: 'thin', gap: null, money: null });
  expect(codes(candidateIn(result, 'Cedar').cautions)).toContain('disconnected');
  expect(candidateIn(result, 'Elder')).toMatchObject({ verdict: 'thin', gap: null, siteYears: 0 });
  expect(result.leftOut).toMatchObject([{ siteName: 'FIR', reason: 'not-connected' }]);
});

test('without a seed cost there is a gap and no money verdict', async () => {
  const assumptions = money();
  delete assumptions.seedCosts[variety('Birch')];
  const birch = candidateIn(await weigh({ candidateIds: [variety('Birch')], assumptions }), 'Birch');
  expect(birch.verdict).toBe('ahead');
  expect(birch.money).toBeNull();
  expect(codes(birch.cautions)).toContain('no-seed-cost');
});

test('prices outside the sheet, treated and protected seed, and an old sheet are each pointed out', async () => {
  const assumptions = { ...money(), priceHigh: 500, priceSheetDate: '2020-10-15' };
  const cost = assumptions.seedCosts[variety('Birch')];
  if (cost === undefined) throw new Error('Birch has a seed cost');
  cost.treatmentPerHectare = 11;
  cost.royaltyPerHectare = 6;
  const { cautions } = await weigh({ assumptions });
  expect(codes(cautions)).toEqual(
    expect.arrayContaining(['price-outside-sheet', 'price-sheet-old', 'seed-treatment', 'farm-saved-seed']),
  );
  const calm = await weigh();
  for (const code of ['price-outside-sheet', 'price-sheet-old', 'seed-treatment', 'farm-saved-seed'])
    expect(codes(calm.cautions)).not.toContain(code);
});

test('the candidates of a region come weighed, largest gap first, with the sheet in force as assumptions', async () => {
  const reply = await advisor.agent
    .get('/api/candidates')
    .query({
      cropId: small.cropId,
      regionId: small.regionIds.north,
      currentVarietyId: variety('Anchor'),
      seasonFrom: 2023,
      seasonTo: 2025,
    })
    .expect(200);
  const { result, assumptions } = reply.body;
  expect(result.candidates.map((one: CandidateResult) => one.varietyName)).toEqual([
    'Birch',
    'Elder',
    'Cedar',
    'Dogwood',
  ]);
  expect(codes(result.candidates[0].cautions)).toContain('best-of-many');
  expect(assumptions).toMatchObject({
    currency: 'CAD',
    priceMiddle: 260,
    haulagePerTonne: 15,
    dryingPerTonne: 5,
    priceSheetDate: '2026-10-15',
  });
  expect(assumptions.seedCosts[variety('Birch')]).toEqual({
    seedPerHectare: 66,
    treatmentPerHectare: 11,
    royaltyPerHectare: 0,
  });
  expect(assumptions.seedCosts[variety('Elder')]).toBeUndefined();
});

test('where there is neither trial nor price sheet the candidates are none and the assumptions empty', async () => {
  const { body } = await advisor.agent
    .get('/api/candidates')
    .query({
      cropId: small.cropId,
      regionId: small.regionIds.coast,
      currentVarietyId: variety('Anchor'),
      seasonFrom: 2023,
      seasonTo: 2025,
    })
    .expect(200);
  expect(body.assumptions).toBeNull();
  expect(body.result).toMatchObject({ answer: 'no-trials', candidates: [] });
});
