import { AnalysisError } from '#server/stats/analysis-error.ts';
import { listConnected } from './connected-entries.ts';
import { estimateEntries, type EntryEstimates } from './entry-estimates.ts';
import { averageEntries } from './entry-means.ts';
import { fitNetwork, type NetworkNotFitted } from './fit-network.ts';
import {
  interactionTerms,
  type InteractionTerm,
  type InteractionVariances,
  type TrialCell,
} from './network-cell.ts';
import { frameNetwork, type NetworkFrame } from './network-frame.ts';
import { intervalAround, measureGap } from './network-gap.ts';
import { shrinkEffects, type ShrunkenEffects } from './shrunken-effects.ts';
import { defaultUsualVariances, totalVariance } from './interaction-variances.ts';
import { commonFactor, type VariancePenalty } from './variance-penalty.ts';

export interface CombineOptions {
  /** ν of the penalty; 0 is plain REML. Default 3. */
  readonly penalty?: number;
  /** usual variances of the crop's trait, unit squared; without them the crop defaults in % of the mean of the cells */
  readonly usual?: InteractionVariances;
  /** how far the usual variances may all be off by one factor: standard deviation of its logarithm; without it they stand */
  readonly spread?: number;
  /** usual variance between entries; without it the sum of the three interaction variances */
  readonly usualEntry?: number;
  /** only gaps from this entry, candidate minus current */
  readonly current?: string;
}

export interface CombinedGap {
  /** a − b */
  readonly a: string;
  readonly b: string;
  readonly estimate: number;
  readonly se: number;
  readonly df: number;
  readonly p: number;
  readonly interval95: readonly [number, number];
  /** the grower's own next season */
  readonly ownSeason: {
    readonly se: number;
    readonly df: number;
    readonly interval95: readonly [number, number];
  };
  /** the gap with entries taken as a sample */
  readonly shrunken: number;
  /** standard error before Kenward and Roger's correction */
  readonly modelSe: number;
}

export interface CombinedTrials {
  readonly outcome: 'combined';
  readonly environments: number;
  readonly entries: number;
  readonly cells: number;
  readonly fit: {
    readonly penalty: number;
    readonly components: InteractionVariances;
    /** terms that the layout cannot tell from others; their component reads 0 */
    readonly dropped: readonly InteractionTerm[];
    readonly usual: InteractionVariances | null;
    /** the factor by which varieties moved against the usual variances; only with a spread */
    readonly usualFactor?: number;
    readonly logLik: number;
    readonly gradientNorm: number;
    readonly iterations: number;
  };
  /** at the average of the environments of the entry's connected part; se by the model */
  readonly means: readonly {
    readonly entry: string;
    readonly environments: number;
    readonly estimate: number;
    readonly se: number;
  }[];
  readonly gaps: readonly CombinedGap[];
  /** entries that some chain of trials connects */
  readonly connected: readonly (readonly string[])[];
  /** gaps that no chain of trials carries */
  readonly refused: readonly { readonly a: string; readonly b: string; readonly reason: 'disconnected' }[];
}

function choosePenalty(cells: readonly TrialCell[], options: CombineOptions): VariancePenalty | null {
  const nu = options.penalty ?? 3;
  if (!(nu >= 0 && Number.isFinite(nu)))
    throw new AnalysisError('bad-option', 'the penalty must be a number of at least 0');
  if (nu === 0) return null;
  const usual =
    options.usual ?? defaultUsualVariances(cells.reduce((sum, cell) => sum + cell.mean, 0) / cells.length);
  if (interactionTerms.some((term) => !(usual[term] > 0 && Number.isFinite(usual[term]))))
    throw new AnalysisError('bad-option', 'usual variances must be positive numbers');
  const { spread } = options;
  if (spread !== undefined && !(spread > 0 && Number.isFinite(spread)))
    throw new AnalysisError('bad-option', 'the spread must be a positive number');
  return { nu, usual, ...(spread !== undefined && { spread }) };
}

/** Pairs of positions: all of them in order, or every entry against the current one. */
function choosePairs(frame: NetworkFrame, current: string | undefined): [number, number][] {
  if (current === undefined)
    return frame.entries.flatMap((_, r) =>
      frame.entries.slice(r + 1).map((__, k): [number, number] => [r, r + 1 + k]),
    );
  const base = frame.entries.indexOf(current);
  if (base < 0) throw new AnalysisError('unknown-entry', `no cell belongs to ${current}`);
  return frame.entries.flatMap((_, r): [number, number][] => (r === base ? [] : [[r, base]]));
}

function describeGap(
  estimates: EntryEstimates,
  shrunken: ShrunkenEffects,
  r: number,
  s: number,
): CombinedGap | null {
  const gap = measureGap(estimates, r, s);
  if (gap === null) return null;
  const { entries } = estimates.fit.frame;
  const { estimate, se, df, p, modelSe, ownSeason } = gap;
  return {
    a: entries[r]!,
    b: entries[s]!,
    estimate,
    se,
    df,
    p,
    interval95: intervalAround(estimate, se, df),
    ownSeason: { ...ownSeason, interval95: intervalAround(estimate, ownSeason.se, ownSeason.df) },
    shrunken: shrunken.effects[r]! - shrunken.effects[s]!,
    modelSe,
  };
}

/**
 * Weighs the cells of many trials together: y_ij = environment + entry + entry:site + entry:year + rest + e_ij,
 * e_ij ~ N(0, v_ij), entries and environments fixed, the three interactions random.
 * @returns JSON-serialisable result, full precision, unit of the trait; or why there is none
 * @throws AnalysisError for cells or options that cannot be read
 */
export function combineTrials(
  cells: readonly TrialCell[],
  options: CombineOptions = {},
): CombinedTrials | NetworkNotFitted {
  const frame = frameNetwork(cells);
  if (frame.entries.length < 2) throw new AnalysisError('one-entry', 'at least two entries are needed');
  const penalty = choosePenalty(cells, options);
  const pairs = choosePairs(frame, options.current);
  const fit = fitNetwork(frame, penalty);
  if (fit.outcome === 'not-fitted') return fit;
  const [site, year, rest] = fit.point.theta as unknown as [number, number, number];
  const components = { site, year, rest };
  const estimates = estimateEntries(fit);
  const shrunken = shrinkEffects(
    fit,
    estimates,
    options.usualEntry ?? totalVariance(penalty?.usual ?? components),
  );
  const gaps: CombinedGap[] = [];
  const refused: { a: string; b: string; reason: 'disconnected' }[] = [];
  for (const [r, s] of pairs) {
    const gap = describeGap(estimates, shrunken, r, s);
    if (gap === null) refused.push({ a: frame.entries[r]!, b: frame.entries[s]!, reason: 'disconnected' });
    else gaps.push(gap);
  }
  return {
    outcome: 'combined',
    environments: frame.environments.length,
    entries: frame.entries.length,
    cells: frame.cellCount,
    fit: {
      penalty: penalty?.nu ?? 0,
      components,
      dropped: fit.dropped,
      usual: penalty?.usual ?? null,
      ...(penalty?.spread !== undefined && { usualFactor: commonFactor(penalty, fit.point.theta) }),
      logLik: fit.point.logLik,
      gradientNorm: fit.gradientNorm,
      iterations: fit.iterations,
    },
    means: averageEntries(frame, fit.point, estimates),
    gaps,
    connected: listConnected(frame),
    refused,
  };
}
