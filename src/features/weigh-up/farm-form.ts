import { z } from 'zod';
import { soilTexture } from '#shared/farm.ts';
import { weighUpInput, type WeighUp, type WeighUpInput } from '#shared/weigh-up.ts';
import { readTrialFields, toTrialFields, trialChoices } from './chosen-farm.ts';
import { toInput } from './weigh-up-input.ts';

const { farmLatitude, farmLongitude, farmSeasonRainMm, farmHeatSumDegreeDays, usualYield } =
  weighUpInput.shape;

/** What the farm's panel holds; a figure that is not known stays open. */
export const farmForm = z
  .object({
    latitude: farmLatitude.unwrap(),
    longitude: farmLongitude.unwrap(),
    seasonRainMm: farmSeasonRainMm.unwrap(),
    heatSumDegreeDays: farmHeatSumDegreeDays.unwrap(),
    soilTexture: soilTexture.nullable(),
    usualYield: usualYield.unwrap(),
    trials: z.enum(trialChoices),
  })
  .refine((form) => form.trials !== 'nearest' || form.latitude !== null, {
    path: ['trials'],
    message: 'nearest-needs-farm',
  });
export type FarmForm = z.output<typeof farmForm>;
export type FarmDraft = z.input<typeof farmForm>;

export function toFarmDraft(weighUp: WeighUp): FarmDraft {
  return {
    latitude: weighUp.farmLatitude,
    longitude: weighUp.farmLongitude,
    seasonRainMm: weighUp.farmSeasonRainMm,
    heatSumDegreeDays: weighUp.farmHeatSumDegreeDays,
    soilTexture: weighUp.farmSoilTexture,
    usualYield: weighUp.usualYield,
    trials: readTrialFields(weighUp),
  };
}

/** The whole weigh-up with the panel's farm, as it is saved. */
export function toInputWithFarm(weighUp: WeighUp, form: FarmForm): WeighUpInput {
  return {
    ...toInput(weighUp),
    farmLatitude: form.latitude,
    farmLongitude: form.longitude,
    farmSeasonRainMm: form.seasonRainMm,
    farmHeatSumDegreeDays: form.heatSumDegreeDays,
    farmSoilTexture: form.soilTexture,
    usualYield: form.usualYield,
    ...toTrialFields(form.trials),
  };
}
