import { useState } from 'react';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { languages, type Language } from '#shared/account.ts';
import { makeGrowerCopy } from '#shared/grower-copy.ts';
import { callApi } from '#src/api-client.ts';
import { Button } from '#src/components/button.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { Field } from '#src/components/field.tsx';
import { Select } from '#src/components/select.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { useLanguage } from '#src/components/use-language.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useErrorText } from '#src/use-error-text.ts';
import { CopyLink } from './copy-link.tsx';
import { CopyList } from './copy-list.tsx';
import { growerCopiesQuery } from './weigh-up-queries.ts';

const year = 365;
const validities = [30, 90, year];

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
  const making = useMutation({
    mutationFn: (body: { language: Language; validDays: number }) =>
      callApi(makeGrowerCopy, { params: { weighUpId }, body }),
    onSuccess: () => client.invalidateQueries({ queryKey: growerCopiesQuery(weighUpId).queryKey }),
  });
  const errorText = useErrorText();
  return (
    <section id="hand-over" aria-labelledby="hand-over-title" className="flex flex-col gap-4">
      <h2 id="hand-over-title">{t('copies.title')}</h2>
      <p className="max-w-prose">{t('copies.lead')}</p>
      <CopyForm hasUnsaved={hasUnsaved} isBusy={making.isPending} onMake={(body) => making.mutate(body)} />
      {making.isError && <ErrorState message={errorText(making.error)} />}
      {making.data && <CopyLink key={making.data.copy.id} path={making.data.path} />}
      <h3>{t('copies.list')}</h3>
      {copies.isPending && <Skeleton lines={2} />}
      {copies.isError && <QueryErrorState query={copies} />}
      {copies.data && <CopyList weighUpId={weighUpId} copies={copies.data} />}
    </section>
  );
}

type CopyFormProps = {
  hasUnsaved: boolean;
  isBusy: boolean;
  onMake: (body: { language: Language; validDays: number }) => void;
};

function CopyForm({ hasUnsaved, isBusy, onMake }: CopyFormProps) {
  const { t } = useTranslation(['weigh-up', 'common']);
  const pageLanguage = useLanguage();
  const [language, setLanguage] = useState<Language | null>(null);
  const [validDays, setValidDays] = useState(year);
  const chosen = language ?? pageLanguage;
  return (
    <form
      className="flex flex-col gap-4"
      onSubmit={(event) => {
        event.preventDefault();
        onMake({ language: chosen, validDays });
      }}
    >
      <div className="grid gap-4 sm:max-w-md sm:grid-cols-2">
        <Field label={t('weigh-up:copies.language')}>
          <Select
            value={chosen}
            onChange={(event) => setLanguage(languages.find((code) => code === event.target.value) ?? null)}
            options={languages.map((code) => ({ value: code, label: t(`common:languageName.${code}`) }))}
          />
        </Field>
        <Field label={t('weigh-up:copies.validDays')}>
          <Select
            value={String(validDays)}
            onChange={(event) => setValidDays(Number(event.target.value))}
            options={validities.map((days) => ({
              value: String(days),
              label: days === year ? t('weigh-up:copies.year') : t('weigh-up:copies.days', { count: days }),
            }))}
          />
        </Field>
      </div>
      {hasUnsaved && <p className="text-sm font-semibold">{t('weigh-up:copies.saveFirst')}</p>}
      <Button type="submit" tone="main" className="self-start" isBusy={isBusy} disabled={hasUnsaved}>
        {t('weigh-up:copies.make')}
      </Button>
    </form>
  );
}
