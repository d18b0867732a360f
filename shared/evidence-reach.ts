import type { CandidateResult } from './weigh-up.ts';

/**
 * Whether trials of other regions stand behind a candidate's figures: its interval is then of the average over the sites
 * of these trials, and not of the region's.
 */
export const reachesBeyondRegion = ({
  isBeyondRegion,
  trials,
}: Pick<CandidateResult, 'isBeyondRegion' | 'trials'>): boolean =>
  isBeyondRegion ?? trials.some(({ inRegion }) => inRegion === false);
