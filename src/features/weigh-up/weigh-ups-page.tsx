import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link, useSearchParams } from 'react-router-dom';
import type { WeighUpLine } from '#shared/weigh-up.ts';
import { Button, LinkButton } from '#src/components/button.tsx';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { EmptyState } from '#src/components/empty-state.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { fillPath, paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useUrlPatch } from '#src/url-state.ts';
import { AffectedCopies } from './affected-copies.tsx';
import { DraftList } from './draft-list.tsx';
import { useDecisionWords } from './recorded-decision.tsx';
import { listFilterChoices, noFilter, passesFilter, readWeighUpFilter } from './weigh-up-filter.ts';
import { WeighUpFilters } from './weigh-up-filters.tsx';
import { weighUpsQuery } from './weigh-up-queries.ts';
import { WeighUpSteps } from './weigh-up-steps.tsx';

/** One's weigh-ups: searched, filtered, put away and carried into the next season. */
export function WeighUpsPage() {
  const { t } = useTranslation('weigh-up');
  const weighUps = useQuery(weighUpsQuery);
  return (
    <>
      <PageHeading
        title={t('list.title')}
        actions={
          <LinkButton to={paths.newWeighUp} tone="main">
            {t('list.new')}
          </LinkButton>
        }
      />
      <AffectedCopies />
      <DraftList />
      {weighUps.isPending && <Skeleton lines={6} />}
      {weighUps.isError && <QueryErrorState query={weighUps} />}
      {weighUps.data?.length === 0 && (
        <EmptyState
          title={t('list.emptyTitle')}
          action={<LinkButton to={paths.newWeighUp}>{t('list.new')}</LinkButton>}
        >
          {t('list.emptyText')}
        </EmptyState>
      )}
      {weighUps.data && weighUps.data.length > 0 && <WeighUpList weighUps={weighUps.data} />}
    </>
  );
}

function WeighUpList({ weighUps }: { weighUps: readonly WeighUpLine[] }) {
  const { t } = useTranslation(['record', 'weigh-up']);
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const columns = useWeighUpColumns();
  const filter = readWeighUpFilter(search);
  const found = weighUps.filter((line) => passesFilter(line, filter));
  return (
    <>
      <WeighUpFilters filter={filter} choices={listFilterChoices(weighUps)} />
      <p role="status" className="mb-2 text-sm text-faded">
        {t('weigh-up:list.count', { count: found.length })}
      </p>
      {found.length === 0 ? (
        <EmptyState
          title={t(filter.shown === 'archived' ? 'record:list.emptyArchived' : 'record:list.emptyFilter')}
          action={<Button onClick={() => patch(noFilter)}>{t('record:list.showAll')}</Button>}
        />
      ) : (
        <DataTable
          caption={t('weigh-up:list.caption')}
          columns={columns}
          rows={found}
          rowKey={(line) => line.id}
        />
      )}
    </>
  );
}

function useWeighUpColumns(): Column<WeighUpLine>[] {
  const { t } = useTranslation(['record', 'weigh-up']);
  const format = useFormat();
  const sayDecision = useDecisionWords();
  return [
    {
      id: 'grower',
      header: t('weigh-up:list.column.grower'),
      cell: (line) => (
        <>
          <Link to={fillPath(paths.weighUp, { weighUpId: line.id })}>{line.growerName}</Link>
          <span className="block text-sm font-normal text-faded">{line.farmName}</span>
        </>
      ),
      sortValue: (line) => line.growerName,
    },
    {
      id: 'crop',
      header: t('weigh-up:list.column.crop'),
      cell: (line) => format.name(line.cropName),
      sortValue: (line) => format.name(line.cropName),
    },
    {
      id: 'region',
      header: t('weigh-up:list.column.region'),
      cell: (line) => format.name(line.regionName),
      sortValue: (line) => format.name(line.regionName),
    },
    {
      id: 'current',
      header: t('weigh-up:list.column.current'),
      cell: (line) => line.currentVarietyName,
      sortValue: (line) => line.currentVarietyName,
    },
    {
      id: 'seasons',
      header: t('record:list.seasons'),
      cell: ({ seasonFrom: from, seasonTo: to }) =>
        from === to ? String(to) : t('record:list.span', { from, to }),
      sortValue: (line) => line.seasonTo,
    },
    {
      id: 'decision',
      header: t('record:decision.title'),
      cell: ({ decision }) => (decision === null ? t('record:list.decidedNo') : sayDecision(decision)),
      sortValue: ({ decision }) => (decision === null ? null : sayDecision(decision)),
    },
    {
      id: 'updated',
      header: t('weigh-up:list.column.updated'),
      cell: (line) => format.date(line.updatedAt),
      sortValue: (line) => line.updatedAt,
    },
    {
      id: 'steps',
      header: t('record:list.steps'),
      cell: (line) => <WeighUpSteps line={line} />,
    },
  ];
}
