import { useState } from 'react';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link } from 'react-router-dom';
import { renewGrowerCopy, type AffectedCopy } from '#shared/affected-copy.ts';
import { callApi, type ReplyOf } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { fillPath, paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useErrorText } from '#src/use-error-text.ts';
import { CopyLink } from './copy-link.tsx';
import { affectedCopiesQuery, growerCopiesQuery } from './weigh-up-queries.ts';

type Renewed = { from: AffectedCopy; isSent: boolean; made: ReplyOf<typeof renewGrowerCopy> };

/** Copies in growers' hands whose trials were corrected or withdrawn, each one click away from a fresh one. */
export function AffectedCopies() {
  const { t } = useTranslation('weigh-up');
  const affected = useQuery(affectedCopiesQuery);
  // A link is shown once, so a renewed copy stays here although the server lists it no longer.
  const [renewed, setRenewed] = useState<readonly Renewed[]>([]);
  if (affected.isError) return <QueryErrorState query={affected} />;
  const copies = affected.data?.copies ?? [];
  if (copies.length === 0 && renewed.length === 0) return null;
  const isMailSetUp = affected.data?.isMailSetUp ?? false;
  return (
    <section aria-labelledby="affected-copies-title" className="mb-8 flex flex-col gap-3">
      <h2 id="affected-copies-title">{t('copies.affected.title')}</h2>
      <p className="max-w-prose text-sm text-faded">{t('copies.affected.lead')}</p>
      {renewed.map((done) => (
        <RenewedCopy key={done.made.copy.id} renewed={done} isMailSetUp={isMailSetUp} />
      ))}
      <ul className="divide-y divide-rule">
        {copies.map((copy) => (
          <AffectedLine
            key={copy.copyId}
            copy={copy}
            isMailSetUp={isMailSetUp}
            onRenewed={(done) => setRenewed((earlier) => [...earlier, done])}
          />
        ))}
      </ul>
    </section>
  );
}

type AffectedLineProps = {
  copy: AffectedCopy;
  isMailSetUp: boolean;
  onRenewed: (renewed: Renewed) => void;
};

function AffectedLine({ copy, isMailSetUp, onRenewed }: AffectedLineProps) {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  const client = useQueryClient();
  const errorText = useErrorText();
  const { copyId, weighUpId, growerName: grower, farmName: farm, sentTo } = copy;
  const renewing = useMutation({
    mutationFn: (isSent: boolean) => callApi(renewGrowerCopy, { params: { copyId }, body: { isSent } }),
    onSuccess: (made, isSent) => onRenewed({ from: copy, isSent, made }),
    // Also after a refusal: in another tab a fresh one may have been made.
    onSettled: () =>
      Promise.all([
        client.invalidateQueries({ queryKey: affectedCopiesQuery.queryKey }),
        client.invalidateQueries({ queryKey: growerCopiesQuery(weighUpId).queryKey }),
      ]),
  });
  const mayReachThem = isMailSetUp && sentTo !== null;
  return (
    <li className="flex flex-wrap items-center justify-between gap-x-6 gap-y-2 py-2">
      <span className="min-w-0">
        <Link to={fillPath(paths.weighUp, { weighUpId })} className="font-semibold">
          {grower}
        </Link>
        <span className="text-faded">
          {` · ${farm} · ${format.name(copy.cropName)} · ${t('copies.affected.madeOn', { date: format.dateTime(copy.madeAt) })}`}
        </span>
        <span className="block text-sm text-break-even">
          {copy.laterChanges
            .map(({ siteName, season, change }) => t(`copies.${change}`, { site: siteName, season }))
            .join(' · ')}
        </span>
      </span>
      <span className="flex flex-wrap gap-2">
        {mayReachThem && (
          <Button isBusy={renewing.isPending} onClick={() => renewing.mutate(true)}>
            {t('copies.affected.renewAndSend', { to: sentTo })}
          </Button>
        )}
        <Button
          tone={mayReachThem ? 'quiet' : 'plain'}
          isBusy={renewing.isPending}
          aria-label={t('copies.affected.renewOf', { grower, farm })}
          onClick={() => renewing.mutate(false)}
        >
          {t('copies.affected.renew')}
        </Button>
      </span>
      {renewing.isError && <ErrorState message={errorText(renewing.error)} />}
    </li>
  );
}

/** The link of a fresh copy, or where it went. */
function RenewedCopy({
  renewed: { from, isSent, made },
  isMailSetUp,
}: {
  renewed: Renewed;
  isMailSetUp: boolean;
}) {
  const { t } = useTranslation('weigh-up');
  return (
    <div className="flex flex-col gap-2">
      <p role="status" className="font-semibold">
        {isSent && from.sentTo !== null
          ? t('copies.affected.doneSent', { grower: from.growerName, to: from.sentTo })
          : t('copies.affected.done', { grower: from.growerName })}
      </p>
      <CopyLink
        weighUpId={from.weighUpId}
        copyId={made.copy.id}
        link={made.link}
        isMailSetUp={isMailSetUp}
        sentTo={null}
      />
    </div>
  );
}
