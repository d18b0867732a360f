import { z } from 'zod';

/** Textures of the topsoil from the lightest to the heaviest: one step apart is much alike. */
export const soilTextures = ['sand', 'sandy-loam', 'loam', 'silt-loam', 'clay-loam', 'clay'] as const;
export const soilTexture = z.enum(soilTextures);
export type SoilTexture = z.infer<typeof soilTexture>;

/** region: its trials; nearest: those of the sites nearest the farm, whatever region they lie in. */
export const trialChoice = z.enum(['region', 'nearest']);
export type TrialChoice = z.infer<typeof trialChoice>;

const latitude = z.number().min(-90).max(90);
const longitude = z.number().min(-180).max(180);
/** mm in the growing season */
const rain = z.number().min(0).max(5000);
/** °C·d in the growing season */
const heatSum = z.number().min(0).max(8000);
/** t/ha at standard moisture */
const usualYield = z.number().positive().max(100);

/** Where the farm lies and what it usually yields, as a question is asked: whatever is left out is not known. */
export const farmInput = {
  farmLatitude: latitude.nullish(),
  farmLongitude: longitude.nullish(),
  farmSeasonRainMm: rain.nullish(),
  farmHeatSumDegreeDays: heatSum.nullish(),
  farmSoilTexture: soilTexture.nullish(),
  usualYield: usualYield.nullish(),
  trialChoice: trialChoice.optional(),
  /** Adds the trials of neighbouring regions to the region's own. */
  includeNeighbours: z.boolean().optional(),
};

/** The same as it is answered: copies made before the farm was asked for read as "not known". */
export const farmAnswer = {
  farmLatitude: latitude.nullable().default(null),
  farmLongitude: longitude.nullable().default(null),
  farmSeasonRainMm: rain.nullable().default(null),
  farmHeatSumDegreeDays: heatSum.nullable().default(null),
  farmSoilTexture: soilTexture.nullable().default(null),
  usualYield: usualYield.nullable().default(null),
  trialChoice: trialChoice.default('region'),
  includeNeighbours: z.boolean().default(false),
};

/** The same in an address. A list of candidates is not read at the usual yield, so it is not asked for. */
export const farmQuery = {
  farmLatitude: z.coerce.number().pipe(latitude).optional(),
  farmLongitude: z.coerce.number().pipe(longitude).optional(),
  farmSeasonRainMm: z.coerce.number().pipe(rain).optional(),
  farmHeatSumDegreeDays: z.coerce.number().pipe(heatSum).optional(),
  farmSoilTexture: soilTexture.optional(),
  trialChoice: trialChoice.optional(),
  includeNeighbours: z.union([z.boolean(), z.stringbool()]).optional(),
};

type AskedPlace = {
  farmLatitude?: number | null | undefined;
  farmLongitude?: number | null | undefined;
  trialChoice?: TrialChoice | undefined;
};

/** A latitude without a longitude is no place. */
export const isWholePlace = ({ farmLatitude, farmLongitude }: AskedPlace): boolean =>
  (farmLatitude ?? null) === null ? (farmLongitude ?? null) === null : (farmLongitude ?? null) !== null;

/** The nearest sites can only be found from a place. */
export const hasPlaceForChoice = ({ farmLatitude, trialChoice }: AskedPlace): boolean =>
  trialChoice !== 'nearest' || (farmLatitude ?? null) !== null;

/** How the farm lies to the sites of the trials that a question rests on. */
export const farmRange = z.object({
  sites: z.number().int(),
  nearestSite: z.string(),
  nearestKm: z.number(),
  /** Mean standardised distance to the (at most three) sites most like the farm; null where its rain, heat and soil are unknown. */
  standardisedDistance: z.number().nullable(),
  /** Sites like the farm in what is known of its rain, heat and soil. */
  similarSites: z.number().int().nullable(),
});
export type FarmRange = z.infer<typeof farmRange>;
