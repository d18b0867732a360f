import { useState } from 'react';
import { useQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link, useSearchParams } from 'react-router-dom';
import type { TrialLine } from '#shared/trial.ts';
import { Button } from '#src/components/button.tsx';
import { DataTable } from '#src/components/data-table.tsx';
import { EmptyState } from '#src/components/empty-state.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { useTrialColumns } from '#src/components/trial-columns.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { catalogueQuery, findCrop, type Catalogue } from '#src/catalogue-query.ts';
import { fillPath, paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { useUrlPatch } from '#src/url-state.ts';
import { readTrialFilter, TrialFilters } from './trial-filters.tsx';
import { trialsQuery } from './trial-queries.ts';

/** A long list comes in parts, so that a phone is not buried under it. */
const pageSize = 40;

/** Published trials, chosen by crop, region and season. */
export function TrialsPage() {
  const { t } = useTranslation('trials');
  const catalogue = useQuery(catalogueQuery);
  return (
    <>
      <PageHeading title={t('title')} below={t('lead')} />
      {catalogue.isPending && <Skeleton />}
      {catalogue.isError && <QueryErrorState query={catalogue} />}
      {catalogue.data && (
        <>
          <TrialFilters catalogue={catalogue.data} />
          <TrialList catalogue={catalogue.data} />
        </>
      )}
    </>
  );
}

function TrialList({ catalogue }: { catalogue: Catalogue }) {
  const [search] = useSearchParams();
  const filter = readTrialFilter(search);
  const trials = useQuery(trialsQuery(filter));
  if (trials.isPending) return <Skeleton lines={8} />;
  if (trials.isError) return <QueryErrorState query={trials} />;
  if (trials.data.length === 0) return <NoTrials isFiltered={Object.keys(filter).length > 0} />;
  return <TrialTable key={search.toString()} trials={trials.data} catalogue={catalogue} />;
}

function NoTrials({ isFiltered }: { isFiltered: boolean }) {
  const { t } = useTranslation('trials');
  const patch = useUrlPatch();
  return (
    <EmptyState
      title={t('emptyTitle')}
      action={
        isFiltered && (
          <Button onClick={() => patch({ crop: null, region: null, season: null })}>
            {t('clearFilters')}
          </Button>
        )
      }
    >
      {isFiltered ? t('emptyFiltered') : t('emptyAll')}
    </EmptyState>
  );
}

function TrialTable({ trials, catalogue }: { trials: readonly TrialLine[]; catalogue: Catalogue }) {
  const { t } = useTranslation('trials');
  const format = useFormat();
  const [shown, setShown] = useState(pageSize);
  const columns = useTrialColumns(
    (trial, words) => <Link to={fillPath(paths.trial, { trialId: trial.id })}>{words}</Link>,
    (cropId) => {
      const crop = findCrop(catalogue, cropId);
      return crop ? format.name(crop.name) : '';
    },
  );
  const count = trials.length;
  return (
    <>
      <p role="status" className="mb-2 text-sm text-faded">
        {shown < count ? t('countOf', { shown, count }) : t('count', { count })}
      </p>
      <DataTable
        caption={t('caption')}
        columns={columns}
        rows={trials.slice(0, shown)}
        rowKey={(trial) => trial.id}
      />
      {shown < count && (
        <Button className="mt-4" onClick={() => setShown(shown + pageSize)}>
          {t('showMore')}
        </Button>
      )}
    </>
  );
}
