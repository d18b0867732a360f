import type { UseQueryResult } from '@tanstack/react-query';
import { ErrorState } from './components/error-state.tsx';
import { useErrorText } from './use-error-text.ts';

type FailedQuery = Pick<UseQueryResult, 'error' | 'refetch' | 'isFetching'>;

/** A query that failed, in words, with its retry. */
export function QueryErrorState({ query }: { query: FailedQuery }) {
  const errorText = useErrorText();
  return (
    <ErrorState
      message={errorText(query.error)}
      onRetry={() => void query.refetch()}
      isRetrying={query.isFetching}
    />
  );
}
