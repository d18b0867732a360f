import type { Caution } from '#shared/caution.ts';
import type { Trait } from '#shared/catalogue.ts';
import type { BestOfList } from '#shared/question-kind.ts';
import type { CandidateResult, GapEstimate, TrialGap, UsedTrial } from '#shared/weigh-up.ts';
import { storedUnits } from '#shared/reader-units.ts';
import { presentSentences } from '#server/grower-copy/copy-sentences.ts';
import type { PrintOrder } from '#server/grower-copy/pdf/printed-copy.ts';

/** The n-th invented id. */
const idOf = (n: number): string => `00000000-0000-4000-8000-${String(n).padStart(12, '0')}`;

const currentId = idOf(1);

function buildGap(estimate: number): GapEstimate {
  return {
    estimate,
    se: 0.11,
    df: 18,
    p: 0.0125,
    region: { low: estimate - 0.28, high: estimate + 0.28, level: 0.95 },
    ownSeason: { low: estimate - 0.71, high: estimate + 0.71, level: 0.95, se: 0.3, df: 18 },
    shrunken: estimate * 0.8,
  };
}

/** Trials of one name each, poor sites last so that sorting shows. */
const trialGaps = (count: number, estimate: number): TrialGap[] =>
  Array.from({ length: count }, (_, i) => ({
    trialId: idOf(500 + i),
    siteName: `Site ${i + 1}`,
    season: 2022 + (i % 4),
    trialMean: 6 - i * 0.1,
    estimate: estimate + (i % 3) * 0.1,
    interval: { low: estimate - 0.4, high: estimate + 0.6, level: 0.95 },
  }));

export function buildCandidate(
  n: number,
  name: string,
  change: Partial<CandidateResult> = {},
): CandidateResult {
  const gap = change.gap === undefined ? buildGap(0.5 - n * 0.11) : change.gap;
  const estimate = gap?.estimate ?? 0;
  return {
    varietyId: idOf(100 + n),
    varietyName: name,
    verdict: n === 0 ? 'ahead' : 'open',
    siteYears: 12,
    sharedSiteYears: 11,
    siteYearsToSettle: n === 0 ? null : 7,
    moneyGap: gap && { estimate: estimate * 0.8, se: 0.3, df: 18 },
    money: gap && {
      extraCostPerHectare: 23,
      breakEvenGap: 0.09,
      returnPerHectare: 71.6 - n,
      returnAtLowPrice: 55,
      returnAtHighPrice: 92,
      breakEvenPrice: 77.5,
      breakEvenSeedCost: 190,
      chancePays: 0.86,
      verdict: 'likely',
    },
    trials: trialGaps(11, estimate),
    traits: [
      {
        traitSlug: 'protein',
        kind: 'numeric',
        verdict: 'behind',
        gap: { ...buildGap(-0.4), ownSeason: null },
        siteYears: 9,
        medianCandidate: null,
        medianCurrent: null,
      },
      {
        traitSlug: 'lodging',
        kind: 'ordinal',
        verdict: null,
        gap: null,
        siteYears: 6,
        medianCandidate: 2.5,
        medianCurrent: 4,
      },
    ],
    cautions: [],
    ...change,
    gap,
  };
}

const traitOf = (n: number, slug: string, unit: string, kind: Trait['kind']): Trait => ({
  id: idOf(300 + n),
  slug,
  name: { en: `${slug} of the grain`, fr: `${slug} du grain` },
  unit,
  kind,
  direction: 'higher',
  practicalMargin: null,
  scaleMin: null,
  scaleMax: null,
});

const usedTrials = (count: number): UsedTrial[] =>
  Array.from({ length: count }, (_, i) => ({
    trialId: idOf(500 + i),
    name: `Variety trial ${i + 1}`,
    siteName: `Site ${i + 1}`,
    season: 2022 + (i % 4),
    version: 1 + (i % 2),
    sha256: 'a'.repeat(64),
    meanYield: 6 - i * 0.1,
    cvPercent: 6.2,
  }));

