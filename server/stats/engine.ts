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
