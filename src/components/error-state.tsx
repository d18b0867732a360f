import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import { Button } from './button.tsx';

type ErrorStateProps = {
  /** What happened, in words: the sentence of an error code. */
  message: ReactNode;
  /** What the person can do about it, where there is more than trying again. */
  advice?: ReactNode;
  onRetry?: () => void;
  isRetrying?: boolean;
};

/** Something failed: what happened, what to do, and a retry. */
export function ErrorState({ message, advice, onRetry, isRetrying = false }: ErrorStateProps) {
  const { t } = useTranslation('common');
  return (
    <div role="alert" className="rounded-lg border-l-4 border-stop bg-card px-5 py-4">
      <p className="font-semibold">{message}</p>
      {advice && <p className="mt-1 text-faded">{advice}</p>}
      {onRetry && (
        <Button className="mt-3" onClick={onRetry} isBusy={isRetrying}>
          {t('tryAgain')}
        </Button>
      )}
    </div>
  );
}
