import { useState } from 'react';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { changeAccount, type Account, type AccountChangeInput } from '#shared/account.ts';
import type { Region } from '#shared/catalogue.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { Actions, Dialog } from '#src/components/dialog.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { useErrorText } from '#src/use-error-text.ts';
import { accountsQuery } from './account-queries.ts';
import { RightsFields, type Rights } from './rights-fields.tsx';

type AccountDialogProps = { account: Account; regions: readonly Region[]; onClose: () => void };

function useAccountChange(account: Account, onDone: () => void) {
  const { t } = useTranslation('accounts');
  const client = useQueryClient();
  return useMutation({
    mutationFn: (body: AccountChangeInput) =>
      callApi(changeAccount, { params: { accountId: account.id }, body }),
    onSuccess: async (_, change) => {
      await client.invalidateQueries({ queryKey: accountsQuery.queryKey });
      const done =
        change.status === 'suspended' ? 'suspended' : change.status === 'active' ? 'broughtBack' : 'saved';
      showToast(t(`changeDialog.${done}`, { name: account.name }));
      onDone();
    },
  });
}

/** Changes rights, suspends or brings back; suspending says first what will happen. */
export function AccountDialog({ account, regions, onClose }: AccountDialogProps) {
  const { t } = useTranslation(['accounts', 'common']);
  const [isConfirming, setConfirming] = useState(false);
  const { name, role, language, regionIds } = account;
  const form = useForm<Rights>({ defaultValues: { role, language, regionIds } });
  const change = useAccountChange(account, onClose);
  const errorText = useErrorText();
  if (isConfirming) {
    return <StatusDialog account={account} onClose={onClose} onBack={() => setConfirming(false)} />;
  }
  return (
    <Dialog isOpen title={t('accounts:changeDialog.title', { name })} onClose={onClose}>
      <form
        className="flex flex-col gap-4"
        onSubmit={(event) => void form.handleSubmit((rights) => change.mutate(rights))(event)}
      >
        <RightsFields control={form.control} regions={regions} />
        {change.isError && <ErrorState message={errorText(change.error)} />}
        <Actions>
          <Button tone={account.status === 'active' ? 'danger' : 'plain'} onClick={() => setConfirming(true)}>
            {account.status === 'active'
              ? t('accounts:changeDialog.suspend')
              : t('accounts:changeDialog.bringBack')}
          </Button>
          <Button type="submit" tone="main" isBusy={change.isPending}>
            {t('accounts:changeDialog.save')}
          </Button>
        </Actions>
      </form>
    </Dialog>
  );
}

type StatusDialogProps = { account: Account; onClose: () => void; onBack: () => void };

function StatusDialog({ account, onClose, onBack }: StatusDialogProps) {
  const { t } = useTranslation(['accounts', 'common']);
  const errorText = useErrorText();
  const change = useAccountChange(account, onClose);
  const isSuspension = account.status === 'active';
  const step = isSuspension ? 'suspend' : 'bringBack';
  const { name } = account;
  return (
    <Dialog isOpen title={t(`accounts:changeDialog.${step}Title`, { name })} onClose={onClose}>
      <p className="mb-3">{t(`accounts:changeDialog.${step}Text`, { name })}</p>
      {change.isError && <ErrorState message={errorText(change.error)} />}
      <Actions>
        <Button onClick={onBack}>{t('common:cancel')}</Button>
        <Button
          tone={isSuspension ? 'danger' : 'main'}
          isBusy={change.isPending}
          onClick={() => change.mutate({ status: isSuspension ? 'suspended' : 'active' })}
        >
          {t(`accounts:changeDialog.${step}`)}
        </Button>
      </Actions>
    </Dialog>
  );
}
