import { useTranslation } from 'react-i18next';
import type { ImportReport, RowProblem } from '#shared/trial-desk.ts';
import type { TrialAnalysisView } from '#shared/trial.ts';
import type { Catalogue } from '#src/catalogue-query.ts';
import { AnalysisView } from '#src/components/analysis-view.tsx';
import { CautionList } from '#src/components/caution-list.tsx';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useCautionItems } from '#src/use-caution-items.ts';

type ImportReportViewProps = {
  report: ImportReport;
  analysis: TrialAnalysisView | null;
  catalogue: Catalogue;
};

/** What the check found: every row that fails, or how the trial would look. */
export function ImportReportView({ report, analysis, catalogue }: ImportReportViewProps) {
  const { t } = useTranslation('desk');
  const hasPassed = report.problemsTotal === 0;
  return (
    <section role="status" className="flex flex-col gap-4">
      <h2>{hasPassed ? t('report.passTitle') : t('report.failTitle')}</h2>
      {hasPassed ? <PassSentence report={report} catalogue={catalogue} /> : <FailedRows report={report} />}
      {report.unknownVarieties.length > 0 && (
        <p className="max-w-prose">{t('report.unknown', { names: report.unknownVarieties.join(', ') })}</p>
      )}
      {analysis && <Preview analysis={analysis} catalogue={catalogue} />}
    </section>
  );
}

function useTraitName(catalogue: Catalogue): (slug: string) => string {
  const format = useFormat();
  const traits = catalogue.crops.flatMap((crop) => crop.traits);
  return (slug) => {
    const trait = traits.find((one) => one.slug === slug);
    return trait ? format.name(trait.name) : slug;
  };
}

function PassSentence({ report, catalogue }: { report: ImportReport; catalogue: Catalogue }) {
  const { t } = useTranslation('desk');
  const traitName = useTraitName(catalogue);
  return (
    <p>
      {t('report.pass', {
        rows: t('report.rows', { count: report.rows }),
        plots: t('report.plots', { count: report.plots }),
        entries: t('report.entries', { count: report.entries }),
        traits: report.traits.map(traitName).join(', '),
      })}
    </p>
  );
}

function FailedRows({ report }: { report: ImportReport }) {
  const { t } = useTranslation('desk');
  const problemText = useProblemText();
  const { problems, problemsTotal: total } = report;
  const columns: Column<RowProblem>[] = [
    {
      id: 'row',
      header: t('report.column.row'),
      cell: (problem) => String(problem.row),
      sortValue: (problem) => problem.row,
    },
    {
      id: 'column',
      header: t('report.column.column'),
      cell: (problem) => problem.column ?? '–',
      sortValue: (problem) => problem.column,
    },
    {
      id: 'value',
      header: t('report.column.value'),
      cell: ({ value }) =>
        value === null ? '–' : value === '' ? <em>{t('report.empty')}</em> : <code>{value}</code>,
    },
    { id: 'expected', header: t('report.column.expected'), cell: problemText },
  ];
  return (
    <>
      <p>
        {t('report.fail', { count: total })}{' '}
        {problems.length < total && t('report.shown', { shown: problems.length, total })}
      </p>
      <DataTable
        caption={t('report.caption')}
        columns={columns}
        rows={problems}
        rowKey={(problem) => `${problem.row} ${problem.column} ${problem.reason}`}
      />
    </>
  );
}

/** What was expected instead, in words. */
function useProblemText(): (problem: RowProblem) => string {
  const { t, i18n } = useTranslation('problems');
  return ({ reason, values }) =>
    // The key was just found to exist; its type cannot be known here.
    i18n.exists(`problems:${reason}`) ? t(reason as 'no-rows', values) : reason;
}

function Preview({ analysis, catalogue }: { analysis: TrialAnalysisView; catalogue: Catalogue }) {
  const { t } = useTranslation(['desk', 'trials']);
  const cautionItems = useCautionItems();
  const traitName = useTraitName(catalogue);
  const unit =
    catalogue.crops.flatMap((crop) => crop.traits).find(({ slug }) => slug === analysis.traitSlug)?.unit ??
    '';
  return (
    <section className="flex flex-col gap-4">
      <h2>{t('desk:report.preview')}</h2>
      <AnalysisView
        analysis={analysis}
        traitName={traitName(analysis.traitSlug)}
        unit={unit}
        hasLetters={false}
      >
        <CautionList title={t('trials:page.cautions')} items={cautionItems(analysis.cautions)} />
      </AnalysisView>
    </section>
  );
}
