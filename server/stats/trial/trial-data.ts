/** The eight designs the engine knows. */
export const designKinds = [
  'crd',
  'rcbd',
  'latin-square',
  'incomplete-blocks',
  'row-column',
  'split-plot',
  'factorial',
  'strips',
] as const;
export type DesignKind = (typeof designKinds)[number];

/** One plot of one trial, for one trait. Labels of any script; `value` in the trait's unit, null where not measured. */
export interface TrialPlot {
  readonly plot: string;
  readonly entry: string;
  readonly rep?: string | null;
  readonly block?: string | null;
  readonly row?: string | number | null;
  readonly col?: string | number | null;
  /** level of the factor on main plots (split plot) */
  readonly main?: string | null;
  /** level of the factor on subplots (split plot); the entry where absent */
  readonly sub?: string | null;
  /** levels by factor name (factorial) */
  readonly factors?: Readonly<Record<string, string>> | null;
  readonly value: number | null;
  /** the reason why the plot is left out; absent, null or '' where it counts */
  readonly excluded?: string | null;
}

/** Parts of a design whose terms may carry another name in the tables. */
export type DesignPart = 'entry' | 'rep' | 'block' | 'row' | 'col' | 'main' | 'sub';

export interface TrialDesign {
  readonly kind: DesignKind;
  /** names of the factors of a factorial, in the order of the tables */
  readonly factors?: readonly string[];
  /** names of the terms in the analysis of variance, where they are not those of the parts */
  readonly termNames?: Readonly<Partial<Record<DesignPart, string>>>;
}

export interface TrialOptions {
  /** the entry that Dunnett's test compares the others with */
  readonly check?: string | null;
  /** the level of "different" in the groups; 0.05 unless told */
  readonly alpha?: number;
  /** whether a value below 0 is accepted (a yield cannot be negative, a change in grain moisture can) */
  readonly allowNegative?: boolean;
  /** whether spatial models are fitted beside the design's, where rows and columns are known */
  readonly spatial?: boolean;
  /** whether every entry is compared with the best of the others by Hsu's method */
  readonly comparisons?: boolean;
  /** which end of the trait is the better one, for the comparison with the best; 'higher' unless told */
  readonly better?: 'higher' | 'lower';
  /** whether non-additivity, trends over the field, likeness of neighbours and repeatability are computed */
  readonly checks?: boolean;
}

/** Limits above which an analysis is refused rather than run for minutes. */
export const trialLimits = {
  plots: 20_000,
  /** entries (or combinations of factors) in one table of means; the gaps grow with the square */
  entries: 500,
  /** fixed parameters */
  parameters: 1_500,
  /** levels of all random terms together */
  randomLevels: 1_200,
} as const;
