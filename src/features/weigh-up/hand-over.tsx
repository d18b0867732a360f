import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { changeMe } from '#shared/account.ts';
import { makeGrowerCopy } from '#shared/grower-copy.ts';
import { callApi } from '#src/api-client.ts';
import { ErrorState } from '#src/components/error-state.tsx';
import { FoldedSection } from '#src/components/folded-section.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { meQuery, useMe } from '#src/session.ts';
import { useErrorText } from '#src/use-error-text.ts';
import { CopyForm, type CopyWish } from './copy-form.tsx';
import { CopyLink } from './copy-link.tsx';
import { CopyList } from './copy-list.tsx';
import { growerCopiesQuery } from './weigh-up-queries.ts';

type HandOverProps = {
  weighUpId: string;
  /** The numbers on the page are not the saved ones, which a copy would freeze. */
  hasUnsaved: boolean;
};

/** Makes copies for the grower, shows the link once, and lists what was handed over. */
export function HandOver({ weighUpId, hasUnsaved }: HandOverProps) {
  const { t } = useTranslation('weigh-up');
  const copies = useQuery(growerCopiesQuery(weighUpId));
  const client = useQueryClient();
  const me = useMe();
  const making = useMutation({
    mutationFn: async ({ wish, phone }: { wish: CopyWish; phone: string | null }) => {
      // The number is the advisor's own: the next copy begins with it.
      if (phone !== me.phone) {
        client.setQueryData(meQuery.queryKey, (await callApi(changeMe, { body: { phone } })).me);
      }
      const { timeZone } = Intl.DateTimeFormat().resolvedOptions();
      return callApi(makeGrowerCopy, { params: { weighUpId }, body: { ...wish, timeZone } });
    },
    onSuccess: () => client.invalidateQueries({ queryKey: growerCopiesQuery(weighUpId).queryKey }),
  });
  const errorText = useErrorText();
  return (
    <FoldedSection id="hand-over" title={t('copies.title')}>
      <p className="max-w-prose">{t('copies.lead')}</p>
      <CopyForm
        hasUnsaved={hasUnsaved}
        isBusy={making.isPending}
        isMailSetUp={copies.data?.isMailSetUp ?? null}
        phone={me.phone}
        onMake={(wish, phone) => making.mutate({ wish, phone })}
      />
      {making.isError && <ErrorState message={errorText(making.error)} />}
      {making.data && (
        <CopyLink
          key={making.data.copy.id}
          weighUpId={weighUpId}
          copyId={making.data.copy.id}
          link={making.data.link}
          isMailSetUp={copies.data?.isMailSetUp ?? false}
          sentTo={making.variables.wish.email ?? null}
        />
      )}
      <h3>{t('copies.list')}</h3>
      {copies.isPending && <Skeleton lines={2} />}
      {copies.isError && <QueryErrorState query={copies} />}
      {copies.data && <CopyList weighUpId={weighUpId} copies={copies.data.copies} />}
    </FoldedSection>
  );
}
