import { z } from 'zod';
import { bilingualName, type BilingualName } from './catalogue.ts';

export const cautionSeverity = z.enum(['note', 'warning', 'stop']);
export type CautionSeverity = z.infer<typeof cautionSeverity>;

/**
 * Where the evidence stops: every caution with the placeholders its sentence always needs, `cautions:<code>` in locales/.
 * `count` is the number the sentence counts by, `context` picks one of its variants (`<code>_<context>`);
 * percents, prices, t/ha, mm, °C·d and km come unrounded, names as stored; regions and sites as a list of names in both languages.
 */
export const cautionValues = {
  'few-site-years': ['variety', 'count'],
  'one-season': ['variety', 'season'],
  'no-trial-in-region': [],
  'trials-from-elsewhere': ['count', 'regions'],
  'farm-far': ['site', 'distance', 'count'],
  'farm-drier': ['difference', 'count'],
  'farm-wetter': ['difference', 'count'],
  'farm-cooler': ['difference', 'count'],
  'farm-warmer': ['difference', 'count'],
  'farm-lighter-soil': ['count'],
  'farm-heavier-soil': ['count'],
  'farm-other-soil': ['count'],
  'farm-unlike-sites': ['similar', 'count', 'distance'],
  'usual-yield-outside-trials': ['variety', 'yield', 'from', 'to'],
  'no-yield-line': ['variety', 'current'],
  'old-seasons': ['variety', 'season'],
  'never-together': ['variety', 'current'],
  'linked-through-check': ['variety', 'current', 'checks'],
  disconnected: ['variety', 'current'],
  'trial-ticked-off': ['count', 'sites'],
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
  'local-advice': [],
} as const satisfies Record<string, readonly string[]>;

/** Placeholders that only a variant of a sentence has. */
type VariantValue =
  | 'context'
  | 'count'
  | 'site'
  | 'season'
  | 'cv'
  | 'limit'
  | 'regions'
  | 'lsd'
  | 'usual'
  | 'share'
  | 'variety'
  | 'from'
  | 'to';

export type CautionCode = keyof typeof cautionValues;

// Object.keys forgets the literal types; the table has exactly these keys.
export const cautionCodes = Object.keys(cautionValues) as [CautionCode, ...CautionCode[]];
export const cautionCode = z.enum(cautionCodes);

export const caution = z.object({
  code: cautionCode,
  severity: cautionSeverity,
  /** The placeholders of the sentence: numbers unrounded, names as stored. */
  values: z.record(z.string(), z.union([z.string(), z.number(), z.array(bilingualName)])),
});
export type Caution = z.infer<typeof caution>;

type Value = string | number | BilingualName[];

/** Builds a caution with every value its sentence needs. */
export function makeCaution<Code extends CautionCode>(
  code: Code,
  severity: CautionSeverity,
  values: Record<(typeof cautionValues)[Code][number], Value> & Partial<Record<VariantValue, Value>>,
): Caution {
  return { code, severity, values };
}
