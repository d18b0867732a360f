import type { MoneyAssumptions } from '#shared/money.ts';
import type { CandidateResult, GapEstimate, WeighUp, WeighUpResult } from '#shared/weigh-up.ts';
import type { MoneyBasis } from '#shared/money-basis.ts';
import { weighMoney } from '#shared/partial-budget.ts';

/** The n-th invented id, which zod takes for a UUID. */
export function idOf(n: number): string {
  return `00000000-0000-4000-8000-${String(n).padStart(12, '0')}`;
}

export const currentId = idOf(1);

/** Of a question without levels: what money needs as long as net prices are alike. */
export const basis: MoneyBasis = { currentVarietyId: currentId, usualYield: null, levels: [] };

const seed = (seedPerHectare: number) => ({
  seedPerHectare,
  treatmentPerHectare: 0,
  royaltyPerHectare: 0,
});

export const assumptions: MoneyAssumptions = {
  currency: 'CAD',
  priceLow: 255,
  priceMiddle: 290,
  priceHigh: 340,
  haulagePerTonne: 12,
  dryingPerTonne: 8,
  seedCosts: { [currentId]: seed(118), [idOf(2)]: seed(148), [idOf(3)]: seed(118) },
  priceSheetDate: '2026-11-14',
};

export function buildGap(estimate: number, half: number): GapEstimate {
  return {
    estimate,
    se: half / 2,
    df: 20,
    p: 0.004,
    region: { low: estimate - half, high: estimate + half, level: 0.95 },
    ownSeason: { low: estimate - 2 * half, high: estimate + 2 * half, level: 0.95, se: half, df: 20 },
    shrunken: estimate * 0.9,
  };
}

/** A candidate with a gap and the money that goes with it. */
export function buildCandidate(change: Partial<CandidateResult> = {}): CandidateResult {
  const gap = change.gap === undefined ? buildGap(0.4, 0.2) : change.gap;
  const varietyId = change.varietyId ?? idOf(2);
  const moneyGap = gap === null ? null : { estimate: gap.estimate, se: gap.ownSeason?.se ?? 0.2, df: 20 };
  const moneyGapInRegion = gap === null ? null : { estimate: gap.estimate, se: gap.se, df: 20 };
  const traits = change.traits ?? [];
  return {
    varietyId,
    varietyName: 'Ostermoor',
    verdict: 'ahead',
    siteYears: 14,
    sharedSiteYears: 12,
    siteYearsToSettle: null,
    trials: [],
    cautions: [],
    moneyGap,
    moneyGapInRegion,
    money: weighMoney({ varietyId, moneyGap, moneyGapInRegion, traits }, basis, assumptions),
    ...change,
    traits,
    gap,
  };
}

export function buildWeighUp(change: Partial<WeighUp> = {}): WeighUp {
  return {
    id: idOf(90),
    revision: 3,
    ownerName: 'Ines Quarrel',
    cropId: idOf(80),
    cropName: { en: 'Field pea', fr: 'Pois sec' },
    regionId: idOf(70),
    regionName: { en: 'Lower Velmar', fr: 'Bas-Velmar' },
    seasonFrom: 2023,
    seasonTo: 2026,
    growerName: 'Maren Oske',
    farmName: 'Tallow Farm',
    areaHectares: 120,
    currentVarietyId: currentId,
    currentVarietyName: 'Brindle',
    candidateIds: [idOf(2)],
    question: 'several',
    assumptions,
    farmLatitude: null,
    farmLongitude: null,
    farmSeasonRainMm: null,
    farmHeatSumDegreeDays: null,
    farmSoilTexture: null,
    usualYield: null,
    trialChoice: 'region',
    includeNeighbours: false,
    tickedOff: [],
    createdAt: '2026-12-01T09:00:00.000Z',
    updatedAt: '2026-12-01T09:00:00.000Z',
    ...change,
  };
}

export function buildResult(candidates: CandidateResult[]): WeighUpResult {
  return {
    answer: 'weighed',
    computedAt: '2026-12-01T09:00:00.000Z',
    engineVersion: '1',
    comparison: 'lsd',
    sites: 6,
    seasons: [2023, 2026],
    trials: [],
    leftOut: [],
    components: { site: 0.1, season: 0.1, rest: 0.2 },
    usualVariancesFrom: 'crop-default',
    candidates,
    cautions: [],
  };
}
