import { useTranslation } from 'react-i18next';
import { Button } from '#src/components/button.tsx';
import type { MoneySaving } from './use-money-saving.ts';

/** Somebody saved in between: nothing is overwritten or lost, and the person decides. */
export function SaveConflict({ saving }: { saving: MoneySaving }) {
  const { t } = useTranslation('weigh-up');
  return (
    <div role="alert" className="rounded-lg border-l-4 border-stop bg-paper p-4">
      <p className="font-semibold">{t('money.conflictTitle')}</p>
      <p className="mt-1 text-sm">{t('money.conflictText')}</p>
      <div className="mt-3 flex flex-wrap gap-2">
        <Button onClick={saving.takeTheirs} isBusy={saving.isSaving}>
          {t('money.conflictTake')}
        </Button>
        <Button onClick={saving.keepMine} isBusy={saving.isSaving}>
          {t('money.conflictKeep')}
        </Button>
      </div>
    </div>
  );
}
