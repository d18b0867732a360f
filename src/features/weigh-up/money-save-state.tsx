import { useTranslation } from 'react-i18next';
import { Button } from '#src/components/button.tsx';
import { SaveConflict } from './save-conflict.tsx';
import type { MoneySaving } from './use-money-saving.ts';

type SaveStateProps = { isDirty: boolean; isValid: boolean; saving: MoneySaving };

/** Whether the numbers on the page are the saved ones, and the steps to make them so. */
export function SaveState({ isDirty, isValid, saving }: SaveStateProps) {
  const { t } = useTranslation('weigh-up');
  if (saving.conflict) return <SaveConflict saving={saving} />;
  // Sticks to the foot of the panel, which may be taller than the screen: unsaved numbers must not go unseen. On a low
  // screen, a laptop at 200 % say, it would leave no room for the fields.
  const foot =
    isDirty || !isValid
      ? '[@media(height>=30rem)]:sticky [@media(height>=30rem)]:bottom-0 -mx-4 border-t border-rule bg-card px-4 py-3 sm:-mx-5 sm:px-5'
      : '';
  return (
    <div className={`flex flex-col gap-2 ${foot}`}>
      <p role="status" className="text-sm">
        {!isValid ? t('money.invalid') : isDirty ? t('money.unsaved') : ''}
      </p>
      {saving.errorText && (
        <p role="alert" className="text-sm font-semibold text-stop">
          {saving.errorText}
        </p>
      )}
      {isDirty && (
        <div className="flex flex-wrap gap-2">
          <Button type="submit" tone="main" isBusy={saving.isSaving}>
            {t('money.save')}
          </Button>
          <Button tone="quiet" onClick={saving.reset}>
            {t('money.reset')}
          </Button>
        </div>
      )}
    </div>
  );
}
