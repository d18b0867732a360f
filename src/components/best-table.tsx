import { useTranslation } from 'react-i18next';
import type { BestComparison, TrialAnalysisView } from '#shared/trial.ts';
import { DataTable, type Column } from './data-table.tsx';
import { useFormat } from './use-format.ts';
import { useLanguage } from './use-language.ts';

type BestTableProps = { analysis: TrialAnalysisView; unit: string; decimals: number };

/** Who may be the best of the trial and who is surely not, in sentences, then each variety with its limits. */
export function BestTable({ analysis, unit, decimals }: BestTableProps) {
  const { t } = useTranslation('analysis');
  const columns = useBestColumns(analysis.alpha, unit, decimals);
  if (analysis.best.length === 0) return null;
  return (
    <section className="flex flex-col gap-3">
      <h2>{t('best.title')}</h2>
      <BestSentences analysis={analysis} />
      <DataTable
        caption={t('best.caption')}
        columns={columns}
        rows={analysis.best}
        rowKey={({ entry }) => entry}
      />
      <p className="max-w-prose text-sm text-faded">{t('best.limits')}</p>
    </section>
  );
}

function BestSentences({ analysis: { best, alpha } }: { analysis: TrialAnalysisView }) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const list = new Intl.ListFormat(useLanguage(), { type: 'conjunction' });
  const may = best.filter((row) => row.mayBeBest).map((row) => row.entry);
  const not = best.filter((row) => !row.mayBeBest).map((row) => row.entry);
  const confidence = format.percent((1 - alpha) * 100);
  return (
    <>
      <p className="max-w-prose text-lg font-semibold">
        {not.length === 0
          ? t('best.all', { confidence, number: format.number(may.length) })
          : t('best.may', { confidence, count: may.length, entries: list.format(may) })}
      </p>
      {not.length > 0 && (
        <p className="max-w-prose">{t('best.not', { count: not.length, entries: list.format(not) })}</p>
      )}
    </>
  );
}

function useBestColumns(alpha: number, unit: string, decimals: number): Column<BestComparison>[] {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const isCertain = ({ isBest, mayBeBest }: BestComparison) =>
    isBest ? t('best.isBest') : mayBeBest ? t('best.mayBe') : t('best.isNot');
  return [
    { id: 'entry', header: t('ordinal.entry'), cell: ({ entry }) => entry, sortValue: ({ entry }) => entry },
    {
      id: 'gap',
      header: t('best.gap'),
      align: 'end',
      cell: ({ estimate }) => format.gap(estimate, unit, decimals),
      sortValue: ({ estimate }) => estimate,
    },
    {
      id: 'range',
      header: t('best.range', { confidence: format.percent((1 - alpha) * 100) }),
      align: 'end',
      cell: ({ lower, upper }) =>
        t('best.rangeOf', {
          low: format.number(lower, { decimals, isSigned: true }),
          high: format.gap(upper, unit, decimals),
        }),
    },
    { id: 'verdict', header: t('best.verdict'), cell: isCertain },
  ];
}
