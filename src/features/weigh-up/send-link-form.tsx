import { useRef, useState } from 'react';
import { useMutation, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { mailGrowerCopy, mailRecipient } from '#shared/grower-copy.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { useErrorText } from '#src/use-error-text.ts';
import { ContactField } from './contact-field.tsx';
import { growerCopiesQuery } from './weigh-up-queries.ts';

type SendLinkFormProps = { weighUpId: string; copyId: string; token: string };

/** Sends the link on the card to an address, as often as needed: the page still holds its secret. */
export function SendLinkForm({ weighUpId, copyId, token }: SendLinkFormProps) {
  const { t } = useTranslation('weigh-up');
  const errorText = useErrorText();
  const client = useQueryClient();
  const field = useRef<HTMLInputElement>(null);
  const [address, setAddress] = useState('');
  const [isBad, setIsBad] = useState(false);
  const sending = useMutation({
    mutationFn: (email: string) => callApi(mailGrowerCopy, { params: { copyId }, body: { email, token } }),
    onSuccess: () => client.invalidateQueries({ queryKey: growerCopiesQuery(weighUpId).queryKey }),
  });
  return (
    <form
      noValidate
      className="flex flex-col gap-3 print:hidden"
      onSubmit={(event) => {
        event.preventDefault();
        const recipient = mailRecipient.safeParse(address);
        setIsBad(!recipient.success);
        if (recipient.success) sending.mutate(recipient.data);
        else field.current?.focus();
      }}
    >
      <div className="flex flex-wrap items-end gap-3">
        <ContactField
          kind="email"
          label={t('copies.sendTitle')}
          error={isBad ? t('copies.badAddress') : undefined}
          className="min-w-0 grow basis-64"
          ref={field}
          value={address}
          onValueChange={setAddress}
        />
        <Button type="submit" isBusy={sending.isPending}>
          {t('copies.send')}
        </Button>
      </div>
      {sending.isError && <ErrorState message={errorText(sending.error)} />}
      <p role="status" className="text-sm">
        {sending.isSuccess && t('copies.sendQueued', { to: sending.variables })}
      </p>
    </form>
  );
}
