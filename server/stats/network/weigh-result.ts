import type { InteractionVariances } from './network-cell.ts';
import type { PairSynthesis } from './pair-synthesis.ts';
import type { EvidenceTier } from './evidence-tier.ts';
import type { GapLine, NoGapLine } from './gap-line.ts';
import type { EntryStability } from './stability.ts';
import type {
  CandidateGap,
  EvidenceCaution,
  LevelInterval,
  TraitVerdict,
  TrialLine,
} from './weigh-question.ts';

export interface CandidateWeighing {
  readonly candidate: string;
  readonly verdict: TraitVerdict;
  /** null with the reason: it stood nowhere, or no chain of trials leads to the current variety */
  readonly gap: CandidateGap | null;
  readonly noGapBecause: 'no-trials' | 'disconnected' | 'not-fitted' | null;
  readonly tier: EvidenceTier;
  /** trials in which it stood, and those it shared with the current variety */
  readonly siteYears: number;
  readonly sharedSiteYears: number;
  /** shared trials in which it led, on the better side */
  readonly ledIn: number;
  /** further site-years at which the present gap would be settled; 41: more than 40; null: it is settled, or there is no gap */
  readonly siteYearsToSettle: number | null;
  /** verdict with the usual variances halved and doubled; null without usual variances */
  readonly sensitivity: { readonly half: TraitVerdict; readonly double: TraitVerdict } | null;
  readonly trials: readonly TrialLine[];
  /** cross-check from the shared trials alone */
  readonly synthesis: PairSynthesis | null;
  /** the gap as a line over the shared trials' mean yields */
  readonly gapLine: GapLine | NoGapLine;
  /** its answer to good and poor environments; null where it cannot be told */
  readonly stability: EntryStability | null;
  readonly cautions: readonly EvidenceCaution[];
}

/** One entry against the best of the others, simultaneous over the list. */
export interface BestStanding {
  readonly entry: string;
  /** its mean less the best of the others' */
  readonly estimate: number;
  readonly interval: LevelInterval;
  /** false: shown not to be the best */
  readonly mayBeBest: boolean;
  /** true: it alone is shown to be the best */
  readonly isBest: boolean;
}

export interface LeftOutTrial {
  readonly trial: string;
  readonly reason: 'weak-cv' | 'no-variance' | 'not-connected' | 'set-aside';
}

export interface TraitWeighing {
  readonly trait: string;
  /** lsd: each pair alone; dunnett: intervals widened for the number of candidates */
  readonly comparison: 'lsd' | 'dunnett';
  readonly trials: readonly string[];
  readonly leftOut: readonly LeftOutTrial[];
  readonly sites: number;
  readonly seasons: readonly number[];
  readonly entries: number;
  /** null where nothing could be fitted */
  readonly fit: {
    readonly penalty: number;
    readonly components: InteractionVariances;
    readonly usual: InteractionVariances | null;
    /** common factor by which varieties moved in these trials, against the usual variances; null without them */
    readonly usualFactor: number | null;
    readonly logLik: number;
    readonly iterations: number;
  } | null;
  readonly candidates: readonly CandidateWeighing[];
  /** current variety and candidates against the best of them, for a question about the best of a list */
  readonly best: readonly BestStanding[] | null;
  /** about the evidence as a whole; those of one candidate stand with it */
  readonly cautions: readonly EvidenceCaution[];
}

export interface WeighedCandidates {
  /** no-trials: the region has none in these seasons, so there is no verdict at all */
  readonly answer: 'weighed' | 'no-trials';
  readonly traits: readonly TraitWeighing[];
  /** about the question as a whole */
  readonly cautions: readonly EvidenceCaution[];
}
