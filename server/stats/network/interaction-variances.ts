import type { InteractionVariances } from './network-cell.ts';

/** Usual standard deviations of a new installation, in % of the crop's mean yield; our judgement from open data. */
const DEFAULT_USUAL_PERCENT: InteractionVariances = { site: 3, year: 2.5, rest: 5 };

/** The default usual variances at a mean level, unit of the mean squared. */
export function defaultUsualVariances(mean: number): InteractionVariances {
  const square = (percent: number): number => ((percent / 100) * mean) ** 2;
  return {
    site: square(DEFAULT_USUAL_PERCENT.site),
    year: square(DEFAULT_USUAL_PERCENT.year),
    rest: square(DEFAULT_USUAL_PERCENT.rest),
  };
}

export function totalVariance({ site, year, rest }: InteractionVariances): number {
  return site + year + rest;
}

export function scaleVariances(
  { site, year, rest }: InteractionVariances,
  factor: number,
): InteractionVariances {
  return { site: site * factor, year: year * factor, rest: rest * factor };
}
