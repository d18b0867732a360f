import { zodResolver } from '@hookform/resolvers/zod';
import { useMutation, useQuery, useQueryClient } from '@tanstack/react-query';
import { useForm, type Control } from 'react-hook-form';
import { useTranslation } from 'react-i18next';
import { Link, useNavigate } from 'react-router-dom';
import { createAccount, newAccountInput, type NewAccountInput } from '#shared/account.ts';
import { ApiError, callApi } from '#src/api-client.ts';
import { catalogueQuery, type Catalogue } from '#src/catalogue-query.ts';
import { Button } from '#src/components/button.tsx';
import { ErrorState } from '#src/components/error-state.tsx';
import { Field } from '#src/components/field.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { TextInput } from '#src/components/text-input.tsx';
import { showToast } from '#src/components/toaster.tsx';
import { useLanguage } from '#src/components/use-language.ts';
import { fieldIssues } from '#src/field-issues.ts';
import { paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useErrorText } from '#src/use-error-text.ts';
import { useFieldErrorText } from '#src/use-field-error-text.ts';
import { accountsQuery } from './account-queries.ts';
import { RightsFields, type Rights } from './rights-fields.tsx';

/** Sets an account up for an advisor, an agronomist or another administrator. */
export function NewAccountPage() {
  const { t } = useTranslation('accounts');
  const catalogue = useQuery(catalogueQuery);
  return (
    <>
      <PageHeading
        title={t('newPage.title')}
        above={<Link to={paths.accounts}>{t('title')}</Link>}
        below={t('newPage.lead')}
      />
      {catalogue.isPending && <Skeleton lines={6} />}
      {catalogue.isError && <QueryErrorState query={catalogue} />}
      {catalogue.data && <AccountForm catalogue={catalogue.data} />}
    </>
  );
}

function useAccountCreation() {
  const { t } = useTranslation('accounts');
  const client = useQueryClient();
  const navigate = useNavigate();
  return useMutation({
    mutationFn: async (body: NewAccountInput) => (await callApi(createAccount, { body })).account,
    onSuccess: async ({ name }) => {
      await client.invalidateQueries({ queryKey: accountsQuery.queryKey });
      showToast(t('newPage.created', { name }));
      void navigate(paths.accounts);
    },
  });
}

function AccountForm({ catalogue }: { catalogue: Catalogue }) {
  const { t } = useTranslation('accounts');
  const errorText = useErrorText();
  const fieldErrorText = useFieldErrorText();
  const pageLanguage = useLanguage();
  const form = useForm<NewAccountInput>({
    resolver: zodResolver(newAccountInput, fieldIssues),
    defaultValues: {
      name: '',
      email: '',
      password: '',
      role: 'advisor',
      language: pageLanguage,
      regionIds: [],
    },
  });
  const creation = useAccountCreation();
  const { errors } = form.formState;
  const isTaken = creation.error instanceof ApiError && creation.error.code === 'email-taken';
  return (
    <form
      noValidate
      className="flex max-w-md flex-col gap-4"
      onSubmit={(event) => void form.handleSubmit((account) => creation.mutate(account))(event)}
    >
      <Field label={t('newPage.name')} error={fieldErrorText(errors.name)} isRequired>
        <TextInput autoComplete="off" {...form.register('name')} />
      </Field>
      <Field
        label={t('newPage.email')}
        error={isTaken ? errorText(creation.error) : fieldErrorText(errors.email)}
        isRequired
      >
        <TextInput type="email" inputMode="email" autoComplete="off" {...form.register('email')} />
      </Field>
      <Field
        label={t('newPage.password')}
        hint={t('newPage.passwordHint')}
        error={fieldErrorText(errors.password)}
        isRequired
      >
        <TextInput type="password" autoComplete="new-password" {...form.register('password')} />
      </Field>
      <RightsFields
        // The part knows only the three fields that both forms share.
        control={form.control as unknown as Control<Rights>}
        regions={catalogue.regions}
      />
      {creation.isError && !isTaken && <ErrorState message={errorText(creation.error)} />}
      <Button type="submit" tone="main" isBusy={creation.isPending} className="self-start">
        {t('newPage.create')}
      </Button>
    </form>
  );
}
