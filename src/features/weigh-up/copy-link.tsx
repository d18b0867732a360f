import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { Button } from '#src/components/button.tsx';
import { Field } from '#src/components/field.tsx';
import { TextInput } from '#src/components/text-input.tsx';
import { LinkQrCode } from './link-qr-code.tsx';
import { SendLinkForm } from './send-link-form.tsx';

type CopyLinkProps = {
  weighUpId: string;
  copyId: string;
  /** The whole address, its secret last. */
  link: string;
  isMailSetUp: boolean;
  /** Where the mail goes that was asked for with the copy; null for none. */
  sentTo: string | null;
};

/** The secret link, shown once: only its hash is kept. By camera, by mail, or copied. */
export function CopyLink({ weighUpId, copyId, link, isMailSetUp, sentTo }: CopyLinkProps) {
  const { t } = useTranslation('weigh-up');
  const [state, setState] = useState<'new' | 'copied' | 'failed'>('new');
  const token = link.slice(link.lastIndexOf('/') + 1);
  const copy = async () => {
    try {
      await navigator.clipboard.writeText(link);
      setState('copied');
    } catch {
      // Browsers refuse the clipboard on plain http and without permission: the field is there to copy by hand.
      setState('failed');
    }
  };
  return (
    <div className="flex flex-col gap-3 rounded-lg border border-action bg-card p-4 sm:p-5">
      <h3>{t('copies.linkTitle')}</h3>
      <p className="text-sm">{t('copies.linkText')}</p>
      {sentTo !== null && (
        <p role="status" className="font-semibold">
          {t('copies.sendQueued', { to: sentTo })}
        </p>
      )}
      <div className="flex flex-wrap items-start gap-4">
        <LinkQrCode link={link} />
        <div className="flex min-w-0 grow basis-64 flex-col gap-3">
          <Field label={t('copies.link')}>
            <TextInput readOnly value={link} onFocus={(event) => event.target.select()} />
          </Field>
          <div className="flex flex-wrap items-center gap-3">
            <Button tone="main" onClick={() => void copy()}>
              {t('copies.copyLink')}
            </Button>
            <a href={link} target="_blank" rel="noreferrer" className="tap-target inline-flex items-center">
              {t('copies.openCopy')}
            </a>
            <a href={`${link}/pdf`} className="tap-target inline-flex items-center">
              {t('copies.downloadPdf')}
            </a>
          </div>
          <p role="status" className="text-sm">
            {state === 'copied' && t('copies.copied')}
            {state === 'failed' && t('copies.copyFailed')}
          </p>
        </div>
      </div>
      {isMailSetUp && <SendLinkForm weighUpId={weighUpId} copyId={copyId} token={token} />}
    </div>
  );
}
