import type { TrialContent } from '#shared/trial-content.ts';
import { demoCrops } from './demo-crops.ts';
import { planDemo, type PlannedTrial } from './demo-plan.ts';
import { writePriceSheets, type DemoPriceSheet } from './demo-prices.ts';
import { drawTruth, type CropTruth } from './demo-truth.ts';
import { growTrial } from './grow-trial.ts';

export type DemoTrial = { planned: PlannedTrial; content: TrialContent };

export type DemoScenario = {
  trials: DemoTrial[];
  priceSheets: DemoPriceSheet[];
  /** True effects that the trials were grown from, for checks of the engine. */
  truth: CropTruth[];
};

/** Makes the whole scenario in memory; the same at every run and on every machine. */
export function generateDemo(): DemoScenario {
  const truth = drawTruth();
  const trials = planDemo().map((planned) => {
    const crop = demoCrops.find((one) => one.slug === planned.crop);
    const cropTruth = truth.find((one) => one.crop === planned.crop);
    if (crop === undefined || cropTruth === undefined) throw new Error(`No crop ${planned.crop} in the demo`);
    return { planned, content: growTrial(planned, crop, cropTruth) };
  });
  return { trials, priceSheets: writePriceSheets(), truth };
}
