import { AnalysisError } from '#server/stats/analysis-error.ts';
import { fUpper } from '#server/stats/distributions/f-distribution.ts';
import { tTwoSided } from '#server/stats/distributions/student-t.ts';
import { estimateEffects } from './entry-estimates.ts';
import { averageEntries } from './entry-means.ts';
import { frameNetwork, type NetworkFrame } from './network-frame.ts';
import { evaluateLikelihood, type NetworkPoint } from './restricted-likelihood.ts';
import type { EnvironmentMean } from './two-way-analysis.ts';

/** How an entry answers to good and poor environments. */
export interface EntryStability {
  readonly entry: string;
  readonly environments: number;
  /** at the average environment */
  readonly mean: number;
  /** Finlay and Wilkinson's regression on the environments' index; null below three environments or without spread */
  readonly response: {
    readonly slope: number;
    readonly se: number;
    readonly df: number;
    /** p of "slope is 1", the average entry */
    readonly p: number;
    readonly deviationMs: number;
    readonly r2: number;
  } | null;
  /** Wricke's W_i: the entry's share of the interaction sum of squares */
  readonly ecovalence: number;
  readonly ecovalencePercent: number;
  /** Shukla's stability variance, may be negative; complete tables of three entries and more only */
  readonly shuklaVariance: number | null;
}

export interface StabilityAnalysis {
  readonly outcome: 'analysed';
  readonly isComplete: boolean;
  /** index: what the average entry yields there above the mean of all environments */
  readonly environments: readonly { readonly environment: string; readonly index: number }[];
  readonly entries: readonly EntryStability[];
  /** whether slopes differ; complete tables only */
  readonly heterogeneity: {
    readonly ss: number;
    readonly df: number;
    readonly denDf: number;
    readonly f: number;
    readonly p: number;
  } | null;
}

export interface StabilityRefused {
  readonly outcome: 'not-analysed';
  /** disconnected: no chain of environments links all entries; too-small: below two entries or two environments */
  readonly reason: 'disconnected' | 'too-small';
}

/** Environments' effects about their mean, with what frameNetwork took off put back. */
function indexEnvironments(frame: NetworkFrame, point: NetworkPoint): Float64Array {
  const level = frame.environments[0]!.offset;
  const index = Float64Array.from(frame.environments, ({ offset }) => offset - level);
  const seen = new Set<number>();
  for (let j = 0; j < frame.cellCount; j++) {
    const e = frame.environment[j]!;
    if (frame.column[j]! < 0 || seen.has(e)) continue;
    seen.add(e);
    index[e]! += point.system.beta[frame.column[j]!]!;
  }
  const mean = index.reduce((sum, x) => sum + x, 0) / index.length;
  return index.map((x) => x - mean);
}

interface OwnCells {
  readonly x: readonly number[];
  readonly y: readonly number[];
  readonly residualSquares: number;
}

function takeOwnCells(frame: NetworkFrame, point: NetworkPoint, index: Float64Array, i: number): OwnCells {
  const x: number[] = [];
  const y: number[] = [];
  let residualSquares = 0;
  const level = frame.environments[0]!.offset;
  for (let j = frame.start[i]!; j < frame.start[i + 1]!; j++) {
    const e = frame.environment[j]!;
    x.push(index[e]!);
    y.push(frame.y[j]! + frame.environments[e]!.offset - level);
    // with unit variances and θ = 0, Py is the least-squares residual
    residualSquares += point.system.py[j]! ** 2;
  }
  return { x, y, residualSquares };
}

function regress({ x, y }: OwnCells): EntryStability['response'] {
  const n = x.length;
  if (n < 3) return null;
  const meanX = x.reduce((sum, value) => sum + value, 0) / n;
  const meanY = y.reduce((sum, value) => sum + value, 0) / n;
  let sxx = 0;
  let sxy = 0;
  let syy = 0;
  for (let j = 0; j < n; j++) {
    sxx += (x[j]! - meanX) ** 2;
    sxy += (x[j]! - meanX) * (y[j]! - meanY);
    syy += (y[j]! - meanY) ** 2;
  }
  if (!(sxx > 0)) return null;
  const slope = sxy / sxx;
  let deviations = 0;
  for (let j = 0; j < n; j++) deviations += (y[j]! - meanY - slope * (x[j]! - meanX)) ** 2;
  const df = n - 2;
  const se = Math.sqrt(deviations / df / sxx);
  const p = se > 0 ? tTwoSided((slope - 1) / se, df) : slope === 1 ? 1 : 0;
  return { slope, se, df, p, deviationMs: deviations / df, r2: syy > 0 ? 1 - deviations / syy : 1 };
}

/** Sources: Finlay & Wilkinson (1963), Aust. J. Agric. Res. 14:742–754; Wricke (1962), Z. Pflanzenzüchtg. 47:92–96; Shukla (1972), Heredity 29:237–245. */
export function analyseStability(table: readonly EnvironmentMean[]): StabilityAnalysis | StabilityRefused {
  const frame = frameNetwork(
    table.map(({ entry, environment, mean }) => ({ entry, site: environment, year: '', mean, variance: 1 })),
  );
  const k = frame.entries.length;
  const e = frame.environments.length;
  if (k < 2) throw new AnalysisError('one-entry', 'at least two entries are needed');
  if (e < 2) return { outcome: 'not-analysed', reason: 'too-small' };
  if (frame.partCount > 1) return { outcome: 'not-analysed', reason: 'disconnected' };
  const point = evaluateLikelihood(frame, new Float64Array(3), 0);
  if (point === null) return { outcome: 'not-analysed', reason: 'too-small' };

  const index = indexEnvironments(frame, point);
  const means = averageEntries(frame, point, estimateEffects(frame, point));
  const own = frame.entries.map((_, i) => takeOwnCells(frame, point, index, i));
  const interaction = own.reduce((sum, { residualSquares }) => sum + residualSquares, 0);
  const isComplete = frame.cellCount === k * e;
  const entries = own.map((cells, i): EntryStability => {
    const w = cells.residualSquares;
    return {
      entry: frame.entries[i]!,
      environments: cells.x.length,
      mean: means[i]!.estimate,
      response: regress(cells),
      ecovalence: w,
      ecovalencePercent: interaction > 0 ? (100 * w) / interaction : 0,
      shuklaVariance:
        isComplete && k > 2 ? (k * (k - 1) * w - interaction) / ((e - 1) * (k - 1) * (k - 2)) : null,
    };
  });
  return {
    outcome: 'analysed',
    isComplete,
    environments: frame.environments.map(({ site }, j) => ({ environment: site, index: index[j]! })),
    entries,
    heterogeneity: isComplete && e > 2 ? compareSlopes(entries, index, interaction) : null,
  };
}

/** Slopes against their deviations: the joint regression's test. */
function compareSlopes(
  entries: readonly EntryStability[],
  index: Float64Array,
  interaction: number,
): StabilityAnalysis['heterogeneity'] {
  const sxx = index.reduce((sum, x) => sum + x * x, 0);
  const slopes = entries.flatMap(({ response }) => (response === null ? [] : [response.slope]));
  if (slopes.length < entries.length) return null;
  const ss = sxx * slopes.reduce((sum, slope) => sum + (slope - 1) ** 2, 0);
  const df = entries.length - 1;
  const denDf = df * (index.length - 2);
  const deviations = interaction - ss;
  if (!(deviations > 1e-12 * interaction)) return null;
  const f = ss / df / (deviations / denDf);
  return { ss, df, denDf, f, p: fUpper(f, df, denDf) };
}
