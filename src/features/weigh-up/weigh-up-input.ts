import type { WeighUp, WeighUpInput } from '#shared/weigh-up.ts';

/** The question of a weigh-up as it is saved: whole, so that nothing of it is lost with a change of one part. */
export function toInput(weighUp: WeighUp): WeighUpInput {
  const { cropId, regionId, seasonFrom, seasonTo, growerName, farmName, areaHectares } = weighUp;
  const {
    currentVarietyId,
    candidateIds,
    question,
    assumptions,
    usualYield,
    trialChoice,
    includeNeighbours,
  } = weighUp;
  const { farmLatitude, farmLongitude, farmSeasonRainMm, farmHeatSumDegreeDays, farmSoilTexture } = weighUp;
  return {
    ...{ cropId, regionId, seasonFrom, seasonTo, growerName, farmName, areaHectares },
    ...{ currentVarietyId, candidateIds, question, assumptions, usualYield, trialChoice, includeNeighbours },
    ...{ farmLatitude, farmLongitude, farmSeasonRainMm, farmHeatSumDegreeDays, farmSoilTexture },
  };
}
