import { z } from 'zod';
import { caution } from './caution.ts';
import { defineContract } from './contract.ts';

export const trialDesigns = [
  'crd',
  'rcbd',
  'latin-square',
  'incomplete-blocks',
  'row-column',
  'split-plot',
  'factorial',
  'strips',
] as const;
export const trialDesign = z.enum(trialDesigns);
export type TrialDesign = z.infer<typeof trialDesign>;

export const trialKind = z.enum(['plots', 'summary']);
export const trialState = z.enum(['draft', 'in-review', 'published', 'withdrawn']);
export type TrialState = z.infer<typeof trialState>;

/** A trial as a line of a list. Figures are those of yield in the latest published version (or of the draft, at the desk). */
export const trialLine = z.object({
  id: z.uuid(),
  name: z.string(),
  cropId: z.uuid(),
  siteId: z.uuid(),
  siteName: z.string(),
  regionId: z.uuid(),
  season: z.number().int(),
  design: trialDesign,
  kind: trialKind,
  state: trialState,
  entries: z.number().int(),
  plots: z.number().int(),
  meanYield: z.number().nullable(),
  cvPercent: z.number().nullable(),
  lsd: z.number().nullable(),
  entryP: z.number().nullable(),
  isWeak: z.boolean(),
  version: z.number().int().nullable(),
});
export type TrialLine = z.infer<typeof trialLine>;

export const trialFilter = z.object({
  crop: z.string().max(80).optional(),
  region: z.string().max(80).optional(),
  season: z.coerce.number().int().min(1900).max(2200).optional(),
});
export type TrialFilter = z.infer<typeof trialFilter>;

export const plotView = z.object({
  id: z.uuid(),
  plotNumber: z.string(),
  entryLabel: z.string(),
  rep: z.string().nullable(),
  block: z.string().nullable(),
  row: z.number().int().nullable(),
  col: z.number().int().nullable(),
  mainLevel: z.string().nullable(),
  /** Value of the chosen trait; null where it was not measured. */
  value: z.number().nullable(),
  residual: z.number().nullable(),
  excludedReason: z.string().nullable(),
});
export type PlotView = z.infer<typeof plotView>;

export const trialVersionLine = z.object({
  number: z.number().int(),
  action: z.enum(['publish', 'withdraw']),
  sha256: z.string(),
  at: z.iso.datetime(),
  authorName: z.string().nullable(),
  reason: z.string(),
});
export type TrialVersionLine = z.infer<typeof trialVersionLine>;

/** The head of a trial, its history and which traits it carries. Values come with the analysis. */
export const trialDetail = trialLine.extend({
  alpha: z.number(),
  management: z.record(z.string(), z.union([z.string(), z.number(), z.boolean()])),
  sownOn: z.string().nullable(),
  harvestedOn: z.string().nullable(),
  revision: z.number().int(),
  traitSlugs: z.array(z.string()),
  versions: z.array(trialVersionLine),
});
export type TrialDetail = z.infer<typeof trialDetail>;

export const comparisonMethods = [
  'lsd',
  'protected-lsd',
  'tukey',
  'dunnett',
  'holm',
  'bonferroni',
  'best',
] as const;
export const comparisonMethod = z.enum(comparisonMethods);
export type ComparisonMethod = z.infer<typeof comparisonMethod>;

export const anovaRow = z.object({
  /** entry, block, rep, row, col, main, sub, main:sub, a factor's name, or residual */
  term: z.string(),
  df: z.number(),
  denDf: z.number().nullable(),
  ss: z.number().nullable(),
  ms: z.number().nullable(),
  f: z.number().nullable(),
  p: z.number().nullable(),
});
export type AnovaRow = z.infer<typeof anovaRow>;

