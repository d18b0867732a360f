import { useCallback } from 'react';
import { useQueryClient } from '@tanstack/react-query';
import { ApiError } from '#src/api-client.ts';
import { weighUpQuery } from './weigh-up-queries.ts';

/** Whether somebody, or the same person in another tab, saved in between. */
export const isConflict = (error: unknown): boolean =>
  error instanceof ApiError && error.code === 'revision-conflict';

/**
 * Where a save was refused because somebody saved in between, fetches what they saved: the page then shows it beside
 * what is still chosen or typed, and saving once more is a choice made in its sight.
 */
export function useFollowingConflict(weighUpId: string): (error: Error) => void {
  const client = useQueryClient();
  return useCallback(
    (error) => {
      if (isConflict(error)) void client.invalidateQueries({ queryKey: weighUpQuery(weighUpId).queryKey });
    },
    [client, weighUpId],
  );
}