/** Cautions that are all different sentences, so that each has to be printed. */
export const manyCautions = (count: number): Caution[] =>
  Array.from({ length: count }, (_, i) => ({
    code: 'farm-far',
    severity: i % 3 === 0 ? 'warning' : 'note',
    values: { site: `Faraway ${i + 1}`, distance: 130 + i, count: 5 },
  }));

type OrderChange = Partial<Omit<PrintOrder, 'snapshot'>> & {
  candidates?: CandidateResult[];
  cautions?: Caution[];
  trials?: number;
  leftOut?: PrintOrder['snapshot']['result']['leftOut'];
  answer?: 'weighed' | 'no-trials';
  best?: BestOfList | null;
};

/** A copy to be put on paper. */
export function buildOrder({
  candidates = [buildCandidate(0, 'Quillane'), buildCandidate(1, 'Ostermay')],
  cautions = [],
  trials = 12,
  leftOut = [],
  answer = 'weighed',
  best = null,
  ...change
}: OrderChange = {}): PrintOrder {
  const language = change.language ?? 'en';
  return {
    laterChanges: [],
    expiresAt: '2027-12-01T09:00:00.000Z',
    link: 'https://gavelrow.example.org/copy/Zk3xJ8q2LmN4pR7tVwXyA1bC5dE6fG9h',
    language,
    sentences: presentSentences[language],
    readerUnits: storedUnits,
    paper: 'a4',
    printedAt: '2026-12-02T15:00:00.000Z',
    ...change,
    snapshot: {
      format: 1,
      advisorName: 'Wren Halloway',
      advisorEmail: 'advisor@example.org',
      advisorPhone: '555-0142',
      madeAt: '2026-12-01T15:00:00.000Z',
      engineVersion: '1',
      traits: [
        traitOf(0, 'yield', 't/ha', 'numeric'),
        traitOf(1, 'protein', '%', 'numeric'),
        traitOf(2, 'lodging', '', 'ordinal'),
      ],
      weighUp: buildWeighUp(candidates),
      result: {
        answer,
        computedAt: '2026-12-01T15:00:00.000Z',
        engineVersion: '1',
        comparison: 'dunnett',
        best,
        sites: 5,
        seasons: [2022, 2025],
        trials: usedTrials(trials),
        leftOut,
        components: { site: 0.11, season: 0.12, rest: 0.18 },
        usualVariancesFrom: 'crop-default',
        candidates,
        cautions,
      },
    },
  };
}

function buildWeighUp(candidates: readonly CandidateResult[]): PrintOrder['snapshot']['weighUp'] {
  return {
    id: idOf(90),
    revision: 1,
    ownerName: 'Wren Halloway',
    cropId: idOf(80),
    cropName: { en: 'Spring barley', fr: 'Orge de printemps' },
    regionId: idOf(70),
    regionName: { en: 'Upper Velmar', fr: 'Haut-Velmar' },
    seasonFrom: 2022,
    seasonTo: 2025,
    growerName: 'Joss Penhallow',
    farmName: 'Cold Acre',
    areaHectares: 120,
    currentVarietyId: currentId,
    currentVarietyName: 'Tamberlow',
    candidateIds: candidates.map(({ varietyId }) => varietyId),
    assumptions: {
      currency: 'CAD',
      priceLow: 221,
      priceMiddle: 258,
      priceHigh: 301,
      haulagePerTonne: 12,
      dryingPerTonne: 8,
      seedCosts: {},
      priceSheetDate: '2026-10-15',
    },
    farmLatitude: null,
    farmLongitude: null,
    farmSeasonRainMm: null,
    farmHeatSumDegreeDays: null,
    farmSoilTexture: null,
    usualYield: null,
    trialChoice: 'region',
    includeNeighbours: false,
    tickedOff: [],
    question: 'several',
    createdAt: '2026-12-01T09:00:00.000Z',
    updatedAt: '2026-12-01T09:00:00.000Z',
  };
}
