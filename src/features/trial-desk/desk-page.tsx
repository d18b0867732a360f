import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link, useSearchParams } from 'react-router-dom';
import type { TrialLine } from '#shared/trial.ts';
import { Button, LinkButton } from '#src/components/button.tsx';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { EmptyState } from '#src/components/empty-state.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { useTrialColumns } from '#src/components/trial-columns.tsx';
import { useTrialWords } from '#src/components/trial-words.ts';
import { useFormat } from '#src/components/use-format.ts';
import { catalogueQuery, findCrop, type Catalogue } from '#src/catalogue-query.ts';
import { fillPath, paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useUrlPatch } from '#src/url-state.ts';
import { DeskFilters, readDeskFilter } from './desk-filters.tsx';
import { deskTrialsQuery } from './desk-queries.ts';

/** Where an agronomist starts: the trials of the account's regions in every state. */
export function DeskPage() {
  const { t } = useTranslation('desk');
  const catalogue = useQuery(catalogueQuery);
  return (
    <>
      <PageHeading
        title={t('title')}
        below={t('lead')}
        actions={
          <>
            <LinkButton to={paths.usualVariances}>{t('usual.title')}</LinkButton>
            <LinkButton to={paths.deskImport} tone="main">
              {t('import')}
            </LinkButton>
          </>
        }
      />
      {catalogue.isPending && <Skeleton />}
      {catalogue.isError && <QueryErrorState query={catalogue} />}
      {catalogue.data && (
        <>
          <DeskFilters catalogue={catalogue.data} />
          <DeskList catalogue={catalogue.data} />
        </>
      )}
    </>
  );
}

function DeskList({ catalogue }: { catalogue: Catalogue }) {
  const { t } = useTranslation('desk');
  const [search] = useSearchParams();
  const filter = readDeskFilter(search);
  const trials = useQuery(deskTrialsQuery(filter));
  if (trials.isPending) return <Skeleton lines={8} />;
  if (trials.isError) return <QueryErrorState query={trials} />;
  if (trials.data.length === 0) return <EmptyDesk isFiltered={Object.keys(filter).length > 0} />;
  return (
    <>
      <p role="status" className="mb-2 text-sm text-faded">
        {t('count', { count: trials.data.length })}
      </p>
      <DeskTable trials={trials.data} catalogue={catalogue} />
    </>
  );
}

function EmptyDesk({ isFiltered }: { isFiltered: boolean }) {
  const { t } = useTranslation(['desk', 'trials']);
  const patch = useUrlPatch();
  return (
    <EmptyState
      title={t('desk:emptyTitle')}
      action={
        isFiltered ? (
          <Button onClick={() => patch({ crop: null, region: null, season: null, state: null })}>
            {t('trials:clearFilters')}
          </Button>
        ) : (
          <LinkButton to={paths.deskImport}>{t('desk:import')}</LinkButton>
        )
      }
    >
      {isFiltered ? t('desk:emptyFiltered') : t('desk:emptyAll')}
    </EmptyState>
  );
}

function DeskTable({ trials, catalogue }: { trials: readonly TrialLine[]; catalogue: Catalogue }) {
  const { t } = useTranslation('desk');
  const format = useFormat();
  const words = useTrialWords();
  const [name, ...facts] = useTrialColumns(
    (trial, label) => <Link to={fillPath(paths.deskTrial, { trialId: trial.id })}>{label}</Link>,
    (cropId) => {
      const crop = findCrop(catalogue, cropId);
      return crop ? format.name(crop.name) : '';
    },
  );
  const state: Column<TrialLine> = {
    id: 'state',
    header: t('columnState'),
    cell: (trial) => words.state(trial.state),
    sortValue: (trial) => trial.state,
  };
  return (
    <DataTable
      caption={t('caption')}
      columns={[...(name ? [name] : []), state, ...facts]}
      rows={trials}
      rowKey={(trial) => trial.id}
    />
  );
}
