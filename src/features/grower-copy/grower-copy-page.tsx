import type { ReactNode } from 'react';
import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { useParams } from 'react-router-dom';
import type { Language } from '#shared/account.ts';
import { ApiError } from '#src/api-client.ts';
import { GavelMark } from '#src/components/gavel-mark.tsx';
import { LanguageSwitch } from '#src/components/language-switch.tsx';
import { OfflineNotice } from '#src/components/offline-notice.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { CopyBody } from './copy-body.tsx';
import { growerCopyQuery } from './grower-copy-query.ts';
import { useCopyLanguage } from './use-copy-language.ts';

/** The frozen copy behind a link: no account, nothing to change, first of all for a phone. */
export function GrowerCopyPage() {
  const { token = '' } = useParams();
  const copy = useQuery(growerCopyQuery(token));
  const chooseLanguage = useCopyLanguage(copy.data?.language);
  return (
    <CopyShell onLanguage={chooseLanguage}>
      {copy.isPending && <Skeleton lines={8} />}
      {copy.isError && <FailedLink query={copy} />}
      {copy.data && <CopyBody copy={copy.data} />}
    </CopyShell>
  );
}

type CopyShellProps = { onLanguage: (language: Language) => void; children: ReactNode };

/** Name and language above, one column below. Search engines are kept out and the link is told to nobody. */
function CopyShell({ onLanguage, children }: CopyShellProps) {
  const { t } = useTranslation(['copy', 'common']);
  return (
    <>
      <meta name="robots" content="noindex, nofollow" />
      <meta name="referrer" content="no-referrer" />
      <a
        href="#page"
        className="sr-only focus:not-sr-only focus:absolute focus:left-2 focus:top-2 focus:z-10 focus:rounded-md focus:bg-card focus:p-3"
      >
        {t('common:skipToPage')}
      </a>
      <header className="border-b border-rule">
        <div className="mx-auto flex max-w-prose items-center gap-3 px-4 py-1">
          <GavelMark />
          <span className="font-bold">
            Gavelrow <span className="font-normal text-faded">· {t('copy:readOnly')}</span>
          </span>
          <span className="ml-auto print:hidden">
            <LanguageSwitch onChoose={onLanguage} />
          </span>
        </div>
      </header>
      <OfflineNotice />
      <main id="page" tabIndex={-1} className="mx-auto max-w-prose px-4 pb-16 pt-5 outline-none">
        {children}
      </main>
    </>
  );
}

const knownFailures = ['link-unknown', 'link-expired', 'link-revoked'] as const;

type FailedQuery = Parameters<typeof QueryErrorState>[0]['query'];

/** One polite page for each way a link can lead nowhere; anything else can be tried again. */
function FailedLink({ query }: { query: FailedQuery }) {
  const { t } = useTranslation('copy');
  const { error } = query;
  const failure = error instanceof ApiError ? knownFailures.find((code) => code === error.code) : undefined;
  if (failure === undefined) return <QueryErrorState query={query} />;
  return (
    <>
      <PageHeading title={t(`failed.${failure}.title`)} />
      <p>{t(`failed.${failure}.text`)}</p>
    </>
  );
}
