import type { InteractionVariances } from './network-cell.ts';

/** A trial as the network knows it. */
export interface NetworkTrial {
  readonly trial: string;
  readonly site: string;
  /** as printed in cautions */
  readonly siteName: string;
  readonly season: number;
  readonly inRegion: boolean;
  readonly kind: 'plots' | 'summary';
  readonly plotSize: 'small-plots' | 'field-strips';
  readonly cvPercent: number | null;
  /** p of the F test over entries */
  readonly entryP: number | null;
  /** fungicide, irrigation, … with what was done; left out where it was not said */
  readonly management: Readonly<Record<string, string>>;
}

/** Adjusted mean of an entry in a trial; variance null where the trial has no error of its own. */
export interface NetworkCell {
  readonly entry: string;
  readonly trial: string;
  readonly mean: number;
  readonly variance: number | null;
  /** residual df of the trial; without it the line of the trial takes the error as known */
  readonly df?: number | null;
}

export interface UsualVariances extends InteractionVariances {
  /** variance between entries; without it the sum of the other three */
  readonly entry?: number;
  readonly source: 'crop-default' | 'own-trials';
}

export interface TraitEvidence {
  readonly trait: string;
  readonly better: 'higher' | 'lower' | 'neutral';
  /** gaps within ± this do not matter, unit of the trait */
  readonly practicalMargin: number;
  readonly usual: UsualVariances | null;
  readonly cells: readonly NetworkCell[];
  /** CV over which a trial is set aside, % ; null: none is */
  readonly cvLimitPercent: number | null;
}

export interface EvidenceNetwork {
  readonly trials: readonly NetworkTrial[];
  readonly traits: readonly TraitEvidence[];
  /** name of each entry as printed in cautions; an entry without one is printed by its key */
  readonly names: Readonly<Record<string, string>>;
}

/**
 * named: these candidates against the current one; pair: one comparison planned before the results were seen;
 * best: the candidates are whatever came out on top.
 */
export type QuestionKind = 'named' | 'pair' | 'best';

export interface WeighQuestion {
  readonly current: string;
  readonly candidates: readonly string[];
  readonly kind: QuestionKind;
  /** the season in which the question is asked: what is old is old from here */
  readonly askedInSeason: number;
  readonly seasons?: { readonly from: number; readonly to: number };
  /** trials that the advisor set aside */
  readonly setAside?: readonly string[];
  /** trials over the CV limit are left out, unless told otherwise */
  readonly keepWeakTrials?: boolean;
  /** for a list's best: the number of entries it was picked from; without it all entries of the network */
  readonly listSize?: number;
  /** lets trials of other regions answer where the region has none; whoever asks so has to say it beside the verdict */
  readonly acceptsOtherRegions?: boolean;
  /** leaves out the verdicts with the usual variances halved and doubled, two thirds of the work */
  readonly withoutSensitivity?: boolean;
  /** by trait and candidate: a margin wider than the trait's own, such as the break-even gap */
  readonly margins?: Readonly<Record<string, Readonly<Record<string, number>>>>;
}

export interface LevelInterval {
  readonly low: number;
  readonly high: number;
  readonly level: number;
}

/** null: a trait without a better side has no winner */
export type TraitVerdict = 'ahead' | 'behind' | 'level' | 'open' | 'thin' | null;

export type EvidenceCautionCode =
  | 'few-site-years'
  | 'one-season'
  | 'no-trial-in-region'
  | 'old-seasons'
  | 'never-together'
  | 'linked-through-check'
  | 'disconnected'
  | 'trial-left-out'
  | 'trial-weak-cv'
  | 'trial-f-not-significant'
  | 'large-interaction'
  | 'rests-on-usual-variance'
  | 'no-usual-variance'
  | 'verdict-changes-with-variance'
  | 'best-of-many'
  | 'several-compared'
  | 'management-differs'
  | 'small-plots'
  | 'summary-trial';

/** Where the evidence stops; `numbers` are the placeholders of its sentence, unrounded. */
export interface EvidenceCaution {
  readonly code: EvidenceCautionCode;
  readonly severity: 'note' | 'warning' | 'stop';
  readonly numbers: Readonly<Record<string, number | string>>;
}

/** The gap in one trial in which both stood. */
export interface TrialLine {
  readonly trial: string;
  readonly site: string;
  readonly siteName: string;
  readonly season: number;
  /** plain mean of the trial's entries */
  readonly trialMean: number;
  /** candidate minus current */
  readonly estimate: number;
  readonly se: number;
  readonly df: number | null;
  readonly interval: LevelInterval;
}

export interface CandidateGap {
  /** candidate minus current, by the model */
  readonly estimate: number;
  readonly se: number;
  readonly df: number;
  /** of "no gap", this pair alone */
  readonly p: number;
  /** of "no gap", with the number of candidates reckoned in */
  readonly pAdjusted: number;
  /** least significant difference at the level of the intervals, this pair alone */
  readonly lsd: number;
  /** for the region's average over seasons, widened for the number of candidates */
  readonly region: LevelInterval;
  /** the same, this pair alone */
  readonly regionAlone: LevelInterval;
  /** for the grower's own next season */
  readonly ownSeason: LevelInterval & { readonly se: number; readonly df: number };
  /** pulled back for having been picked from a list, with its standard errors for both targets */
  readonly shrunken: { readonly estimate: number; readonly se: number; readonly ownSeasonSe: number };
}
