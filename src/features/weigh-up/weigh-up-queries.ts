import { keepPreviousData, queryOptions } from '@tanstack/react-query';
import { listAffectedCopies } from '#shared/affected-copy.ts';
import { listGrowerCopies } from '#shared/grower-copy.ts';
import { listCandidates, listWeighUps, readWeighUp, type candidateQuery } from '#shared/weigh-up.ts';
import { listDrafts } from '#shared/weigh-up-draft.ts';
import { readDecisions } from '#shared/weigh-up-record.ts';
import type { z } from 'zod';
import { callApi } from '#src/api-client.ts';
import { takeFirstAnswer } from '#src/first-answers.ts';

/** A question as far as the list of candidates needs it. */
export type CandidateQuestion = z.output<typeof candidateQuery>;

export const weighUpsQuery = queryOptions({
  queryKey: ['weigh-ups'],
  queryFn: async ({ signal }) => (await callApi(listWeighUps, {}, signal)).weighUps,
  initialData: () => takeFirstAnswer(listWeighUps, {})?.weighUps,
});

/** A weigh-up with its result, computed by the server for the versions that count now. */
export const weighUpQuery = (weighUpId: string) =>
  queryOptions({
    queryKey: ['weigh-up', weighUpId],
    queryFn: ({ signal }) => callApi(readWeighUp, { params: { weighUpId } }, signal),
    initialData: () => takeFirstAnswer(readWeighUp, { params: { weighUpId } }),
  });

/** All varieties with trials, weighed against the current one, with the price sheet's defaults. */
export const candidatesQuery = (question: CandidateQuestion) =>
  queryOptions({
    queryKey: ['candidates', question],
    queryFn: ({ signal }) => callApi(listCandidates, { query: question }, signal),
    placeholderData: keepPreviousData,
  });

/** How often the list is asked again while a mail is on its way, ms. */
const mailLookEvery = 4000;

/** The copies of a weigh-up, and whether the server can send them by mail. */
export const growerCopiesQuery = (weighUpId: string) =>
  queryOptions({
    queryKey: ['weigh-up', weighUpId, 'grower-copies'],
    queryFn: ({ signal }) => callApi(listGrowerCopies, { params: { weighUpId } }, signal),
    refetchInterval: ({ state }) =>
      state.data?.copies.some(({ mail }) => mail?.state === 'waiting' || mail?.state === 'sending')
        ? mailLookEvery
        : false,
  });

/** One's open copies whose trials have changed since; a correction may come any time, so it is asked for afresh. */
export const affectedCopiesQuery = queryOptions({
  queryKey: ['affected-copies'],
  queryFn: ({ signal }) => callApi(listAffectedCopies, {}, signal),
  staleTime: 0,
});

/** What was decided on a weigh-up, and in earlier seasons for the same farm and crop. */
export const decisionsQuery = (weighUpId: string) =>
  queryOptions({
    queryKey: ['weigh-up', weighUpId, 'decision'],
    queryFn: ({ signal }) => callApi(readDecisions, { params: { weighUpId } }, signal),
  });

/** One's drafts; asked for afresh each time, since they change while they are written. */
export const draftsQuery = queryOptions({
  queryKey: ['weigh-up-drafts'],
  queryFn: async ({ signal }) => (await callApi(listDrafts, {}, signal)).drafts,
  staleTime: 0,
});
