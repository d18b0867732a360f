import { randomUUID } from 'node:crypto';
import type { Evidence, EvidenceTrial } from '#server/weigh-up/evidence.ts';
import type { Question } from '#server/weigh-up/question.ts';
import { randomOf } from '#tests/support/random-network.ts';

export type RegionPlan = {
  sites: number;
  seasons: number;
  varieties: number;
  /** numeric traits, the first of them yield */
  traits?: number;
  /** share of the trials that a variety stands in */
  presence?: number;
  seed?: number;
};

/** Evidence of a whole region, as the store gives it: a trial at each site in each season. */
export function growRegion(plan: RegionPlan): Evidence {
  const { sites, seasons, varieties, traits = 1, presence = 0.75, seed = 1 } = plan;
  const random = randomOf(seed);
  const varietyRows = Array.from({ length: varieties }, (_, i) => ({
    id: randomUUID(),
    name: `Variety ${i}`,
    isCheck: i === 0,
  }));
  const merits = varietyRows.map(() => random.normal(0, 0.3));
  const traitRows = Array.from({ length: traits }, (_, k) => growTrait(k === 0 ? 'yield' : `trait-${k}`));
  const trials = Array.from({ length: sites * seasons }, (_, j) =>
    growTrial(j % sites, Math.floor(j / sites)),
  );
  const cells = trials.flatMap(({ versionId }) =>
    traitRows.flatMap(({ id: traitId }) => {
      const level = random.normal(6, 1);
      const residualMs = 0.12 * random.between(0.5, 1.5);
      const means = varietyRows.flatMap(({ id, isCheck }, i) =>
        isCheck || random.uniform() < presence
          ? [{ versionId, traitId, varietyId: id, mean: level + merits[i]! + random.normal(0, 0.3) }]
          : [],
      );
      return { versionId, traitId, residualMs, level, means };
    }),
  );
  return {
    crop: { id: randomUUID(), cvLimitPercent: 15, typicalYield: 6 },
    traits: traitRows,
    varieties: varietyRows,
    trials,
    usual: [],
    fits: cells.map(({ versionId, traitId, residualMs, level, means }) => ({
      versionId,
      traitId,
      grandMean: level,
      residualMs,
      residualDf: 3 * (means.length - 1),
      cvPercent: 6,
      entryP: 0.001,
    })),
    means: cells.flatMap(({ means, residualMs }) =>
      means.map((mean) => ({ ...mean, variance: residualMs / 4, df: 3 * (means.length - 1) })),
    ),
  };
}

const growTrait = (slug: string): Evidence['traits'][number] => ({
  id: randomUUID(),
  slug,
  name: { en: slug, fr: slug },
  unit: 't/ha',
  kind: 'numeric',
  direction: 'higher',
  practicalMargin: 0.15,
  scaleMin: null,
  scaleMax: null,
});

const growTrial = (site: number, season: number): EvidenceTrial => ({
  trialId: randomUUID(),
  versionId: randomUUID(),
  version: 1,
  sha256: '',
  name: `Trial ${site} ${season}`,
  siteId: `site ${site}`,
  siteName: `Site ${site}`,
  place: { latitude: 50, longitude: -100, seasonRainMm: 250, heatSumDegreeDays: 1500, soilTexture: 'loam' },
  regionId: 'north',
  regionName: { en: 'North', fr: 'Nord' },
  inRegion: true,
  season: 2020 + season,
  kind: 'plots',
  isStrips: false,
  management: {},
});

/** All varieties against the first. */
export function askAboutAll({ varieties }: Evidence, traits: Question['traits']): Question {
  const [current, ...others] = varieties.map(({ id }) => id);
  return {
    currentVarietyId: current ?? '',
    candidateIds: others,
    kind: 'several',
    list: [],
    traits,
    acceptsOtherRegions: false,
    askedInSeason: 2026,
    margins: {},
  };
}
