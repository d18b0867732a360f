import { useTranslation } from 'react-i18next';
import { ApiError } from './api-client.ts';
import { ErrorState } from './components/error-state.tsx';
import { PageHeading } from './components/page-heading.tsx';
import { NotFoundPage } from './not-found-page.tsx';
import { useErrorText } from './use-error-text.ts';

/** A page that broke: what happened and a way on, instead of a blank screen. */
export function BrokenPage({ error }: { error: unknown }) {
  const { t } = useTranslation('common');
  const errorText = useErrorText();
  if (error instanceof ApiError && error.code === 'not-found') return <NotFoundPage />;
  return (
    <>
      <PageHeading title={t('brokenTitle')} />
      <ErrorState
        message={errorText(error)}
        advice={t('brokenAdvice')}
        onRetry={() => window.location.reload()}
      />
    </>
  );
}
