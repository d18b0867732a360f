import { useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { useSearchParams } from 'react-router-dom';
import type { Account } from '#shared/account.ts';
import { catalogueQuery, findRegion, type Catalogue } from '#src/catalogue-query.ts';
import { Button, LinkButton } from '#src/components/button.tsx';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { EmptyState } from '#src/components/empty-state.tsx';
import { Field } from '#src/components/field.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { TextInput } from '#src/components/text-input.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useMe } from '#src/session.ts';
import { useUrlPatch } from '#src/url-state.ts';
import { AccountDialog } from './account-dialog.tsx';
import { accountsQuery } from './account-queries.ts';

/** Who has an account, in which role and for which regions. */
export function AccountsPage() {
  const { t } = useTranslation('accounts');
  const accounts = useQuery(accountsQuery);
  const catalogue = useQuery(catalogueQuery);
  return (
    <>
      <PageHeading
        title={t('title')}
        actions={
          <>
            <LinkButton to={paths.auditLog}>{t('auditLog')}</LinkButton>
            <LinkButton to={paths.newAccount} tone="main">
              {t('new')}
            </LinkButton>
          </>
        }
      />
      {accounts.isError && <QueryErrorState query={accounts} />}
      {catalogue.isError && <QueryErrorState query={catalogue} />}
      {(accounts.isPending || catalogue.isPending) && <Skeleton lines={6} />}
      {accounts.data && catalogue.data && <AccountList accounts={accounts.data} catalogue={catalogue.data} />}
    </>
  );
}

type AccountListProps = { accounts: readonly Account[]; catalogue: Catalogue };

function AccountList({ accounts, catalogue }: AccountListProps) {
  const { t } = useTranslation('accounts');
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const [changing, setChanging] = useState<string | null>(null);
  const columns = useAccountColumns(catalogue, (account) => setChanging(account.id));
  const asked = (search.get('q') ?? '').toLowerCase();
  const found = accounts.filter(({ name, email }) => `${name} ${email}`.toLowerCase().includes(asked));
  const account = accounts.find(({ id }) => id === changing);
  return (
    <>
      <form role="search" onSubmit={(event) => event.preventDefault()} className="mb-4 max-w-md">
        <Field label={t('search')}>
          <TextInput
            type="search"
            value={search.get('q') ?? ''}
            onChange={(event) => patch({ q: event.target.value })}
          />
        </Field>
      </form>
      <p role="status" className="mb-2 text-sm text-faded">
        {t('count', { count: found.length })}
      </p>
      {found.length === 0 ? (
        <EmptyState
          title={t('emptySearch')}
          action={<Button onClick={() => patch({ q: null })}>{t('clearSearch')}</Button>}
        />
      ) : (
        <DataTable caption={t('caption')} columns={columns} rows={found} rowKey={(line) => line.id} />
      )}
      {account && (
        <AccountDialog
          key={account.id}
          account={account}
          regions={catalogue.regions}
          onClose={() => setChanging(null)}
        />
      )}
    </>
  );
}

function useAccountColumns(catalogue: Catalogue, onChange: (account: Account) => void): Column<Account>[] {
  const { t } = useTranslation(['accounts', 'common']);
  const format = useFormat();
  const me = useMe();
  const regionNames = (account: Account) =>
    account.regionIds
      .flatMap((id) => findRegion(catalogue, id) ?? [])
      .map((region) => format.name(region.name))
      .join(', ');
  return [
    {
      id: 'name',
      header: t('accounts:column.name'),
      cell: ({ id, name, email }) => (
        <>
          {id === me.id ? t('accounts:you', { name }) : name}
          <span className="block text-sm font-normal wrap-anywhere text-faded">
            {email.slice(0, email.indexOf('@'))}
            <wbr />
            {email.slice(email.indexOf('@'))}
          </span>
        </>
      ),
      sortValue: ({ name }) => name,
    },
    {
      id: 'role',
      header: t('accounts:column.role'),
      cell: ({ role }) => t(`common:role.${role}`),
      sortValue: ({ role }) => role,
    },
    {
      id: 'regions',
      header: t('accounts:column.regions'),
      cell: (account) => regionNames(account) || t('accounts:noRegions'),
    },
    {
      id: 'language',
      header: t('accounts:column.language'),
      cell: ({ language }) => t(`common:languageName.${language}`),
      sortValue: ({ language }) => language,
    },
    {
      id: 'status',
      header: t('accounts:column.status'),
      cell: ({ status }) => (
        <span className={status === 'suspended' ? 'font-semibold text-stop' : ''}>
          {t(`accounts:status.${status}`)}
        </span>
      ),
      sortValue: ({ status }) => status,
    },
    {
      id: 'last-sign-in',
      header: t('accounts:column.lastSignIn'),
      cell: ({ lastSignedInAt }) =>
        lastSignedInAt === null ? t('accounts:neverSignedIn') : format.dateTime(lastSignedInAt),
      sortValue: ({ lastSignedInAt }) => lastSignedInAt,
    },
    {
      id: 'step',
      header: t('accounts:column.step'),
      cell: (account) => (
        <Button
          tone="quiet"
          aria-label={t('accounts:changeOf', { name: account.name })}
          onClick={() => onChange(account)}
        >
          {t('accounts:change')}
        </Button>
      ),
    },
  ];
}
