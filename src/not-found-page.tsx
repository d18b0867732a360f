import { useTranslation } from 'react-i18next';
import { LinkButton } from './components/button.tsx';
import { PageHeading } from './components/page-heading.tsx';
import { paths } from './paths.ts';

/** An address that leads nowhere, or to something this person may not see: both answer alike. */
export function NotFoundPage() {
  const { t } = useTranslation('common');
  return (
    <>
      <PageHeading title={t('notFoundTitle')} />
      <p className="mb-5 max-w-prose">{t('notFoundText')}</p>
      <LinkButton to={paths.home}>{t('toStart')}</LinkButton>
    </>
  );
}
