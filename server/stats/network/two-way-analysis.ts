import { AnalysisError } from '#server/stats/analysis-error.ts';
import { fUpper } from '#server/stats/distributions/f-distribution.ts';
import { tQuantileUpper, tTwoSided } from '#server/stats/distributions/student-t.ts';
import { listConnected } from './connected-entries.ts';
import { estimateEffects } from './entry-estimates.ts';
import { averageEntries } from './entry-means.ts';
import { frameNetwork, type NetworkFrame } from './network-frame.ts';
import { evaluateLikelihood, residualDf } from './restricted-likelihood.ts';

/** Mean of one entry in one environment; without weights. */
export interface EnvironmentMean {
  readonly entry: string;
  readonly environment: string;
  readonly mean: number;
}

export interface TwoWayTerm {
  readonly term: 'environment' | 'entry' | 'entry:environment';
  readonly df: number;
  readonly ss: number;
  readonly ms: number;
  /** null for the error */
  readonly f: number | null;
  readonly p: number | null;
}

export interface TwoWayGap {
  /** a − b */
  readonly a: string;
  readonly b: string;
  readonly estimate: number;
  readonly se: number;
  readonly df: number;
  readonly t: number;
  readonly p: number;
  readonly lsd05: number;
  readonly lsd10: number;
}

export interface LsdRange {
  readonly mean: number;
  readonly min: number;
  readonly max: number;
}

export interface TwoWayAnalysis {
  readonly outcome: 'analysed';
  readonly cells: number;
  readonly grandMean: number;
  readonly errorDf: number;
  /** mean square of entry × environment, unit squared */
  readonly errorMs: number;
  readonly cvPercent: number;
  /** each term adjusted for the other */
  readonly anova: readonly TwoWayTerm[];
  readonly means: readonly {
    readonly entry: string;
    readonly environments: number;
    readonly mean: number;
    readonly se: number;
    readonly df: number;
  }[];
  /** gaps within connected parts */
  readonly gaps: readonly TwoWayGap[];
  /** over all gaps, at 5 and 10 % */
  readonly lsd: { readonly '0.05': LsdRange; readonly '0.1': LsdRange };
  readonly connected: readonly (readonly string[])[];
}

export interface TwoWayRefused {
  readonly outcome: 'not-analysed';
  /** no-residual: as many effects as cells; no-variation: the table is perfectly additive */
  readonly reason: 'no-residual' | 'no-variation';
}

const sumSquares = (values: ArrayLike<number>): number => {
  let sum = 0;
  for (let j = 0; j < values.length; j++) sum += values[j]! * values[j]!;
  return sum;
};

/** Residual sum of squares with entries alone in the model: what environments and error share. */
function withinEntries(frame: NetworkFrame): number {
  const level = frame.environments[0]!.offset;
  let sum = 0;
  for (let i = 0; i < frame.entries.length; i++) {
    const first = frame.start[i]!;
    const values = Array.from({ length: frame.start[i + 1]! - first }, (_, k) => {
      const j = first + k;
      return frame.y[j]! + (frame.environments[frame.environment[j]!]!.offset - level);
    });
    const mean = values.reduce((total, value) => total + value, 0) / values.length;
    sum += sumSquares(values.map((value) => value - mean));
  }
  return sum;
}

function buildAnova(frame: NetworkFrame, errorSs: number, errorDf: number): TwoWayTerm[] {
  const errorMs = errorSs / errorDf;
  const fixedTerm = (term: 'environment' | 'entry', df: number, ss: number): TwoWayTerm => {
    const f = ss / df / errorMs;
    return { term, df, ss, ms: ss / df, f, p: fUpper(f, df, errorDf) };
  };
  // offsets are the environments' means, so frame.y is what environments alone leave
  const terms: TwoWayTerm[] = [];
  const environmentDf = frame.columnCount;
  const entryDf = frame.entries.length - frame.partCount;
  if (environmentDf > 0) terms.push(fixedTerm('environment', environmentDf, withinEntries(frame) - errorSs));
  if (entryDf > 0) terms.push(fixedTerm('entry', entryDf, sumSquares(frame.y) - errorSs));
  terms.push({ term: 'entry:environment', df: errorDf, ss: errorSs, ms: errorMs, f: null, p: null });
  return terms;
}

function rangeOf(values: readonly number[]): LsdRange {
  const sorted = values.toSorted((a, b) => a - b);
  return {
    mean: values.reduce((sum, x) => sum + x, 0) / values.length,
    min: sorted[0] ?? 0,
    max: sorted.at(-1) ?? 0,
  };
}

/**
 * Two-way analysis of a table of means by least squares, complete or with holes, its error the mean square of
 * entry × environment: the analysis over sites that does not borrow the plots' error.
 * @throws AnalysisError for means that cannot be read, one-entry
 * Source: domain.md worked examples H and I; Goodman (1992) on the choice of error.
 */
export function analyseTwoWay(table: readonly EnvironmentMean[]): TwoWayAnalysis | TwoWayRefused {
  const frame = frameNetwork(
    table.map(({ entry, environment, mean }) => ({ entry, site: environment, year: '', mean, variance: 1 })),
  );
  if (frame.entries.length < 2) throw new AnalysisError('one-entry', 'at least two entries are needed');
  const errorDf = residualDf(frame);
  if (errorDf === 0) return { outcome: 'not-analysed', reason: 'no-residual' };
  const point = evaluateLikelihood(frame, new Float64Array(3), 0);
  const errorSs = point?.system.quadratic ?? 0;
  const level = Math.max(...frame.environments.map(({ offset }) => offset * offset));
  if (point === null || !(errorSs > 1e-26 * Math.max(sumSquares(frame.y), level)))
    return { outcome: 'not-analysed', reason: 'no-variation' };

  const errorMs = errorSs / errorDf;
  const effects = estimateEffects(frame, point);
  const m = frame.entries.length;
  const t05 = tQuantileUpper(0.025, errorDf);
  const t10 = tQuantileUpper(0.05, errorDf);
  const gaps: TwoWayGap[] = [];
  for (let r = 0; r < m; r++)
    for (let s = r + 1; s < m; s++) {
      if (frame.entryPart[r] !== frame.entryPart[s]) continue;
      const { covariance } = effects;
      const form = covariance[r * m + r]! + covariance[s * m + s]! - 2 * covariance[r * m + s]!;
      const se = Math.sqrt(errorMs * form);
      const estimate = effects.effects[r]! - effects.effects[s]!;
      const t = estimate / se;
      gaps.push({
        a: frame.entries[r]!,
        b: frame.entries[s]!,
        estimate,
        se,
        df: errorDf,
        t,
        p: tTwoSided(t, errorDf),
        lsd05: t05 * se,
        lsd10: t10 * se,
      });
    }
  const first = table[0]!.mean;
  const grandMean = first + table.reduce((sum, { mean }) => sum + (mean - first), 0) / table.length;
  return {
    outcome: 'analysed',
    cells: frame.cellCount,
    grandMean,
    errorDf,
    errorMs,
    cvPercent: (100 * Math.sqrt(errorMs)) / grandMean,
    anova: buildAnova(frame, errorSs, errorDf),
    means: averageEntries(frame, point, effects).map(({ entry, environments, estimate, se }) => ({
      entry,
      environments,
      mean: estimate,
      se: se * Math.sqrt(errorMs),
      df: errorDf,
    })),
    gaps,
    lsd: { '0.05': rangeOf(gaps.map(({ lsd05 }) => lsd05)), '0.1': rangeOf(gaps.map(({ lsd10 }) => lsd10)) },
    connected: listConnected(frame),
  };
}
