import { viewAnalysis } from '#server/trials/analyse-content-view.ts';
import { estimateFromEvidence } from '#server/usual-variances/estimate-from-evidence.ts';
import { weighEvidence } from '#server/weigh-up/weigh-evidence.ts';

/** What a worker can be asked for: pure functions of what a message carries. */
export const computingTasks = { weighEvidence, viewAnalysis, estimateFromEvidence } as const;

export type ComputingTasks = typeof computingTasks;
export type TaskName = keyof ComputingTasks;
