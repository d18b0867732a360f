import { useTranslation } from 'react-i18next';
import type { AdjustedMean, TrialAnalysisView } from '#shared/trial.ts';
import { DataTable, type Column } from './data-table.tsx';
import { useFormat } from './use-format.ts';

type MeansTableProps = { analysis: TrialAnalysisView; unit: string; decimals: number };

/** Adjusted means with their errors and, where the comparison gives any, the letters of what is not told apart. */
export function MeansTable({ analysis, unit, decimals }: MeansTableProps) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  if (analysis.means.length === 0) return null;
  const hasLetters = analysis.means.some((row) => row.letters !== '');
  const quantity = (value: number | null, digits: number) =>
    value === null ? '–' : format.quantity(value, unit, { decimals: digits });
  const columns: Column<AdjustedMean>[] = [
    { id: 'entry', header: t('ordinal.entry'), cell: (row) => row.entry, sortValue: (row) => row.entry },
    {
      id: 'plots',
      header: t('meansTable.plots'),
      align: 'end',
      cell: (row) => format.number(row.n),
      sortValue: (row) => row.n,
    },
    {
      id: 'mean',
      header: t('meansTable.mean'),
      align: 'end',
      cell: (row) => quantity(row.mean, decimals),
      sortValue: (row) => row.mean,
    },
    {
      id: 'se',
      header: t('meansTable.se'),
      align: 'end',
      cell: (row) => quantity(row.se, decimals + 1),
      sortValue: (row) => row.se,
    },
  ];
  const letters: Column<AdjustedMean> = {
    id: 'letters',
    header: t('meansTable.letters'),
    cell: (row) => row.letters,
    sortValue: (row) => row.letters,
  };
  return (
    <section className="flex flex-col gap-3">
      <h2>{t('meansTable.title')}</h2>
      <DataTable
        caption={t('meansTable.title')}
        columns={hasLetters ? [...columns, letters] : columns}
        rows={analysis.means}
        rowKey={(row) => row.entry}
      />
      {hasLetters && <p className="max-w-prose text-sm text-faded">{t('letters')}</p>}
    </section>
  );
}
