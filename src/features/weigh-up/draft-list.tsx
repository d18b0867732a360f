import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link } from 'react-router-dom';
import { deleteDraft, type WeighUpDraft } from '#shared/weigh-up-draft.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useErrorText } from '#src/use-error-text.ts';
import { draftsQuery } from './weigh-up-queries.ts';

/** Weigh-ups that were begun and not finished, on top of the list. */
export function DraftList() {
  const { t } = useTranslation('record');
  const drafts = useQuery(draftsQuery);
  if (drafts.isError) return <QueryErrorState query={drafts} />;
  if (!drafts.data || drafts.data.length === 0) return null;
  return (
    <section aria-labelledby="drafts-title" className="mb-8">
      <h2 id="drafts-title">{t('drafts.title')}</h2>
      <ul className="divide-y divide-rule">
        {drafts.data.map((draft) => (
          <DraftLine key={draft.id} draft={draft} />
        ))}
      </ul>
    </section>
  );
}

function DraftLine({ draft: { id, content, updatedAt } }: { draft: WeighUpDraft }) {
  const { t } = useTranslation('record');
  const format = useFormat();
  const client = useQueryClient();
  const errorText = useErrorText();
  const name = [content.growerName, content.farmName].filter((part) => part.trim() !== '').join(', ');
  const words = name === '' ? t('drafts.unnamed') : name;
  const search = new URLSearchParams(content.question);
  search.set('draft', id);
  const deleting = useMutation({
    mutationFn: () => callApi(deleteDraft, { params: { draftId: id } }),
    onSuccess: () => {
      void client.invalidateQueries({ queryKey: draftsQuery.queryKey });
      showToast(t('drafts.deleted'));
    },
    onError: (error) => showToast(errorText(error)),
  });
  return (
    <li className="flex flex-wrap items-center justify-between gap-x-4 py-1">
      <span className="min-w-0">
        <Link to={`${paths.newWeighUp}?${search.toString()}`} className="tap-target inline-flex items-center">
          {words}
        </Link>
        <span className="ml-2 text-sm text-faded">
          {t('drafts.changed', { date: format.dateTime(updatedAt) })}
        </span>
      </span>
      <Button
        tone="quiet"
        isBusy={deleting.isPending}
        aria-label={t('drafts.deleteOf', { name: words })}
        onClick={() => deleting.mutate()}
      >
        {t('drafts.delete')}
      </Button>
    </li>
  );
}
