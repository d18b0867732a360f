import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { Button } from '#src/components/button.tsx';
import { Field } from '#src/components/field.tsx';
import { TextInput } from '#src/components/text-input.tsx';

/** The secret link, shown once: only its hash is kept. */
export function CopyLink({ path }: { path: string }) {
  const { t } = useTranslation('weigh-up');
  const [state, setState] = useState<'new' | 'copied' | 'failed'>('new');
  const link = new URL(path, window.location.origin).href;
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
      </div>
      <p role="status" className="text-sm">
        {state === 'copied' && t('copies.copied')}
        {state === 'failed' && t('copies.copyFailed')}
      </p>
    </div>
  );
}
