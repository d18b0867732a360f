import { infiniteQueryOptions, queryOptions } from '@tanstack/react-query';
import { listAccounts, listAuditEvents } from '#shared/account.ts';
import { callApi } from '#src/api-client.ts';

export const accountsQuery = queryOptions({
  queryKey: ['accounts'],
  queryFn: async ({ signal }) => (await callApi(listAccounts, {}, signal)).accounts,
});

/** The audit log in parts, newest first; each part asks for what lies before the last event seen. */
export const auditLogQuery = infiniteQueryOptions({
  queryKey: ['audit-events'],
  initialPageParam: undefined as number | undefined,
  queryFn: async ({ pageParam, signal }) =>
    (await callApi(listAuditEvents, { query: pageParam === undefined ? {} : { before: pageParam } }, signal))
      .events,
  getNextPageParam: (lastPart) => lastPart.at(-1)?.id,
});
