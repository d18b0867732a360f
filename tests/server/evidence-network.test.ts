import { expect, test } from 'vitest';
import { poolErrorVariances } from '#server/stats/engine.ts';
import { layOutNetwork } from '#server/weigh-up/evidence-network.ts';
import type { Evidence, EvidenceTrial } from '#server/weigh-up/evidence.ts';

const trait = (slug: string, kind: 'numeric' | 'ordinal' = 'numeric') => ({
  id: `trait ${slug}`,
  slug,
  name: { en: slug, fr: slug },
  unit: '',
  kind,
  direction: 'higher' as const,
  practicalMargin: null,
  scaleMin: null,
  scaleMax: null,
});

const trial = (n: number, management: EvidenceTrial['management'] = {}): EvidenceTrial => ({
  trialId: `trial ${n}`,
  versionId: `version ${n}`,
  version: 1,
  sha256: '',
  name: '',
  siteId: `site ${n}`,
  siteName: `Site ${n}`,
  place: { latitude: 50, longitude: -100, seasonRainMm: 300, heatSumDegreeDays: 1500, soilTexture: 'loam' },
  regionId: 'north',
  regionName: { en: 'North', fr: 'Nord' },
  inRegion: true,
  season: 2024,
  kind: 'plots',
  isStrips: n === 2,
  management,
});

const errors = [
  { ms: 0.06, df: 39 },
  { ms: 0.5, df: 3 },
  { ms: 0.12, df: 60 },
  { ms: 0.1, df: 24 },
];

/** Four trials of two varieties, each cell with a quarter of its trial's mean square as variance. */
function makeEvidence(): Evidence {
  const fits = errors.map(({ ms, df }, n) => ({
    versionId: `version ${n}`,
    traitId: 'trait yield',
    grandMean: 5,
    residualMs: ms,
    residualDf: df,
    cvPercent: 6,
    entryP: 0.01,
  }));
  const means = errors.flatMap(({ ms, df }, n) =>
    ['a', 'b'].map((varietyId, k) => ({
      versionId: `version ${n}`,
      traitId: 'trait yield',
      varietyId,
      mean: 5 + k,
      variance: ms / 4,
      df,
    })),
  );
  return {
    crop: { id: 'crop', cvLimitPercent: 15, typicalYield: 5 },
    traits: [trait('yield'), trait('protein'), trait('lodging', 'ordinal')],
    varieties: ['a', 'b'].map((id) => ({ id, name: id.toUpperCase(), isCheck: id === 'a' })),
    trials: errors.map((_, n) => trial(n)),
    usual: [],
    fits,
    means,
  };
}

const yieldCells = (evidence: Evidence) =>
  layOutNetwork(evidence, 'all').traits.find((one) => one.trait === 'yield')?.cells ?? [];

test('numeric traits go to the engine, ratings do not, and a list asks for yield alone', () => {
  const evidence = makeEvidence();
  expect(layOutNetwork(evidence, 'all').traits.map((one) => one.trait)).toEqual(['yield', 'protein']);
  expect(layOutNetwork(evidence, 'yield').traits.map((one) => one.trait)).toEqual(['yield']);
});

test('without own ones only yield has usual variances: 3, 2.5 and 5 % of the crop’s typical yield (domain.md)', () => {
  const [yields, protein] = layOutNetwork(makeEvidence(), 'all').traits;
  expect(yields?.usual?.site).toBeCloseTo(0.15 ** 2, 12);
  expect(yields?.usual?.year).toBeCloseTo(0.125 ** 2, 12);
  expect(yields?.usual?.rest).toBeCloseTo(0.25 ** 2, 12);
  expect(protein?.usual).toBeNull();
});

test('usual variances from the organisation’s own trials come before the defaults, for every trait', () => {
  const own = { site: 0.01, season: 0.02, rest: 0.03 };
  const usual = ['yield', 'protein'].map((slug) => ({
    ...own,
    id: slug,
    traitId: `trait ${slug}`,
    estimatedAt: new Date(0),
  }));
  const { traits } = layOutNetwork({ ...makeEvidence(), usual }, 'all');
  for (const one of traits)
    expect(one.usual).toEqual({ site: 0.01, year: 0.02, rest: 0.03, source: 'own-trials' });
});

test('the error of each trial is pulled towards what the trials have in common', () => {
  const pooled = poolErrorVariances(errors).trials;
  const cells = yieldCells(makeEvidence());
  expect(cells).toHaveLength(8);
  for (const cell of cells) {
    const n = Number(cell.trial.slice(-1));
    expect(cell.variance).toBeCloseTo((pooled[n]?.ms ?? NaN) / 4, 12);
    expect(cell.df).toBe(pooled[n]?.df);
  }
  const poorest = cells.find((cell) => cell.trial === 'trial 1');
  expect(poorest?.variance).toBeLessThan(0.5 / 4);
});

test('a trial over the CV limit has no part in what the others have in common', () => {
  const evidence = makeEvidence();
  const weak = evidence.fits.map((fit, n) => (n === 1 ? { ...fit, residualMs: 9, cvPercent: 60 } : fit));
  const pooled = poolErrorVariances(errors.filter((_, n) => n !== 1)).trials;
  const cells = yieldCells({ ...evidence, fits: weak });
  expect(cells.find((cell) => cell.trial === 'trial 0')?.variance).toBeCloseTo(
    (pooled[0]?.ms ?? NaN) / 4,
    12,
  );
});

test('a variety under two labels counts once, with the average of both', () => {
  const evidence = makeEvidence();
  const [first] = evidence.means;
  if (first === undefined) throw new Error('there are means');
  const doubled = { ...evidence, means: [...evidence.means, { ...first, mean: first.mean + 1 }] };
  const before = yieldCells(evidence).find((cell) => cell.entry === 'a' && cell.trial === 'trial 0');
  const after = yieldCells(doubled).filter((cell) => cell.entry === 'a' && cell.trial === 'trial 0');
  expect(after).toHaveLength(1);
  expect(after[0]?.mean).toBe(5.5);
  expect(after[0]?.variance).toBeCloseTo((before?.variance ?? NaN) / 2, 12);
});

test('a mean without an error stays without one, so that the engine leaves its trial out', () => {
  const evidence = makeEvidence();
  const means = evidence.means.map((mean) =>
    mean.versionId === 'version 3' ? { ...mean, variance: null } : mean,
  );
  const cells = yieldCells({ ...evidence, means });
  expect(cells.filter((cell) => cell.variance === null).map((cell) => cell.trial)).toEqual([
    'trial 3',
    'trial 3',
  ]);
});

test('strips are told from small plots, and management only where it was said', () => {
  const evidence = makeEvidence();
  const trials = [trial(0, { fungicide: true, note: 'late' }), trial(1, { irrigated: '' }), trial(2)];
  const network = layOutNetwork({ ...evidence, trials }, 'all');
  expect(network.trials.map((one) => one.plotSize)).toEqual(['small-plots', 'small-plots', 'field-strips']);
  expect(network.trials.map((one) => one.management)).toEqual([{ fungicide: 'true' }, {}, {}]);
});
