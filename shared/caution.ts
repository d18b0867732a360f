import { z } from 'zod';

export const cautionSeverity = z.enum(['note', 'warning', 'stop']);
export type CautionSeverity = z.infer<typeof cautionSeverity>;

/**
 * Where the evidence stops: every caution with the placeholders its sentence always needs, `cautions:<code>` in locales/.
 * `count` is the number the sentence counts by, `context` picks one of its variants (`<code>_<context>`);
 * percents, prices and t/ha come unrounded, names as stored.
 */
export const cautionValues = {
  'few-site-years': ['variety', 'count'],
  'one-season': ['variety', 'season'],
  'no-trial-in-region': [],
  'old-seasons': ['variety', 'season'],
  'never-together': ['variety', 'current'],
  'linked-through-check': ['variety', 'current', 'checks'],
  disconnected: ['variety', 'current'],
  'trial-left-out': ['site', 'season', 'context'],
  'trial-weak-cv': ['cv', 'limit'],
  'trial-f-not-significant': ['p'],
  'large-interaction': ['sd'],
  'rests-on-usual-variance': ['context'],
  'no-usual-variance': [],
  'verdict-changes-with-variance': ['variety'],
  'best-of-many': ['variety', 'count', 'estimate', 'shrunken'],
  'several-compared': ['count'],
  'management-differs': [],
  'small-plots': [],
  'summary-trial': [],
  'summary-contradiction': ['given', 'expected'],
  'residuals-not-normal': ['p'],
  'unequal-spread': ['p'],
  'outlying-plot': ['plot', 'value', 'p'],
  'spatial-trend': [],
  'plots-excluded': ['count', 'total'],
  'plots-missing': ['count', 'total'],
  'single-author': [],
  'price-outside-sheet': [],
  'price-sheet-old': ['date'],
  'no-seed-cost': ['variety'],
  'seed-treatment': [],
  'farm-saved-seed': [],
  'trial-corrected': ['site', 'season'],
  'trial-withdrawn': ['site', 'season'],
  'local-advice': [],
} as const satisfies Record<string, readonly string[]>;

/** Placeholders that only a variant of a sentence has. */
type VariantValue = 'context' | 'count' | 'site' | 'season' | 'cv' | 'limit';

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

type Value = string | number;

/** Builds a caution with every value its sentence needs. */
export function makeCaution<Code extends CautionCode>(
  code: Code,
  severity: CautionSeverity,
  values: Record<(typeof cautionValues)[Code][number], Value> & Partial<Record<VariantValue, Value>>,
): Caution {
  return { code, severity, values };
}
