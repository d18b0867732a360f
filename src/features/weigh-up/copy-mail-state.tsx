import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { retryGrowerCopyMail, type CopyMail, type GrowerCopyLine } from '#shared/grower-copy.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useErrorText } from '#src/use-error-text.ts';
import { growerCopiesQuery } from './weigh-up-queries.ts';

type CopyMailStateProps = { weighUpId: string; copy: GrowerCopyLine };

/** What became of the mail that brings a copy, why it has not arrived, and the step that is left. */
export function CopyMailState({ weighUpId, copy: { id, mail } }: CopyMailStateProps) {
  const { t } = useTranslation('weigh-up');
  const errorText = useErrorText();
  const client = useQueryClient();
  const trying = useMutation({
    mutationFn: () => callApi(retryGrowerCopyMail, { params: { copyId: id } }),
    // Also after a refusal: the mail may have gone in the meantime.
    onSettled: () => client.invalidateQueries({ queryKey: growerCopiesQuery(weighUpId).queryKey }),
  });
  if (mail === null) return t('copies.mail.none');
  return (
    <>
      <MailSentence mail={mail} />
      {mail.failure !== null && (
        <span className="block text-sm text-break-even">{t(`copies.mail.failure.${mail.failure}`)}</span>
      )}
      {mail.serverWords !== null && (
        <span className="block text-sm text-faded wrap-anywhere">
          {t('copies.mail.serverWords', { words: mail.serverWords })}
        </span>
      )}
      {mail.state === 'waiting' && mail.attempts > 0 && (
        <Button
          tone="quiet"
          aria-label={t('copies.mail.tryNowOf', { to: mail.recipient })}
          isBusy={trying.isPending}
          onClick={() => trying.mutate()}
        >
          {t('copies.mail.tryNow')}
        </Button>
      )}
      {trying.isError && <ErrorState message={errorText(trying.error)} />}
    </>
  );
}

function MailSentence({ mail }: { mail: CopyMail }) {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  const { recipient: to, state, attempts, sentAt, nextAttemptAt } = mail;
  const write = (): string => {
    if (state === 'sent' && sentAt !== null)
      return t('copies.mail.sent', { to, at: format.dateTime(sentAt) });
    if (state === 'waiting' && attempts > 0 && nextAttemptAt !== null)
      return t('copies.mail.later', { to, at: format.dateTime(nextAttemptAt) });
    return t(`copies.mail.${state}`, { to });
  };
  return <span className="block wrap-anywhere @min-[44rem]:min-w-56">{write()}</span>;
}
