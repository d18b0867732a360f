import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link, useSearchParams } from 'react-router-dom';
import type { WeighUpLine } from '#shared/weigh-up.ts';
import { Button, LinkButton } from '#src/components/button.tsx';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { EmptyState } from '#src/components/empty-state.tsx';
import { Field } from '#src/components/field.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { TextInput } from '#src/components/text-input.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { fillPath, paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useUrlPatch } from '#src/url-state.ts';
import { weighUpsQuery } from './weigh-up-queries.ts';

/** One's weigh-ups, searched by grower, farm or variety. */
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

function fold(text: string): string {
  return text
    .normalize('NFD')
    .replace(/\p{Diacritic}/gu, '')
    .toLowerCase();
}

/** Whether every word searched for is somewhere in the line, accents and case aside. */
export function matchesSearch(line: WeighUpLine, search: string): boolean {
  const names = [line.cropName.en, line.cropName.fr, line.regionName.en, line.regionName.fr];
  const text = fold([line.growerName, line.farmName, line.currentVarietyName, ...names].join(' '));
  return fold(search)
    .split(/\s+/)
    .every((word) => text.includes(word));
}

function WeighUpList({ weighUps }: { weighUps: readonly WeighUpLine[] }) {
  const { t } = useTranslation('weigh-up');
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const columns = useWeighUpColumns();
  const asked = search.get('q') ?? '';
  const found = weighUps.filter((line) => matchesSearch(line, asked));
  return (
    <>
      <form role="search" onSubmit={(event) => event.preventDefault()} className="mb-4 max-w-md">
        <Field label={t('list.search')}>
          <TextInput type="search" value={asked} onChange={(event) => patch({ q: event.target.value })} />
        </Field>
      </form>
      <p role="status" className="mb-2 text-sm text-faded">
        {t('list.count', { count: found.length })}
      </p>
      {found.length === 0 ? (
        <EmptyState
          title={t('list.emptySearch')}
          action={<Button onClick={() => patch({ q: null })}>{t('list.clearSearch')}</Button>}
        />
      ) : (
        <DataTable caption={t('list.caption')} columns={columns} rows={found} rowKey={(line) => line.id} />
      )}
    </>
  );
}

function useWeighUpColumns(): Column<WeighUpLine>[] {
  const { t } = useTranslation('weigh-up');
  const format = useFormat();
  return [
    {
      id: 'grower',
      header: t('list.column.grower'),
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
      header: t('list.column.crop'),
      cell: (line) => format.name(line.cropName),
      sortValue: (line) => format.name(line.cropName),
    },
    {
      id: 'region',
      header: t('list.column.region'),
      cell: (line) => format.name(line.regionName),
      sortValue: (line) => format.name(line.regionName),
    },
    {
      id: 'current',
      header: t('list.column.current'),
      cell: (line) => line.currentVarietyName,
      sortValue: (line) => line.currentVarietyName,
    },
    {
      id: 'candidates',
      header: t('list.column.candidates'),
      align: 'end',
      cell: (line) => format.number(line.candidates),
      sortValue: (line) => line.candidates,
    },
    {
      id: 'updated',
      header: t('list.column.updated'),
      cell: (line) => format.date(line.updatedAt),
      sortValue: (line) => line.updatedAt,
    },
  ];
}
