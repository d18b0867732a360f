import {
  queryOptions,
  useMutation,
  useQueryClient,
  useSuspenseQuery,
  type QueryClient,
} from '@tanstack/react-query';
import { changeMe, readMe, signOut, type Language, type Me } from '#shared/account.ts';
import { callApi } from './api-client.ts';
import { showToast } from './components/toaster.tsx';
import { forgetFirstAnswers, takeFirstAnswer } from './first-answers.ts';
import { changeLanguage } from './i18n.ts';
import { paths } from './paths.ts';
import { saveAll } from './save-first.ts';
import { useErrorText } from './use-error-text.ts';

/** Who is signed in; null for nobody. Asked when the page is loaded: the account's language then holds on any device. */
export const meQuery = queryOptions({
  queryKey: ['me'],
  queryFn: async ({ signal }) => {
    const { me } = await callApi(readMe, {}, signal);
    if (me) await changeLanguage(me.language);
    return me;
  },
  // The page has started in that account's language; see startI18n().
  initialData: () => takeFirstAnswer(readMe, {})?.me,
  staleTime: Infinity,
});

/** Takes over a person who has just signed in, and their language with them. */
export async function enterSession(client: QueryClient, me: Me): Promise<void> {
  forgetFirstAnswers();
  client.setQueryData(meQuery.queryKey, me);
  // Without the sentences of their language they still are signed in, in this one.
  await changeLanguage(me.language).catch(() => undefined);
}

/** The signed-in person, on pages that only a signed-in person reaches. */
export function useMe(): Me {
  const { data } = useSuspenseQuery(meQuery);
  if (data === null) throw new Error('This page is for signed-in people only');
  return data;
}

/** Changes the language of the page, and of the account where somebody is signed in. */
export function useLanguageSwitch(): (language: Language) => void {
  const client = useQueryClient();
  const errorText = useErrorText();
  const change = useMutation({
    mutationFn: async (language: Language) => {
      await changeLanguage(language);
      if (!client.getQueryData(meQuery.queryKey)) return;
      const { me } = await callApi(changeMe, { body: { language } });
      client.setQueryData(meQuery.queryKey, me);
    },
    onError: (error) => showToast(errorText(error)),
  });
  return (language) => change.mutate(language);
}

/** Signs out. The page is loaded anew, so that nothing fetched for the person is left in it. */
export function useSignOut(): () => void {
  const errorText = useErrorText();
  const leave = useMutation({
    mutationFn: async () => {
      await saveAll();
      return callApi(signOut, {});
    },
    onSuccess: () => window.location.assign(paths.signIn),
    onError: (error) => showToast(errorText(error)),
  });
  return () => leave.mutate();
}
