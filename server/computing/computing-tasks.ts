import { viewAnalysis } from '#server/trials/analyse-content-view.ts';
import { weighEvidence } from '#server/weigh-up/weigh-evidence.ts';

/** What a worker can be asked for: pure functions of what a message carries. */
export const computingTasks = { weighEvidence, viewAnalysis } as const;

export type ComputingTasks = typeof computingTasks;
export type TaskName = keyof ComputingTasks;