export const adjustedMean = z.object({
  entry: z.string(),
  n: z.number().int(),
  mean: z.number().nullable(),
  se: z.number().nullable(),
  df: z.number().nullable(),
  /** Letters of "not different" under the chosen comparison; empty where none could be given. */
  letters: z.string(),
});
export type AdjustedMean = z.infer<typeof adjustedMean>;

export const pairGap = z.object({
  a: z.string(),
  b: z.string(),
  /** a minus b */
  estimate: z.number().nullable(),
  se: z.number().nullable(),
  df: z.number().nullable(),
  lsd: z.number().nullable(),
  /** Under the chosen comparison. */
  p: z.number().nullable(),
});
export type PairGap = z.infer<typeof pairGap>;

/** Why a trait of a trial has no analysis, or only part of one. The sentence is `analysis:outcomes.<code>`. */
export const analysisOutcome = z.object({
  code: z.string(),
  values: z.record(z.string(), z.union([z.string(), z.number()])),
});
export type AnalysisOutcome = z.infer<typeof analysisOutcome>;

export const ordinalSummary = z.object({
  entry: z.string(),
  n: z.number().int(),
  median: z.number(),
  low: z.number(),
  high: z.number(),
  counts: z.array(z.object({ score: z.number(), plots: z.number().int() })),
});

/** design: as laid out; autoregressive: errors alike along rows and columns; surface: a smooth one over the field. */
export const spatialModelView = z.object({
  code: z.enum(['design', 'autoregressive', 'surface']),
  aic: z.number(),
  residualMs: z.number(),
  lsd: z.number().nullable(),
  /** Rank 1 is the best end of the trait. */
  means: z.array(z.object({ entry: z.string(), mean: z.number(), rank: z.number().int() })),
});
export type SpatialModelView = z.infer<typeof spatialModelView>;

/** Hsu's comparison of an entry with the best of the others, with simultaneous limits at the analysis' level. */
export const bestComparison = z.object({
  entry: z.string(),
  /** Its mean minus the best mean of the others. */
  estimate: z.number(),
  lower: z.number(),
  upper: z.number(),
  mayBeBest: z.boolean(),
  isBest: z.boolean(),
});
export type BestComparison = z.infer<typeof bestComparison>;

/** Means and gaps of one factor, or of combinations of factors, of a split plot or factorial. */
export const factorFamily = z.object({
  /** A term of the model: `main`, a factor's name, or several joined by `:`. */
  name: z.string(),
  means: z.array(adjustedMean),
  gaps: z.array(pairGap),
  lsd: z.object({ mean: z.number(), min: z.number(), max: z.number() }).nullable(),
});
export type FactorFamily = z.infer<typeof factorFamily>;

/** What the layout breaks or lacks. The sentence is `analysis:layout.<code>`. */
export const layoutFinding = z.object({
  code: z.enum([
    'plot-named-twice',
    'position-taken-twice',
    'entry-repeated-in-block',
    'entry-missing-from-block',
    'unequal-replication',
    'entry-not-replicated',
    'entries-disconnected',
  ]),
  values: z.record(z.string(), z.union([z.string(), z.number()])),
});
export type LayoutFindingView = z.infer<typeof layoutFinding>;

const fTest = z.object({ f: z.number(), df1: z.number(), df2: z.number(), p: z.number() });

/** Checks of what the model leaves over; null where the data give none. */
export const analysisDiagnostics = z.object({
  shapiroWilk: z.object({ w: z.number(), p: z.number() }).nullable(),
  brownForsythe: fTest.nullable(),
  /** Over blocks, replicates or rows. */
  brownForsytheBlocks: fTest.nullable(),
  largestStudentised: z.object({ plot: z.string(), value: z.number(), pBonferroni: z.number() }).nullable(),
  /** Tukey's one degree of freedom. */
  nonAdditivity: fTest.nullable(),
  rowTrend: fTest.nullable(),
  colTrend: fTest.nullable(),
  moran: z.object({ i: z.number(), expected: z.number(), p: z.number() }).nullable(),
  /** Of entry means, 0 to 1. */
  repeatability: z.number().nullable(),
});
export type AnalysisDiagnostics = z.infer<typeof analysisDiagnostics>;

