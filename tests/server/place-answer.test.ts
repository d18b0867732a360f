import { describe, expect, test } from 'vitest';
import type { CandidateResult, WeighUpResult } from '#shared/weigh-up.ts';
import { fitGapLine, readGapAt } from '#server/stats/engine.ts';
import type { EvidenceTrial } from '#server/weigh-up/evidence.ts';
import { placeAnswer } from '#server/weigh-up/place-answer.ts';

const trial = (n: number, inRegion: boolean): EvidenceTrial => ({
  trialId: `trial ${n}`,
  versionId: `version ${n}`,
  version: 1,
  sha256: '',
  name: '',
  siteId: `site ${n}`,
  siteName: `Site ${n}`,
  place: { latitude: 47, longitude: -38, seasonRainMm: 300, heatSumDegreeDays: 1500, soilTexture: 'loam' },
  regionId: inRegion ? 'north' : 'south',
  regionName: inRegion ? { en: 'North', fr: 'Nord' } : { en: 'South', fr: 'Sud' },
  inRegion,
  season: 2024,
  kind: 'plots',
  isStrips: false,
  management: {},
});

const used = ({ trialId, name, siteName, season, version, sha256 }: EvidenceTrial) => ({
  ...{ trialId, name, siteName, season, version, sha256 },
  meanYield: 5,
  cvPercent: 6,
});

const line = fitGapLine(
  [3.5, 4, 4.5, 5, 5.5, 6].map((trialMean, i) => ({
    trialMean,
    estimate: 0.1 * trialMean + (i % 2 === 0 ? 0.01 : -0.01),
    se: 0.05,
  })),
);
if (line.outcome === 'not-fitted') throw new Error('six trials give a line');

const candidate = (se: number, df: number, change: Partial<CandidateResult> = {}): CandidateResult => ({
  varietyId: 'b',
  varietyName: 'Birch',
  verdict: 'open',
  gap: {
    ...{ estimate: 0.5, se, df, p: 0.2, shrunken: 0.4, ownSeason: null },
    region: { low: 0, high: 1, level: 0.95 },
  },
  ...{ siteYears: 6, sharedSiteYears: 6, moneyGap: null, money: null, siteYearsToSettle: null },
  ...{ trials: [], traits: [], cautions: [] },
  gapLine: line,
  ...change,
});

function answer(candidates: CandidateResult[], trials: EvidenceTrial[]): WeighUpResult {
  return {
    answer: 'weighed',
    ...{ computedAt: '2026-12-01T09:00:00.000Z', engineVersion: '1', comparison: 'lsd', sites: 1 },
    ...{ seasons: [2024], leftOut: [], components: null, usualVariancesFrom: null, cautions: [] },
    trials: trials.map(used),
    candidates,
  };
}

const ask = (change: Partial<Parameters<typeof placeAnswer>[2]> = {}) => ({
  farm: null,
  usualYield: 4,
  currentName: 'Anchor',
  ...change,
});

const read = (one: CandidateResult, usualYield = 4) => {
  const placed = placeAnswer(answer([one], []), { trials: [] }, ask({ usualYield }));
  return placed.candidates[0];
};

describe('the gap at the usual yield', () => {
  test('is the line’s where the model is surer than the line', () => {
    const own = readGapAt(line, 4);
    expect(read(candidate(1e-6, 1e6))?.gapAtUsualYield).toMatchObject({
      estimate: own.estimate,
      se: own.se,
      df: own.df,
      interval: { low: own.interval95[0], high: own.interval95[1], level: 0.95 },
      isCarried: true,
    });
  });

  test('is never told more surely than the model tells the gap itself', () => {
    const found = read(candidate(0.3, 2.5))?.gapAtUsualYield;
    expect(found?.se).toBeCloseTo(Math.hypot(0.3, line.slopeSe * (4 - line.centre)), 12);
    expect(found?.df).toBe(2.5);
    const half = ((found?.interval.high ?? 0) - (found?.interval.low ?? 0)) / 2;
    // R 4.2.2, qt(0.975, 2.5)
    expect(half / (found?.se ?? 1)).toBeCloseTo(3.574654842, 8);
  });

  test('is left unread where the evidence is thin, and outside the trials’ yields', () => {
    expect(read(candidate(0.1, 10, { verdict: 'thin' }))).toMatchObject({
      gapAtUsualYield: null,
      cautions: [],
    });
    expect(read(candidate(0.1, 10), 6.1)?.cautions.map(({ code }) => code)).toEqual([
      'usual-yield-outside-trials',
    ]);
    expect(read(candidate(0.1, 10), 6)?.cautions).toEqual([]);
    expect(read(candidate(0.1, 10, { gapLine: null }))?.cautions.map(({ code }) => code)).toEqual([
      'no-yield-line',
    ]);
  });
});

describe('trials of other regions', () => {
  const place = (trials: EvidenceTrial[]) => placeAnswer(answer([], trials), { trials }, ask());

  test('beside the region’s own are a warning, alone a stop, and none at all says nothing', () => {
    const said = (trials: EvidenceTrial[]) =>
      place(trials).cautions.map(({ code, severity }) => [code, severity]);
    expect(said([trial(1, true), trial(2, false)])).toEqual([['trials-from-elsewhere', 'warning']]);
    expect(said([trial(2, false), trial(3, false)])).toEqual([['no-trial-in-region', 'stop']]);
    expect(said([trial(1, true)])).toEqual([]);
  });

  test('left out of the figures, they are marked and give no caution', () => {
    const trials = [trial(1, true), trial(2, false)];
    const asked = {
      ...answer([], trials.slice(0, 1)),
      leftOut: [{ ...used(trial(2, false)), reason: 'weak-cv' as const }],
    };
    const placed = placeAnswer(asked, { trials }, ask());
    expect(placed.cautions).toEqual([]);
    expect(placed.leftOut).toMatchObject([{ inRegion: false, regionName: { en: 'South' } }]);
  });

  test('an answer without trials stays as it is', () => {
    const none: WeighUpResult = { ...answer([], []), answer: 'no-trials' };
    expect(placeAnswer(none, { trials: [] }, ask())).toBe(none);
  });
});

test('a candidate knows whether trials of other regions stand behind its figures, also where it stood in none of them', () => {
  const place = (trials: EvidenceTrial[]) =>
    placeAnswer(answer([candidate(0.1, 10)], trials), { trials }, ask()).candidates[0]?.isBeyondRegion;
  expect(place([trial(1, true)])).toBe(false);
  expect(place([trial(1, true), trial(2, false)])).toBe(true);
});

test('which of a list can be the best is not told from other regions’ trials alone', () => {
  const best = { standings: [], thin: [] };
  const place = (trials: EvidenceTrial[]) =>
    placeAnswer({ ...answer([candidate(0.1, 10)], trials), best }, { trials }, ask()).best;
  expect(place([trial(1, true), trial(2, false)])).toEqual(best);
  expect(place([trial(2, false)])).toBeNull();
});
