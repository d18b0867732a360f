import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import {
  listTrials,
  readTrial,
  readTrialAnalysis,
  type AnalysisQuery,
  type TrialFilter,
} from '#shared/trial.ts';
import { callApi } from '#src/api-client.ts';

/** Published trials of a choice of crop, region and season. */
export const trialsQuery = (filter: TrialFilter) =>
  queryOptions({
    queryKey: ['trials', filter],
    queryFn: async ({ signal }) => (await callApi(listTrials, { query: filter }, signal)).trials,
    placeholderData: keepPreviousData,
  });

/** A trial's head and history. */
export const trialQuery = (trialId: string) =>
  queryOptions({
    queryKey: ['trial', trialId],
    queryFn: async ({ signal }) => (await callApi(readTrial, { params: { trialId } }, signal)).trial,
  });

/** The analysis of one trait; the one before stays on the page until the next has come. */
export const trialAnalysisQuery = (trialId: string, query: AnalysisQuery) =>
  queryOptions({
    queryKey: ['trial', trialId, 'analysis', query],
    queryFn: async ({ signal }) =>
      (await callApi(readTrialAnalysis, { params: { trialId }, query: { ...query } }, signal)).analysis,
    placeholderData: keepPreviousData,
  });
