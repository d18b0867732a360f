import { chiSquareUpper } from '#server/stats/distributions/chi-square.ts';
import { findUpperQuantile } from '#server/stats/distributions/find-root.ts';
import { estimateEntries, type EntryEstimates } from './entry-estimates.ts';
import { fitNetwork } from './fit-network.ts';
import { interactionTerms, type InteractionVariances, type TrialCell } from './network-cell.ts';
import { frameNetwork } from './network-frame.ts';
import { shrinkEffects } from './shrunken-effects.ts';
import { totalVariance } from './interaction-variances.ts';

/** What own trials must hold before they replace the crop's default. */
export const NEEDED_FOR_USUAL = { environments: 10, seasons: 3, entries: 12 } as const;

/** A term at 0 is given this share of all of them, since a penalty needs something to lean on. */
const LEAST_SHARE = 0.05;

export interface UsualEstimate {
  readonly outcome: 'estimated';
  readonly variances: InteractionVariances & { readonly entry: number };
  /** by the expected information; null for a term at its least share */
  readonly standardErrors: Readonly<Record<keyof InteractionVariances, number | null>>;
  /** 95 %, see varianceInterval; null for a term at its least share */
  readonly intervals: Readonly<Record<keyof InteractionVariances, readonly [number, number] | null>>;
  readonly environments: number;
  readonly seasons: number;
  readonly entries: number;
}

export interface NoUsualEstimate {
  readonly outcome: 'not-enough' | 'not-fitted';
  readonly environments: number;
  readonly seasons: number;
  readonly entries: number;
}

/**
 * 95 % interval of a variance, by a scaled χ² whose df give the variance's standard error.
 * Source: Satterthwaite (1946), Biometrics Bull. 2:110–114.
 */
export function varianceInterval(variance: number, standardError: number): readonly [number, number] {
  const df = 2 * (variance / standardError) ** 2;
  const quantile = (tail: number): number => findUpperQuantile((x) => chiSquareUpper(x, df), tail, df);
  return [(df * variance) / quantile(0.025), (df * variance) / quantile(0.975)];
}

function describeVariances({ fit, thetaCovariance }: EntryEstimates): Pick<
  UsualEstimate,
  'intervals' | 'standardErrors'
> & {
  variances: InteractionVariances;
} {
  const total = fit.point.theta.reduce((sum, x) => sum + x, 0);
  const meanVariance = fit.frame.v.reduce((sum, x) => sum + x, 0) / fit.frame.cellCount;
  const least = LEAST_SHARE * (total > 0 ? total : meanVariance);
  const values = interactionTerms.map((_, k) => Math.max(fit.point.theta[k]!, least));
  const errors = interactionTerms.map((_, k) =>
    fit.point.theta[k]! > least ? Math.sqrt(thetaCovariance[k * 4]!) : null,
  );
  const intervals = errors.map((error, k) => (error === null ? null : varianceInterval(values[k]!, error)));
  return {
    variances: { site: values[0]!, year: values[1]!, rest: values[2]! },
    standardErrors: { site: errors[0] ?? null, year: errors[1] ?? null, rest: errors[2] ?? null },
    intervals: { site: intervals[0]!, year: intervals[1]!, rest: intervals[2]! },
  };
}

/**
 * Usual variances of a crop's trait from an organisation's own trials, by plain REML.
 * @param cells of all its trials of the crop, unit of the trait
 */
export function estimateUsualVariances(cells: readonly TrialCell[]): UsualEstimate | NoUsualEstimate {
  const frame = cells.length === 0 ? null : frameNetwork(cells);
  const counts = {
    environments: frame?.environments.length ?? 0,
    seasons: frame?.yearCount ?? 0,
    entries: frame?.entries.length ?? 0,
  };
  const { environments, seasons, entries } = NEEDED_FOR_USUAL;
  if (
    frame === null ||
    counts.environments < environments ||
    counts.seasons < seasons ||
    counts.entries < entries
  )
    return { outcome: 'not-enough', ...counts };
  const fit = fitNetwork(frame, null);
  if (fit.outcome === 'not-fitted' || fit.dropped.length > 0) return { outcome: 'not-fitted', ...counts };
  const estimates = estimateEntries(fit);
  const { variances, intervals, standardErrors } = describeVariances(estimates);
  const between = shrinkEffects(fit, estimates, totalVariance(variances)).entryVariances;
  const entry = Math.max(...between, LEAST_SHARE * totalVariance(variances));
  return { outcome: 'estimated', variances: { ...variances, entry }, standardErrors, intervals, ...counts };
}
