import type { Router } from 'express';
import { listTrials, readTrial, readTrialAnalysis } from '#shared/trial.ts';
import type { Database } from '#server/db.ts';
import { route } from '#server/route.ts';
import { readPublishedAnalysis } from './analyse-content-store.ts';
import { listPublishedTrials, readPublishedTrial } from './trial-store.ts';

/** What was published, for everyone signed in and in every region; drafts are read at the desk. */
export function addTrialRoutes(router: Router, db: Database): void {
  route(router, listTrials, async ({ query }) => ({ trials: await listPublishedTrials(db, query) }));

  route(router, readTrial, async ({ params }) => ({ trial: await readPublishedTrial(db, params.trialId) }));

  route(router, readTrialAnalysis, async ({ params, query, signal }) => ({
    analysis: await readPublishedAnalysis(db, params.trialId, query, signal),
  }));
}
