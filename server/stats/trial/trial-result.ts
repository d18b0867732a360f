import type { DesignKind } from './trial-data.ts';

/** All of this is plain JSON: what is not defined is null, never NaN. Values carry full precision in the trait's unit. */

export interface AdjustedMean {
  readonly entry: string;
  /** plots used */
  readonly n: number;
  /** adjusted mean; null where not estimable */
  readonly mean: number | null;
  readonly se: number | null;
  readonly df: number | null;
  readonly estimable: boolean;
  /** plain mean of the plots used; null without plots */
  readonly rawMean: number | null;
}

/** a − b. Without a residual variance (se null) or with one of 0 there is no t and no p. */
export interface Gap {
  readonly a: string;
  readonly b: string;
  readonly estimate: number | null;
  readonly se: number | null;
  readonly df: number | null;
  readonly t: number | null;
  readonly p: number | null;
  readonly lsd05: number | null;
  readonly lsd10: number | null;
  readonly lsd01: number | null;
  readonly pTukey: number | null;
  readonly pHolm: number | null;
  readonly pBonferroni: number | null;
  readonly estimable: boolean;
}

export interface VarianceRow {
  /** name of the term, or "residual" */
  readonly term: string;
  readonly df: number;
  /** residual df, or Kenward–Roger's */
  readonly denDf: number | null;
  /** marginal (type III); null in a model with random effects */
  readonly ss: number | null;
  readonly ms: number | null;
  readonly f: number | null;
  readonly p: number | null;
  /** in the order of the table, blocks first; absent in a model with random effects */
  readonly sequential?: { df: number; ss: number; ms: number | null; f: number | null; p: number | null };
}

export interface LsdSummary {
  readonly mean: number;
  readonly min: number;
  readonly max: number;
}

export interface DunnettRow {
  readonly entry: string;
  /** entry − check */
  readonly estimate: number;
  readonly se: number;
  readonly df: number;
  readonly t: number;
  readonly p: number;
}

export interface DunnettResult {
  readonly check: string;
  readonly rows: readonly DunnettRow[];
  /** largest error to expect of a p */
  readonly maxError: number;
}

/** What the analysis found about itself; the page has a sentence for each code. */
export type TrialNotice =
  | { readonly code: 'no-residual-df' }
  | { readonly code: 'zero-residual-variance' }
  | { readonly code: 'entry-without-data'; readonly entries: readonly string[] }
  | { readonly code: 'disconnected'; readonly parts: readonly (readonly string[])[] }
  | { readonly code: 'term-confounded'; readonly terms: readonly string[] }
  | { readonly code: 'means-not-estimable'; readonly entries: readonly string[] }
  | { readonly code: 'component-not-identifiable'; readonly components: readonly string[] }
  | { readonly code: 'component-at-zero'; readonly components: readonly string[] }
  | { readonly code: 'not-converged' }
  | { readonly code: 'groups-too-many' };

export interface FitSummary {
  readonly method: 'ols' | 'reml';
  readonly plots: number;
  readonly used: number;
  readonly grandMean: number;
  /** plots used − rank of the fixed part */
  readonly residualDf: number;
  /** residual mean square, or the residual component of REML; null without residual df */
  readonly residualMs: number | null;
  readonly cvPercent: number | null;
  /** 1 − RSS/TSS of a fixed model; null for REML */
  readonly r2: number | null;
  readonly components: readonly { readonly name: string; readonly variance: number }[];
  /** ordinary for a fixed model; restricted, with ½ log|X'X| added, for REML */
  readonly logLik: number | null;
  readonly converged: boolean;
  readonly iterations: number;
}

export interface FamilyTable {
  readonly means: readonly AdjustedMean[];
  readonly gaps: readonly Gap[];
  readonly lsd: Readonly<Record<string, LsdSummary>>;
  readonly groups: readonly (readonly string[])[];
}

export interface PlotResidual {
  readonly plot: string;
  readonly fitted: number;
  readonly residual: number;
  readonly leverage: number | null;
  readonly studentised: number | null;
}

export interface TestResult {
  readonly f: number;
  readonly df1: number;
  readonly df2: number;
  readonly p: number;
}

export interface TrialDiagnostics {
  readonly shapiroWilk: { readonly w: number; readonly p: number } | null;
  /** of the residuals, over entries */
  readonly brownForsythe: TestResult | null;
  /** of the residuals, over blocks (or reps, rows) */
  readonly brownForsytheBlocks: TestResult | null;
  /** of the values themselves, over entries */
  readonly brownForsytheValues: TestResult | null;
  readonly largestStudentised: {
    readonly plot: string;
    readonly value: number;
    readonly pBonferroni: number;
  } | null;
}

/** Hsu's comparison of an entry with the best of the others. */
export interface BestRow {
  readonly entry: string;
  /** its mean minus the best of the others', with simultaneous limits of which the upper is at least and the lower at most 0 */
  readonly estimate: number;
  readonly lower: number;
  readonly upper: number;
  readonly mayBeBest: boolean;
  readonly isBest: boolean;
}

/** Checks made on request; null where the data give none. */
export interface FurtherChecks {
  /** Tukey's one degree of freedom */
  readonly nonAdditivity: TestResult | null;
  readonly rowTrend: (TestResult & { readonly slope: number }) | null;
  readonly colTrend: (TestResult & { readonly slope: number }) | null;
  readonly moran: {
    readonly i: number;
    readonly expected: number;
    readonly z: number;
    readonly p: number;
  } | null;
  /** of entry means, 0 … 1 (Cullis et al. 2006) */
  readonly repeatability: number | null;
}

/** A model of the field's trend beside the design's: the same fixed effects, so that their AIC compare. */
export interface SpatialModel extends FamilyTable {
  /** design: as analysed; autoregressive: errors alike along rows and columns; surface: a smooth one over the field */
  readonly code: 'design' | 'autoregressive' | 'surface';
  /** −2 restricted log-likelihood + 2 × parameters of the covariance; smaller is better */
  readonly aic: number;
  readonly logLik: number;
  readonly parameters: number;
  readonly residualMs: number;
  readonly components: readonly { readonly name: string; readonly variance: number }[];
  /** of neighbours along the rows' axis and along the columns' axis */
  readonly correlations: { readonly row: number; readonly col: number } | null;
}

export interface SpatialComparison {
  /** the design's model first */
  readonly models: readonly SpatialModel[];
  /** the model of smallest AIC */
  readonly preferred: SpatialModel['code'];
}

export interface TrialAnalysis extends FamilyTable {
  readonly design: DesignKind;
  readonly fit: FitSummary;
  readonly anova: readonly VarianceRow[];
  readonly dunnett: DunnettResult | null;
  /** null unless asked for, or where not every gap can be tested */
  readonly best: readonly BestRow[] | null;
  /** null unless asked for */
  readonly checks: FurtherChecks | null;
  /** null unless asked for, or where rows and columns are not known or the models cannot be fitted */
  readonly spatial: SpatialComparison | null;
  /** families besides the trial's own: each factor, and combinations */
  readonly factors: Readonly<Record<string, FamilyTable>>;
  readonly diagnostics: TrialDiagnostics;
  readonly residuals: readonly PlotResidual[];
  readonly notices: readonly TrialNotice[];
}
