import { QueryClient } from '@tanstack/react-query';
import { ApiError } from './api-client.ts';

const mostRetries = 3;

/** Retries only what may pass by itself (server or network away), waiting 1, 2 and 4 seconds. */
export function makeQueryClient(): QueryClient {
  return new QueryClient({
    defaultOptions: {
      queries: {
        staleTime: 30_000,
        // Without network a request fails at once and says so, instead of waiting in silence.
        networkMode: 'always',
        retry: (failures, error) => error instanceof ApiError && error.isPassing && failures < mostRetries,
        retryDelay: (failures) => 1000 * 2 ** failures,
      },
      mutations: { networkMode: 'always', retry: false },
    },
  });
}
