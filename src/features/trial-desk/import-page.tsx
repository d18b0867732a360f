import { useState } from 'react';
import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useForm } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { Link, useNavigate } from 'react-router-dom';
import { checkImport, importTrial, type ImportFields } from '#shared/trial-desk.ts';
import { callApi } from '#src/api-client.ts';
import { catalogueQuery, type Catalogue } from '#src/catalogue-query.ts';
import { Button } from '#src/components/button.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Progress } from '#src/components/progress.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { fieldIssues } from '#src/field-issues.ts';
import { fillPath, paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useErrorText } from '#src/use-error-text.ts';
import { FileField } from './file-field.tsx';
import { ImportFieldset, importForm, type ImportDraft } from './import-fieldset.tsx';
import { ImportReportView } from './import-report-view.tsx';

/** Takes a long CSV in: check first, with every row that fails; store only when the whole file passes. */
export function ImportPage() {
  const { t } = useTranslation('desk');
  const catalogue = useQuery(catalogueQuery);
  return (
    <>
      <PageHeading
        title={t('importPage.title')}
        above={<Link to={paths.trialDesk}>{t('title')}</Link>}
        below={t('importPage.lead')}
      />
      {catalogue.isPending && <Skeleton lines={6} />}
      {catalogue.isError && <QueryErrorState query={catalogue} />}
      {catalogue.data && <ImportForm catalogue={catalogue.data} />}
    </>
  );
}

type Asked = { fields: ImportFields; file: File };

function useImport() {
  const { t } = useTranslation('desk');
  const client = useQueryClient();
  const navigate = useNavigate();
  const check = useMutation({
    mutationFn: ({ fields, file }: Asked) => callApi(checkImport, { body: fields, file }),
  });
  const store = useMutation({
    mutationFn: ({ fields, file }: Asked) => callApi(importTrial, { body: fields, file }),
    onSuccess: async ({ trialId }) => {
      await client.invalidateQueries({ queryKey: ['desk-trials'] });
      showToast(t('importPage.stored'));
      void navigate(fillPath(paths.deskTrial, { trialId }));
    },
  });
  return { check, store };
}

function ImportForm({ catalogue }: { catalogue: Catalogue }) {
  const { t } = useTranslation('desk');
  const errorText = useErrorText();
  const { check, store } = useImport();
  const [file, setFile] = useState<File | null>(null);
  const [hasTried, setTried] = useState(false);
  const form = useForm<ImportDraft, unknown, ImportFields>({
    resolver: zodResolver(importForm, fieldIssues),
    defaultValues: { crop: '', site: '', season: '', name: '', trait: 'yield', unit: 'as-stored' },
  });
  // What was checked is not what would be stored once anything is changed.
  const forget = () => {
    check.reset();
    store.reset();
  };
  const submit = (fields: ImportFields) => {
    setTried(true);
    if (file) check.mutate({ fields, file });
  };
  const passed = check.data?.report.problemsTotal === 0 ? check.variables : undefined;
  return (
    <form
      noValidate
      className="flex flex-col gap-6"
      onChange={forget}
      onSubmit={(event) => void form.handleSubmit(submit, () => setTried(true))(event)}
    >
      <ImportFieldset form={form} catalogue={catalogue} />
      <FileField file={file} isMissing={hasTried && file === null} onFile={setFile} />
      <Button type="submit" tone={passed ? 'plain' : 'main'} isBusy={check.isPending} className="self-start">
        {t('importPage.check')}
      </Button>
      {check.isPending && <Progress label={t('importPage.checking')} />}
      {check.isError && <ErrorState message={errorText(check.error)} />}
      {check.data && (
        <ImportReportView report={check.data.report} analysis={check.data.analysis} catalogue={catalogue} />
      )}
      {store.isError && <ErrorState message={errorText(store.error)} />}
      {store.isPending && <Progress label={t('importPage.storing')} />}
      {passed && (
        <Button
          tone="main"
          className="self-start"
          isBusy={store.isPending}
          onClick={() => store.mutate(passed)}
        >
          {t('importPage.store')}
        </Button>
      )}
    </form>
  );
}
