import { useState } from 'react';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { revokeGrowerCopy, type GrowerCopyLine } from '#shared/grower-copy.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { Actions, Dialog } from '#src/components/dialog.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useErrorText } from '#src/use-error-text.ts';
import { CopyMailState } from './copy-mail-state.tsx';
import { growerCopiesQuery } from './weigh-up-queries.ts';

type CopyListProps = { weighUpId: string; copies: readonly GrowerCopyLine[] };

/** Whether a copy still opens, and if not why. */
export function stateOfCopy(copy: GrowerCopyLine, now: Date): 'active' | 'expired' | 'revoked' {
  if (copy.revokedAt !== null) return 'revoked';
  return new Date(copy.expiresAt) <= now ? 'expired' : 'active';
}

/** What was handed over: how often it was opened, what changed since, and the way to revoke it. */
export function CopyList({ weighUpId, copies }: CopyListProps) {
  const { t } = useTranslation('weigh-up');
  const [leaving, setLeaving] = useState<GrowerCopyLine | null>(null);
  const columns = useCopyColumns(weighUpId, setLeaving);
  if (copies.length === 0) return <p className="text-faded">{t('copies.empty')}</p>;
  return (
    <>
      <DataTable caption={t('copies.caption')} columns={columns} rows={copies} rowKey={(copy) => copy.id} />
      {copies.some(({ mail }) => mail?.state === 'sent' || mail?.state === 'failed') && (
        <p className="max-w-prose text-sm text-faded">{t('copies.linkNotKept')}</p>
      )}
      {leaving && (
        <RevokeDialog
          key={leaving.id}
          weighUpId={weighUpId}
          copy={leaving}
          onClose={() => setLeaving(null)}
        />
      )}
    </>
  );
}

function useCopyColumns(
  weighUpId: string,
  onRevoke: (copy: GrowerCopyLine) => void,
): Column<GrowerCopyLine>[] {
  const { t } = useTranslation(['weigh-up', 'common']);
  const format = useFormat();
  const now = new Date();
  return [
    {
      id: 'made',
      header: t('weigh-up:copies.column.made'),
      cell: (copy) => (
        <>
          {format.dateTime(copy.createdAt)}
          <span className="block text-sm font-normal text-faded">
            {t(`common:languageName.${copy.language}`)}
          </span>
          <ChangedTrials copy={copy} />
        </>
      ),
    },
    {
      id: 'expires',
      header: t('weigh-up:copies.column.expires'),
      cell: (copy) => format.date(copy.expiresAt),
    },
    {
      id: 'openings',
      header: t('weigh-up:copies.column.openings'),
      cell: ({ openings, lastOpenedAt }) =>
        lastOpenedAt === null
          ? t('weigh-up:copies.neverOpened')
          : t('weigh-up:copies.openings', { count: openings, date: format.date(lastOpenedAt) }),
    },
    {
      id: 'mail',
      header: t('weigh-up:copies.column.mail'),
      cell: (copy) => <CopyMailState weighUpId={weighUpId} copy={copy} />,
    },
    {
      id: 'state',
      header: t('weigh-up:copies.column.state'),
      cell: (copy) =>
        copy.revokedAt === null
          ? t(stateOfCopy(copy, now) === 'expired' ? 'weigh-up:copies.expired' : 'weigh-up:copies.active')
          : t('weigh-up:copies.revoked', { date: format.date(copy.revokedAt) }),
    },
    {
      id: 'step',
      header: t('weigh-up:copies.column.step'),
      cell: (copy) =>
        stateOfCopy(copy, now) === 'active' ? (
          <Button
            tone="quiet"
            aria-label={t('weigh-up:copies.revokeOf', { date: format.dateTime(copy.createdAt) })}
            onClick={() => onRevoke(copy)}
          >
            {t('weigh-up:copies.revoke')}
          </Button>
        ) : (
          '–'
        ),
    },
  ];
}

/** The advisor is told which trials of a copy were corrected or withdrawn after it was handed over. */
function ChangedTrials({ copy }: { copy: GrowerCopyLine }) {
  const { t } = useTranslation('weigh-up');
  if (copy.laterChanges.length === 0) return null;
  return (
    <span className="block text-sm font-normal text-break-even">
      {t('copies.changed')}{' '}
      {copy.laterChanges
        .map(({ siteName, season, change }) => t(`copies.${change}`, { site: siteName, season }))
        .join(' · ')}
    </span>
  );
}

type RevokeDialogProps = { weighUpId: string; copy: GrowerCopyLine; onClose: () => void };

function RevokeDialog({ weighUpId, copy, onClose }: RevokeDialogProps) {
  const { t } = useTranslation(['weigh-up', 'common']);
  const format = useFormat();
  const errorText = useErrorText();
  const client = useQueryClient();
  const revoking = useMutation({
    mutationFn: () => callApi(revokeGrowerCopy, { params: { copyId: copy.id } }),
    onSuccess: async () => {
      await client.invalidateQueries({ queryKey: growerCopiesQuery(weighUpId).queryKey });
      showToast(t('weigh-up:copies.revokedDone'));
      onClose();
    },
  });
  return (
    <Dialog isOpen title={t('weigh-up:copies.revokeTitle')} onClose={onClose}>
      <p>{t('weigh-up:copies.revokeText', { date: format.dateTime(copy.createdAt) })}</p>
      {revoking.isError && <ErrorState message={errorText(revoking.error)} />}
      <Actions>
        <Button onClick={onClose}>{t('common:cancel')}</Button>
        <Button tone="danger" isBusy={revoking.isPending} onClick={() => revoking.mutate()}>
          {t('weigh-up:copies.revoke')}
        </Button>
      </Actions>
    </Dialog>
  );
}
