import { useTranslation } from 'react-i18next';
import type { TrialAnalysisView } from '#shared/trial.ts';
import { DataTable, type Column } from './data-table.tsx';
import { useFormat } from './use-format.ts';

type Rating = TrialAnalysisView['ordinal'][number];

/** Ratings of an ordinal trait: medians and counts, no mean and no LSD. */
export function RatingTable({ ratings, traitName }: { ratings: readonly Rating[]; traitName: string }) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const score = (value: number) => format.number(value, { decimals: Number.isInteger(value) ? 0 : 1 });
  const columns: Column<Rating>[] = [
    { id: 'entry', header: t('ordinal.entry'), cell: (row) => row.entry, sortValue: (row) => row.entry },
    {
      id: 'median',
      header: t('ordinal.median'),
      align: 'end',
      cell: (row) => score(row.median),
      sortValue: (row) => row.median,
    },
    {
      id: 'range',
      header: t('ordinal.range'),
      align: 'end',
      cell: (row) => t('ordinal.rangeOf', { low: score(row.low), high: score(row.high) }),
    },
    { id: 'plots', header: t('ordinal.plots'), align: 'end', cell: (row) => format.number(row.n) },
    {
      id: 'counts',
      header: t('ordinal.counts'),
      cell: (row) =>
        row.counts
          .map((count) => t('ordinal.countOf', { score: score(count.score), plots: count.plots }))
          .join(' · '),
    },
  ];
  return (
    <section className="flex flex-col gap-3">
      <h2>{t('ordinal.title')}</h2>
      <DataTable
        caption={t('ordinal.caption', { trait: traitName })}
        columns={columns}
        rows={ratings}
        rowKey={(row) => row.entry}
        initialSort={{ columnId: 'median', isDescending: false }}
      />
    </section>
  );
}
