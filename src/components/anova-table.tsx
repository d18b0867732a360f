import { useTranslation } from 'react-i18next';
import type { AnovaRow, TrialAnalysisView } from '#shared/trial.ts';
import { decimalsOfSquares } from './analysis-decimals.ts';
import { DataTable, type Column } from './data-table.tsx';
import { useFormat } from './use-format.ts';

/** Names a term of the model: ours by their words, a factor by its own name, an interaction by its parts. */
export function useTermName(): (term: string) => string {
  const { t, i18n } = useTranslation('analysis');
  const namePart = (part: string) =>
    // The key was just found to exist; its type cannot be known here.
    i18n.exists(`analysis:anova.terms.${part}`) ? t(`anova.terms.${part}` as 'anova.terms.entry') : part;
  return (term) => term.split(':').map(namePart).join(' × ');
}

/** The analysis of variance; figures that a term does not have stay empty, and a p is never 0. */
export function AnovaTable({ analysis, traitName }: { analysis: TrialAnalysisView; traitName: string }) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const termName = useTermName();
  if (analysis.anova.length === 0) return null;
  const df = (value: number) => format.number(value, { decimals: Number.isInteger(value) ? 0 : 1 });
  const squares = (value: number | null) =>
    value === null ? '' : format.number(value, { decimals: decimalsOfSquares(value) });
  const hasSquares = analysis.anova.some((row) => row.ss !== null);
  const columns: (Column<AnovaRow> | null)[] = [
    { id: 'term', header: t('anova.source'), cell: (row) => termName(row.term) },
    { id: 'df', header: t('anova.df'), align: 'end', cell: (row) => df(row.df) },
    hasSquares ? { id: 'ss', header: t('anova.ss'), align: 'end', cell: (row) => squares(row.ss) } : null,
    hasSquares ? { id: 'ms', header: t('anova.ms'), align: 'end', cell: (row) => squares(row.ms) } : null,
    hasSquares
      ? null
      : {
          id: 'den-df',
          header: t('anova.denDf'),
          align: 'end',
          cell: (row) => (row.denDf === null ? '' : df(row.denDf)),
        },
    {
      id: 'f',
      header: t('anova.f'),
      align: 'end',
      cell: (row) => (row.f === null ? '' : format.number(row.f, { decimals: 2 })),
    },
    {
      id: 'p',
      header: t('anova.p'),
      align: 'end',
      cell: (row) => (row.p === null ? '' : format.pValue(row.p)),
    },
  ];
  return (
    <section className="flex flex-col gap-3">
      <h2>{t('anova.title')}</h2>
      <DataTable
        caption={t('anova.caption', { trait: traitName })}
        columns={columns.filter((column) => column !== null)}
        rows={analysis.anova}
        rowKey={(row) => row.term}
        whenNarrow="scroll"
      />
      {analysis.components.length > 1 && <ComponentList analysis={analysis} />}
    </section>
  );
}

function ComponentList({ analysis }: { analysis: TrialAnalysisView }) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const termName = useTermName();
  type Component = TrialAnalysisView['components'][number];
  const columns: Column<Component>[] = [
    { id: 'name', header: t('anova.component'), cell: ({ name }) => termName(name) },
    {
      id: 'variance',
      header: t('anova.variance'),
      align: 'end',
      cell: ({ variance }) => format.number(variance, { decimals: decimalsOfSquares(variance) }),
    },
  ];
  return (
    <DataTable
      caption={t('anova.components')}
      isCaptionVisible
      columns={columns}
      rows={analysis.components}
      rowKey={({ name }) => name}
      whenNarrow="scroll"
    />
  );
}
