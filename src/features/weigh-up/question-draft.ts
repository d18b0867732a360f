import type { Crop, Region } from '#shared/catalogue.ts';
import { isPairOfOne, questionKinds, type QuestionKind } from '#shared/question-kind.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import type { Catalogue } from '#src/catalogue-query.ts';
import { readChoice } from '#src/url-state.ts';
import {
  listKnownPlaces,
  readFarmParameter,
  toTrialFields,
  trialChoices,
  type ChosenFarm,
  type ChosenTrials,
} from './chosen-farm.ts';
import type { CandidateQuestion } from './weigh-up-queries.ts';

/** Most candidates of one weigh-up; the contract refuses more. */
export const mostCandidates = 8;

/** How many seasons a new question spans by default, as the trade usually looks back. */
const usualSpan = 3;

/** The question as the address holds it, with what could be made of it. */
export type QuestionDraft = {
  crop: Crop | undefined;
  region: Region | undefined;
  seasonFrom: number;
  seasonTo: number;
  currentVarietyId: string;
  kind: QuestionKind;
  candidateIds: readonly string[];
  farm: ChosenFarm | null;
  trials: ChosenTrials;
};

/** Reads the question from the address: crop and region by slug, varieties and place by id; what the catalogue lacks is dropped. */
export function readQuestion(search: URLSearchParams, catalogue: Catalogue): QuestionDraft {
  const crop = catalogue.crops.find(({ slug }) => slug === search.get('crop'));
  const region = catalogue.regions.find(({ slug }) => slug === search.get('region'));
  const seasons = crop?.seasons ?? [];
  const newest = Math.max(...seasons, 0);
  const oldest = Math.min(...seasons, newest);
  const season = (name: string, otherwise: number) => {
    const asked = Number(search.get(name));
    return seasons.includes(asked) ? asked : otherwise;
  };
  const isVariety = (id: string) => crop?.varieties.some((variety) => variety.id === id) === true;
  const current = search.get('current') ?? '';
  const currentVarietyId = isVariety(current) ? current : '';
  const candidateIds = (search.get('candidates') ?? '')
    .split(',')
    .filter((id, place, all) => isVariety(id) && id !== currentVarietyId && all.indexOf(id) === place)
    .slice(0, mostCandidates);
  const kind = readChoice(search, 'question', questionKinds);
  const farm = readFarmParameter(search.get('farm'), listKnownPlaces(catalogue));
  const trials = readChoice(search, 'trials', trialChoices);
  return {
    crop,
    region,
    seasonFrom: season('from', Math.max(oldest, newest - usualSpan + 1)),
    seasonTo: season('to', newest),
    currentVarietyId,
    kind,
    // Those kept for another kind of question stay in the address, for whoever turns back to it.
    candidateIds: isPairOfOne({ question: kind, candidateIds }) ? candidateIds : [],
    farm,
    trials: trials === 'nearest' && farm === null ? 'region' : trials,
  };
}

/**
 * Parts the candidates that the address names into those that stood in the trials that answer, and those that did not:
 * a trial withdrawn or a span narrowed since must not leave one chosen that nobody sees.
 */
export function partByStanding(
  candidateIds: readonly string[],
  candidates: readonly Pick<CandidateResult, 'varietyId'>[],
): { standingIds: string[]; goneIds: string[] } {
  const stood = new Set(candidates.map(({ varietyId }) => varietyId));
  return {
    standingIds: candidateIds.filter((id) => stood.has(id)),
    goneIds: candidateIds.filter((id) => !stood.has(id)),
  };
}

/** Whether the region has no published trial of the crop, and no others are asked: then there is no verdict, and it is said at once. */
export function lacksTrials({ crop, region, trials }: QuestionDraft): boolean {
  if (trials !== 'region') return false;
  return crop !== undefined && region !== undefined && (region.publishedTrials[crop.slug] ?? 0) === 0;
}

/** The question for the list of candidates; null until it is whole. */
export function toCandidateQuestion(draft: QuestionDraft): CandidateQuestion | null {
  const { crop, region, seasonFrom, seasonTo, currentVarietyId, farm, trials } = draft;
  if (!crop || !region || currentVarietyId === '' || seasonFrom > seasonTo || lacksTrials(draft)) return null;
  return {
    ...{ cropId: crop.id, regionId: region.id, seasonFrom, seasonTo, currentVarietyId },
    ...toTrialFields(trials),
    farmLatitude: farm?.latitude,
    farmLongitude: farm?.longitude,
    farmSeasonRainMm: farm?.seasonRainMm ?? undefined,
    farmHeatSumDegreeDays: farm?.heatSumDegreeDays ?? undefined,
    farmSoilTexture: farm?.soilTexture ?? undefined,
  };
}
