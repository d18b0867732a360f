import { lazy, Suspense, useEffect, useState } from 'react';
import { useQuery, useQueryClient } from '@tanstack/react-query';
import type { Me } from '#shared/account.ts';
import { onSessionExpired } from '#src/api-client.ts';
import { meQuery } from '#src/session.ts';

/** Fetched when first needed: forms are no part of the first page. */
const SignInAgain = lazy(async () => ({ default: (await import('./sign-in-again.tsx')).SignInAgain }));

type Waiting = (isSignedIn: boolean) => void;

/** Opens over the page when the session has run out; what was asked is sent again after signing in, so nothing typed is lost. */
export function SessionExpiredDialog() {
  const client = useQueryClient();
  const [waiting, setWaiting] = useState<readonly Waiting[]>([]);
  const { data: person } = useQuery(meQuery);

  useEffect(() => {
    onSessionExpired(() => new Promise((resolve) => setWaiting((before) => [...before, resolve])));
    return () => onSessionExpired(() => Promise.resolve(false));
  }, []);

  const answer = (isSignedIn: boolean) => {
    waiting.forEach((resolve) => resolve(isSignedIn));
    setWaiting([]);
  };
  const continueAs = (next: Me) => {
    // What is on the page belongs to the person before: another one starts afresh.
    if (person && person.id !== next.id) return window.location.reload();
    client.setQueryData(meQuery.queryKey, next);
    answer(true);
  };
  if (waiting.length === 0) return null;
  return (
    <Suspense fallback={null}>
      <SignInAgain defaultEmail={person?.email ?? ''} onSignedIn={continueAs} onClose={() => answer(false)} />
    </Suspense>
  );
}
