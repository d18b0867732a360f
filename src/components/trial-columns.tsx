import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import type { TrialLine } from '#shared/trial.ts';
import type { Column } from './data-table.tsx';
import { useTrialWords } from './trial-words.ts';
import { useFormat } from './use-format.ts';

/** Unit of the figures in a trial's line: those of yield. */
const unit = 't/ha';
const decimals = 2;

/** Columns of facts that lists of trials share; `nameTrial` draws the first, which leads to the trial. */
export function useTrialColumns(
  nameTrial: (trial: TrialLine, words: string) => ReactNode,
  cropName: (cropId: string) => string,
): Column<TrialLine>[] {
  const { t } = useTranslation('trials');
  const format = useFormat();
  const words = useTrialWords();
  const quantity = (value: number | null) =>
    value === null ? '–' : format.quantity(value, unit, { decimals });
  return [
    {
      id: 'trial',
      header: t('column.trial'),
      cell: (trial) => (
        <>
          {nameTrial(trial, t('siteSeason', { site: trial.siteName, season: trial.season }))}
          <span className="block text-sm font-normal text-faded">{trial.name}</span>
        </>
      ),
      sortValue: (trial) => `${trial.siteName} ${trial.season}`,
    },
    {
      id: 'crop',
      header: t('column.crop'),
      cell: (trial) => cropName(trial.cropId),
      sortValue: (trial) => cropName(trial.cropId),
    },
    {
      id: 'design',
      header: t('column.design'),
      cell: (trial) => (trial.kind === 'summary' ? t('kind.summary') : words.design(trial.design)),
      sortValue: (trial) => trial.design,
    },
    {
      id: 'entries',
      header: t('column.entries'),
      align: 'end',
      cell: (trial) => format.number(trial.entries),
      sortValue: (trial) => trial.entries,
    },
    {
      id: 'mean',
      header: t('column.mean'),
      align: 'end',
      cell: (trial) => quantity(trial.meanYield),
      sortValue: (trial) => trial.meanYield,
    },
    {
      id: 'lsd',
      header: t('column.lsd'),
      align: 'end',
      cell: (trial) => quantity(trial.lsd),
      sortValue: (trial) => trial.lsd,
    },
    {
      id: 'cv',
      header: t('column.cv'),
      align: 'end',
      cell: (trial) => (
        <>
          {trial.cvPercent === null ? '–' : format.percent(trial.cvPercent, { decimals: 1 })}
          {trial.isWeak && <strong className="block text-sm text-behind">{t('column.weak')}</strong>}
        </>
      ),
      sortValue: (trial) => trial.cvPercent,
    },
    {
      id: 'p',
      header: t('column.p'),
      align: 'end',
      cell: (trial) => (trial.entryP === null ? '–' : format.pValue(trial.entryP)),
      sortValue: (trial) => trial.entryP,
    },
  ];
}
