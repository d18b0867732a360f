import { z } from 'zod';

export const cautionSeverity = z.enum(['note', 'warning', 'stop']);
export type CautionSeverity = z.infer<typeof cautionSeverity>;

/** Where the evidence stops. The sentence of each is `cautions:<code>`, with the numbers as its placeholders. */
export const cautionCodes = [
  'few-site-years',
  'one-season',
  'no-trial-in-region',
  'old-seasons',
  'never-together',
  'linked-through-check',
  'disconnected',
  'trial-left-out',
  'trial-weak-cv',
  'trial-f-not-significant',
  'large-interaction',
  'rests-on-usual-variance',
  'verdict-changes-with-variance',
  'best-of-many',
  'several-compared',
  'management-differs',
  'small-plots',
  'summary-trial',
  'summary-contradiction',
  'residuals-not-normal',
  'unequal-spread',
  'outlying-plot',
  'spatial-trend',
  'plots-excluded',
  'plots-missing',
  'single-author',
  'price-outside-sheet',
  'price-sheet-old',
  'no-seed-cost',
  'seed-treatment',
  'farm-saved-seed',
  'trial-corrected',
  'trial-withdrawn',
  'local-advice',
] as const;
export const cautionCode = z.enum(cautionCodes);
export type CautionCode = z.infer<typeof cautionCode>;

export const caution = z.object({
  code: cautionCode,
  severity: cautionSeverity,
  /** Placeholders of the sentence: numbers unrounded, names as stored. */
  values: z.record(z.string(), z.union([z.string(), z.number()])),
});
export type Caution = z.infer<typeof caution>;
