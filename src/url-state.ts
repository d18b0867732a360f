import { useCallback } from 'react';
import { useSearchParams } from 'react-router-dom';

/** What to set in the address; null takes a parameter out. */
export type UrlPatch = Record<string, string | null>;

/** Changes parameters of the address in place: a choice on a page is no step to go back over, unless `isStep` says so. */
export function useUrlPatch(): (patch: UrlPatch, options?: { isStep?: boolean }) => void {
  const [, setSearch] = useSearchParams();
  return useCallback(
    (patch, options = {}) =>
      setSearch(
        (before) => {
          const next = new URLSearchParams(before);
          for (const [name, value] of Object.entries(patch)) {
            if (value === null || value === '') next.delete(name);
            else next.set(name, value);
          }
          return next;
        },
        { replace: options.isStep !== true, preventScrollReset: true },
      ),
    [setSearch],
  );
}

/** Reads a parameter that may hold one of a few words; the first where it holds none of them. */
export function readChoice<Choice extends string>(
  search: URLSearchParams,
  name: string,
  choices: readonly [Choice, ...Choice[]],
): Choice {
  const asked = search.get(name);
  return choices.find((choice) => choice === asked) ?? choices[0];
}
