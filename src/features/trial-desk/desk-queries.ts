import { keepPreviousData, queryOptions, type QueryClient } from '@tanstack/react-query';
import type { z } from 'zod';
import { listDeskTrials, readDeskAnalysis, readDeskTrial } from '#shared/trial-desk.ts';
import type { TrialDetail } from '#shared/trial.ts';
import { listUsualVariances } from '#shared/usual-variance.ts';
import { callApi } from '#src/api-client.ts';

export type DeskFilter = z.output<NonNullable<typeof listDeskTrials.query>>;

/** Trials of one's regions in every state. */
export const deskTrialsQuery = (filter: DeskFilter) =>
  queryOptions({
    queryKey: ['desk-trials', filter],
    queryFn: async ({ signal }) => (await callApi(listDeskTrials, { query: filter }, signal)).trials,
    placeholderData: keepPreviousData,
  });

export const deskTrialQuery = (trialId: string) =>
  queryOptions({
    queryKey: ['desk-trial', trialId],
    queryFn: async ({ signal }) => (await callApi(readDeskTrial, { params: { trialId } }, signal)).trial,
  });

/** Of the working copy, whatever is published. */
export const deskAnalysisQuery = (trialId: string, trait: string) =>
  queryOptions({
    queryKey: ['desk-trial', trialId, 'analysis', trait],
    queryFn: async ({ signal }) =>
      (await callApi(readDeskAnalysis, { params: { trialId }, query: { trait } }, signal)).analysis,
    placeholderData: keepPreviousData,
  });

/** Of every crop, with their history. */
export const usualVariancesQuery = queryOptions({
  queryKey: ['usual-variances'],
  queryFn: async ({ signal }) => (await callApi(listUsualVariances, {}, signal)).crops,
});

/** Takes over a changed trial and asks again for whatever hangs on it. */
export async function takeDeskTrial(client: QueryClient, trial: TrialDetail): Promise<void> {
  client.setQueryData(deskTrialQuery(trial.id).queryKey, trial);
  await Promise.all([
    client.invalidateQueries({ queryKey: ['desk-trial', trial.id, 'analysis'] }),
    client.invalidateQueries({ queryKey: ['desk-trials'] }),
    client.invalidateQueries({ queryKey: ['trials'] }),
    client.invalidateQueries({ queryKey: ['trial', trial.id] }),
  ]);
}
