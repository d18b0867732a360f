import { queryOptions } from '@tanstack/react-query';
import { openGrowerCopy } from '#shared/grower-copy.ts';
import { callApi, type ReplyOf } from '#src/api-client.ts';

export type OpenedCopy = ReplyOf<typeof openGrowerCopy>;

/** A copy by the secret of its link. It is frozen and every opening is counted, so it is asked for once only. */
export const growerCopyQuery = (token: string) =>
  queryOptions({
    queryKey: ['grower-copy', token],
    queryFn: ({ signal }) => callApi(openGrowerCopy, { params: { token } }, signal),
    staleTime: Infinity,
    refetchOnWindowFocus: false,
    refetchOnReconnect: false,
  });
