import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import type { LeftOutTrial, UsedTrial, WeighUpResult } from '#shared/weigh-up.ts';
import { DataTable, type Column } from './data-table.tsx';
import { useFormat } from './use-format.ts';

type EvidenceTrialsProps = {
  result: WeighUpResult;
  /** Turns a trial's name into a link to it. */
  linkTrial?: (trialId: string, words: string) => ReactNode;
};

/** The trials behind the figures, and those left out with the reason: nothing is left out in silence. */
export function EvidenceTrials({ result, linkTrial }: EvidenceTrialsProps) {
  const { t } = useTranslation('method');
  const columns = useUsedColumns(linkTrial);
  const reasonColumn: Column<LeftOutTrial> = {
    id: 'reason',
    header: t('column.reason'),
    cell: (trial) => t(`reason.${trial.reason}`),
  };
  return (
    <div className="flex flex-col gap-5">
      <section className="flex flex-col gap-2">
        <h3>{t('trialsUsed')}</h3>
        <DataTable
          caption={t('trialsUsedCaption')}
          columns={columns}
          rows={result.trials}
          rowKey={(trial) => trial.trialId}
        />
      </section>
      <section className="flex flex-col gap-2">
        <h3>{t('leftOut')}</h3>
        {result.leftOut.length === 0 ? (
          <p>{t('nothingLeftOut')}</p>
        ) : (
          <DataTable
            caption={t('leftOutCaption')}
            columns={[...columns, reasonColumn]}
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
          <span className="block text-sm font-normal text-faded">{name}</span>
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
