import { demoCrops } from './demo-crops.ts';
import { demoSeed, yieldComponents, type CropSlug } from './demo-settings.ts';
import { openRandomSource } from './random-source.ts';

/** Effects by variety, in the trait's unit, as deviations from the mean of the crop's varieties. */
export type VarietyEffects = ReadonlyMap<string, number>;

/** What the fields of the demo were grown from; the engine never sees it, checks compare with it. */
export type CropTruth = {
  crop: CropSlug;
  /** By trait slug. */
  varieties: ReadonlyMap<string, VarietyEffects>;
};

/** Draws the true effects of every crop's varieties, centred so that gaps between them are what matters. */
export function drawTruth(): CropTruth[] {
  return demoCrops.map((crop) => ({
    crop: crop.slug,
    varieties: new Map(
      crop.traits.map((trait) => {
        const { variety: yieldSpread, gainPerYear } = yieldComponents[crop.slug];
        const spread = trait.grown?.variety ?? yieldSpread;
        const gain = trait.grown === null ? gainPerYear : 0;
        const random = openRandomSource(demoSeed, `truth ${crop.slug} ${trait.slug}`);
        const drawn = crop.varieties.map(
          (variety) => [variety.name, spread * random.normal() + gain * variety.from] as const,
        );
        const mean = drawn.reduce((sum, [, effect]) => sum + effect, 0) / drawn.length;
        return [trait.slug, new Map(drawn.map(([name, effect]) => [name, effect - mean]))] as const;
      }),
    ),
  }));
}

/** One draw of a named effect: the same label gives the same effect in every trial that asks. */
export function drawEffect(label: string, standardDeviation: number): number {
  return standardDeviation * openRandomSource(demoSeed, label).normal();
}
