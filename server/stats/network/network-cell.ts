/** Adjusted mean of one entry in one trial, as stage 1 gives it. */
export interface TrialCell {
  readonly entry: string;
  readonly site: string;
  readonly year: number | string;
  /** in the unit of the trait */
  readonly mean: number;
  /** v_ij, half the mean variance of the entry's differences within its trial, unit squared, ≥ 0 */
  readonly variance: number;
  /** tells apart two trials at one site in one year; without it site and year are the environment */
  readonly trial?: string;
}

/** Variances of a crop's trait: entry × site, entry × year, and rest (entry × site × year), unit squared. */
export interface InteractionVariances {
  readonly site: number;
  readonly year: number;
  readonly rest: number;
}

export type InteractionTerm = keyof InteractionVariances;

export const interactionTerms = ['site', 'year', 'rest'] as const satisfies readonly InteractionTerm[];
