import { useQuery, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Navigate, useSearchParams } from 'react-router-dom';
import { PageHeading } from '#src/components/page-heading.tsx';
import { readNext } from '#src/paths.ts';
import { enterSession, meQuery } from '#src/session.ts';
import { SignInForm } from './sign-in-form.tsx';

/** The door: leads back to where the person was going. */
export function SignInPage() {
  const { t } = useTranslation('sign-in');
  const client = useQueryClient();
  const [search] = useSearchParams();
  const { data: me } = useQuery(meQuery);
  if (me) return <Navigate to={readNext(search)} replace />;
  return (
    <>
      <PageHeading title={t('title')} />
      <p className="mb-6 max-w-prose text-lg">{t('lead')}</p>
      <SignInForm onSignedIn={(person) => void enterSession(client, person)} />
      <p className="mt-6 max-w-prose text-sm text-faded">{t('noAccount')}</p>
    </>
  );
}
