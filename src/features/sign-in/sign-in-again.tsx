import { useTranslation } from 'react-i18next';
import type { Me } from '#shared/account.ts';
import { Dialog } from '#src/components/dialog.tsx';
import { SignInForm } from './sign-in-form.tsx';

type SignInAgainProps = { defaultEmail: string; onSignedIn: (me: Me) => void; onClose: () => void };

/** The sign-in form in a dialog, over a page that keeps everything. */
export function SignInAgain({ defaultEmail, onSignedIn, onClose }: SignInAgainProps) {
  const { t } = useTranslation('sign-in');
  return (
    <Dialog isOpen title={t('expiredTitle')} onClose={onClose}>
      <p className="mb-4">{t('expiredLead')}</p>
      <SignInForm defaultEmail={defaultEmail} onSignedIn={onSignedIn} />
    </Dialog>
  );
}
