import { z } from 'zod';

export const cautionSeverity = z.enum(['note', 'warning', 'stop']);
export type CautionSeverity = z.infer<typeof cautionSeverity>;

/**
 * Where the evidence stops: every caution with the placeholders of its sentence, `cautions:<code>` in locales/.
 * `count` is the number the sentence counts by; percents, prices and t/ha come unrounded; names as stored.
 */
export const cautionValues = {
  'few-site-years': ['variety', 'count'],
  'one-season': ['season'],
  'no-trial-in-region': ['seasonFrom', 'seasonTo'],
  'old-seasons': ['newestSeason', 'count'],
  'never-together': ['variety', 'current'],
  'linked-through-check': ['variety', 'current', 'checks'],
  disconnected: ['variety', 'current'],
  'trial-left-out': ['site', 'season'],
  'trial-weak-cv': ['site', 'season', 'cvPercent', 'limitPercent'],
  'trial-f-not-significant': ['site', 'season', 'p'],
  'large-interaction': ['interactionSd', 'usualSd'],
  'rests-on-usual-variance': ['season'],
  'no-usual-variance': [],
  'verdict-changes-with-variance': ['variety'],
  'best-of-many': ['variety', 'count', 'gap', 'shrunken'],
  'several-compared': ['count'],
  'management-differs': [],
  'small-plots': [],
  'summary-trial': [],
  'some-summary-trials': ['count', 'trials'],
  'summary-contradiction': ['given', 'recovered'],
  'residuals-not-normal': ['p'],
  'unequal-spread': ['p'],
  'outlying-plot': ['plot', 'p'],
  'spatial-trend': ['p'],
  'plots-excluded': ['count'],
  'plots-missing': ['count'],
  'single-author': ['author'],
  'price-outside-sheet': ['price', 'sheetLow', 'sheetHigh', 'currency'],
  'price-sheet-old': ['date'],
  'no-price-sheet': [],
  'no-seed-cost': ['variety'],
  'seed-treatment': [],
  'farm-saved-seed': [],
  'trial-corrected': ['site', 'season'],
  'trial-withdrawn': ['site', 'season'],
  'local-advice': [],
} as const satisfies Record<string, readonly string[]>;

export type CautionCode = keyof typeof cautionValues;

// Object.keys forgets the literal types; the table has exactly these keys.
export const cautionCodes = Object.keys(cautionValues) as [CautionCode, ...CautionCode[]];
export const cautionCode = z.enum(cautionCodes);

export const caution = z.object({
  code: cautionCode,
  severity: cautionSeverity,
  /** The placeholders of the sentence: numbers unrounded, names as stored. */
  values: z.record(z.string(), z.union([z.string(), z.number()])),
});
export type Caution = z.infer<typeof caution>;

/** Builds a caution with every value its sentence needs. */
export function makeCaution<Code extends CautionCode>(
  code: Code,
  severity: CautionSeverity,
  values: Record<(typeof cautionValues)[Code][number], string | number>,
): Caution {
  return { code, severity, values };
}
