import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import type { LeftOutTrial, UsedTrial, WeighUpResult } from '#shared/weigh-up.ts';
import { DataTable, type Column } from './data-table.tsx';
import { useFormat } from './use-format.ts';

type EvidenceTrialsProps = {
  result: WeighUpResult;
  /** Turns a trial's name into a link to it. */
  linkTrial?: (trialId: string, words: string) => ReactNode;
  /** What can be done with a trial that counts, and with one that was ticked off. */
  stepOf?: (trial: UsedTrial) => ReactNode;
  /** Without controls for sorting, for a page whose tables no script serves. */
  isStill?: boolean;
};

/** The trials behind the figures, and those left out with the reason: nothing is left out in silence. */
export function EvidenceTrials({ result, linkTrial, stepOf, isStill = false }: EvidenceTrialsProps) {
  const { t } = useTranslation('method');
  const sortable = useUsedColumns(linkTrial);
  const columns = isStill ? sortable.map(({ sortValue: _sortValue, ...column }) => column) : sortable;
  const reasonColumn: Column<LeftOutTrial> = {
    id: 'reason',
    header: t('column.reason'),
    cell: ({ reason, reasonText }) => (
      <>
        {t(`reason.${reason}`)}
        {reasonText && <span className="block text-sm">{t('reasonWords', { words: reasonText })}</span>}
      </>
    ),
  };
  const step = { id: 'step', header: t('column.step') };
  const stepColumn: Column<UsedTrial>[] = stepOf ? [{ ...step, cell: stepOf }] : [];
  const backColumn: Column<LeftOutTrial>[] = stepOf
    ? [{ ...step, cell: (trial) => (trial.reason === 'ticked-off' ? stepOf(trial) : '–') }]
    : [];
  return (
    <div className="flex flex-col gap-5 print:gap-2">
      <section className="flex flex-col gap-2 print:gap-0.5">
        <h3>{t('trialsUsed')}</h3>
        <DataTable
          caption={t('trialsUsedCaption')}
          columns={[...columns, ...stepColumn]}
          rows={result.trials}
          rowKey={(trial) => trial.trialId}
        />
      </section>
      <section className="flex flex-col gap-2 print:gap-0.5">
        <h3>{t('leftOut')}</h3>
        {result.leftOut.length === 0 ? (
          <p>{t('nothingLeftOut')}</p>
        ) : (
          <DataTable
            caption={t('leftOutCaption')}
            columns={[...columns, reasonColumn, ...backColumn]}
            rows={result.leftOut}
            rowKey={(trial) => trial.trialId}
          />
        )}
      </section>
    </div>
  );
}

function useUsedColumns(linkTrial: EvidenceTrialsProps['linkTrial']): Column<UsedTrial>[] {
  const { t } = useTranslation('method');
  const format = useFormat();
  return [
    {
      id: 'trial',
      header: t('column.trial'),
      cell: ({ trialId, siteName, name, inRegion, regionName }) => (
        <>
          {linkTrial ? linkTrial(trialId, siteName) : siteName}
          <span className="block text-sm font-normal text-faded print:ml-1.5 print:inline">{name}</span>
          {inRegion === false && regionName && (
            <span className="block text-sm font-normal text-break-even">
              {t('elsewhere', { region: format.name(regionName) })}
            </span>
          )}
        </>
      ),
      sortValue: (trial) => trial.siteName,
    },
    {
      id: 'season',
      header: t('column.season'),
      align: 'end',
      cell: (trial) => String(trial.season),
      sortValue: (trial) => trial.season,
    },
    {
      id: 'mean',
      header: t('column.mean'),
      align: 'end',
      cell: ({ meanYield }) =>
        meanYield === null ? '–' : format.quantity(meanYield, 't/ha', { decimals: 2 }),
      sortValue: (trial) => trial.meanYield,
    },
    {
      id: 'cv',
      header: t('column.cv'),
      align: 'end',
      cell: ({ cvPercent }) => (cvPercent === null ? '–' : format.percent(cvPercent, { decimals: 1 })),
      sortValue: (trial) => trial.cvPercent,
    },
    {
      id: 'version',
      header: t('column.version'),
      align: 'end',
      cell: ({ version, sha256 }) => <span title={sha256}>{t('versionOf', { version })}</span>,
    },
  ];
}
