import { useTranslation } from 'react-i18next';
import { ErrorState } from '#src/components/error-state.tsx';
import { useErrorText } from '#src/use-error-text.ts';
import { isConflict } from './use-saving-base.ts';

/** Why a panel was not saved; after a conflict, that its own entries stand and can be saved over what the page now shows. */
export function PanelFailure({ error }: { error: Error | null }) {
  const { t } = useTranslation('errors');
  const errorText = useErrorText();
  if (error === null) return null;
  return <ErrorState message={isConflict(error) ? t('saved-meanwhile') : errorText(error)} />;
}
