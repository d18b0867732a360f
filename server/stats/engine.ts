/** The engine's front door. What is not named here is the engine's own affair. */
export { AnalysisError, type AnalysisErrorCode } from './analysis-error.ts';
export { analyseTrial } from './trial/trial-analysis.ts';
export {
  designKinds,
  type DesignKind,
  type TrialDesign,
  type TrialOptions,
  type TrialPlot,
} from './trial/trial-data.ts';
export type * from './trial/trial-result.ts';
export { analyseOrdinal, type OrdinalAnalysis } from './trial/ordinal-analysis.ts';
export { checkLayout, type LayoutFinding, type PlacedPlot } from './checks/field-layout.ts';
export { smallestShownDifference } from './checks/power.ts';
export { tQuantileUpper } from './distributions/student-t.ts';
export { groupUndiffering } from './trial/different-groups.ts';
export { analyseTwoWay, type TwoWayAnalysis, type TwoWayRefused } from './network/two-way-analysis.ts';
export { combineTrials, type CombinedTrials, type CombineOptions } from './network/combine-trials.ts';
export type { InteractionVariances, TrialCell } from './network/network-cell.ts';
export { synthesisePair, type PairEffect, type PairSynthesis } from './network/pair-synthesis.ts';
export { weighCandidates } from './network/weigh-candidates.ts';
export { chanceAbove, chanceOver } from './network/gap-chance.ts';
export { defaultUsualVariances } from './network/interaction-variances.ts';
export type * from './network/weigh-question.ts';
export type * from './network/weigh-result.ts';
export type { EvidenceTier } from './network/evidence-tier.ts';
export { analyseStability, type StabilityAnalysis, type StabilityRefused } from './network/stability.ts';
export { fitGapLine, readGapAt, type GapLine, type GapPoint, type NoGapLine } from './network/gap-line.ts';
export {
  estimateUsualVariances,
  NEEDED_FOR_USUAL,
  varianceInterval,
  type UsualEstimate,
  type NoUsualEstimate,
} from './network/estimate-usual-variances.ts';
export { recoverError, type RecoveredError } from './summary/recover-error.ts';
export { poolErrorVariances, type PooledErrors, type TrialError } from './network/pool-error-variances.ts';