export const trialAnalysis = z.object({
  trialId: z.uuid(),
  traitSlug: z.string(),
  alpha: z.number(),
  comparison: comparisonMethod,
  source: z.enum(['published', 'draft']),
  version: z.number().int().nullable(),
  /** numeric: means, gaps, ANOVA. ordinal: medians and counts. summary: means with recovered error. none: an outcome says why. */
  kind: z.enum(['numeric', 'ordinal', 'summary', 'none']),
  outcomes: z.array(analysisOutcome),
  method: z.enum(['ols', 'reml']).nullable(),
  plotsTotal: z.number().int(),
  plotsUsed: z.number().int(),
  plotsExcluded: z.number().int(),
  plotsMissing: z.number().int(),
  grandMean: z.number().nullable(),
  residualMs: z.number().nullable(),
  residualDf: z.number().nullable(),
  cvPercent: z.number().nullable(),
  r2: z.number().nullable(),
  components: z.array(z.object({ name: z.string(), variance: z.number() })),
  anova: z.array(anovaRow),
  means: z.array(adjustedMean),
  gaps: z.array(pairGap),
  lsd: z.object({ mean: z.number(), min: z.number(), max: z.number() }).nullable(),
  /** Pairs told apart under the chosen comparison, of pairs in all. */
  pairsDifferent: z.number().int(),
  pairsTotal: z.number().int(),
  /** Smallest difference the trial could show with power .8. */
  detectable: z.number().nullable(),
  ordinal: z.array(ordinalSummary),
  /** How the standard error of a summary trial was recovered: lsd, cv, se, residual-ms. */
  recoveredFrom: z.string().nullable(),
  diagnostics: analysisDiagnostics.nullable(),
  /** Under the comparison with the best alone. */
  best: z.array(bestComparison),
  /** Families of means beside the trial's own, of split plots and factorials. */
  factors: z.array(factorFamily),
  /** What the layout breaks or lacks; null without plots. */
  layout: z.array(layoutFinding).nullable(),
  /**
   * The design's model and the spatial ones side by side; empty where rows and columns are not known, and in the
   * plain reading of a trial whose residuals show no trend.
   */
  spatial: z.array(spatialModelView),
  plots: z.array(plotView),
  cautions: z.array(caution),
});
export type TrialAnalysisView = z.infer<typeof trialAnalysis>;

export const analysisQuery = z.object({
  trait: z.string().max(80).default('yield'),
  alpha: z.coerce
    .number()
    .pipe(z.union([z.literal(0.01), z.literal(0.05), z.literal(0.1)]))
    .optional(),
  comparison: comparisonMethod.default('lsd'),
  /** The whole analysis adds what takes longer than the rest together: the spatial models. */
  view: z.enum(['reading', 'analysis']).default('reading'),
});
export type AnalysisQuery = z.infer<typeof analysisQuery>;

/** Published trials, as every signed-in person may read them. */
export const listTrials = defineContract({
  method: 'GET',
  path: '/api/trials',
  access: 'signed-in',
  query: trialFilter,
  reply: z.object({ trials: z.array(trialLine) }),
});

export const readTrial = defineContract({
  method: 'GET',
  path: '/api/trials/:trialId',
  access: 'signed-in',
  params: z.object({ trialId: z.uuid() }),
  reply: z.object({ trial: trialDetail }),
});

/** Of the newest publication, also after a withdrawal. Drafts are read at the desk. */
export const readTrialAnalysis = defineContract({
  method: 'GET',
  path: '/api/trials/:trialId/analysis',
  access: 'signed-in',
  params: z.object({ trialId: z.uuid() }),
  query: analysisQuery,
  reply: z.object({ analysis: trialAnalysis }),
});
