import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { useNavigate } from 'react-router-dom';
import { archiveWeighUp, duplicateWeighUp } from '#shared/weigh-up-record.ts';
import type { WeighUpLine } from '#shared/weigh-up.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { fillPath, paths } from '#src/paths.ts';
import { useErrorText } from '#src/use-error-text.ts';
import { weighUpsQuery } from './weigh-up-queries.ts';

/** What can be done with a weigh-up in the list: carry it into the next season, put it away, bring it back. */
export function WeighUpSteps({ line }: { line: WeighUpLine }) {
  const { t } = useTranslation('record');
  const archiving = useArchiving(line);
  const duplicating = useDuplicating(line);
  const about = { grower: line.growerName, farm: line.farmName };
  return (
    <span className="flex flex-wrap justify-end gap-x-2 sm:justify-start">
      <Button
        tone="quiet"
        isBusy={duplicating.isPending}
        aria-label={t('list.duplicateOf', about)}
        onClick={() => duplicating.mutate()}
      >
        {t('list.duplicate')}
      </Button>
      {line.archivedAt === null ? (
        <Button
          tone="quiet"
          isBusy={archiving.isPending}
          aria-label={t('list.archiveOf', about)}
          onClick={() => archiving.mutate(true)}
        >
          {t('list.archive')}
        </Button>
      ) : (
        <Button
          tone="quiet"
          isBusy={archiving.isPending}
          aria-label={t('list.bringBackOf', about)}
          onClick={() => archiving.mutate(false)}
        >
          {t('list.bringBack')}
        </Button>
      )}
    </span>
  );
}

function useArchiving(line: WeighUpLine) {
  const { t } = useTranslation('record');
  const client = useQueryClient();
  const errorText = useErrorText();
  const set = async (isArchived: boolean) => {
    await callApi(archiveWeighUp, { params: { weighUpId: line.id }, body: { isArchived } });
    await client.invalidateQueries({ queryKey: weighUpsQuery.queryKey });
  };
  const sayFailure = (error: unknown) => showToast(errorText(error));
  return useMutation({
    mutationFn: set,
    onSuccess: (_, isArchived) =>
      // The line is gone from the list by now, and its mutation with it.
      showToast(
        t(isArchived ? 'list.archivedDone' : 'list.broughtBack', { grower: line.growerName }),
        () => void set(!isArchived).catch(sayFailure),
      ),
    onError: sayFailure,
  });
}

function useDuplicating(line: WeighUpLine) {
  const { t } = useTranslation('record');
  const client = useQueryClient();
  const navigate = useNavigate();
  const errorText = useErrorText();
  return useMutation({
    mutationFn: () => callApi(duplicateWeighUp, { params: { weighUpId: line.id } }),
    onSuccess: ({ weighUp }) => {
      void client.invalidateQueries({ queryKey: weighUpsQuery.queryKey });
      showToast(t('list.duplicated', { from: weighUp.seasonFrom, to: weighUp.seasonTo }));
      void navigate(fillPath(paths.weighUp, { weighUpId: weighUp.id }));
    },
    onError: (error) => showToast(errorText(error)),
  });
}
