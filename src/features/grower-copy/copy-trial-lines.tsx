import { memo } from 'react';
import { useTranslation } from 'react-i18next';
import type { TrialGap } from '#shared/weigh-up.ts';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { sortByMeanYield } from '#src/components/site-lines.tsx';
import { useFormat } from '#src/components/use-format.ts';

type CopyTrialLinesProps = {
  candidateName: string;
  trials: readonly TrialGap[];
  currentName: string;
  unit: string;
  decimals: number;
};

/** A line per trial in which both stood: readable without scripts, where the drawing's own switch would be dead. */
export const CopyTrialLines = memo(function CopyTrialLines(props: CopyTrialLinesProps) {
  const { candidateName, currentName, unit, decimals } = props;
  const { t } = useTranslation('drawings');
  const format = useFormat();
  const trials = sortByMeanYield(props.trials);
  if (trials.length === 0) return null;
  const title = t('siteLines.title', { candidate: candidateName, current: currentName });
  const level = format.percent((trials[0]?.interval.level ?? 0.95) * 100);
  const columns: Column<TrialGap>[] = [
    {
      id: 'trial',
      header: t('siteLines.trial'),
      cell: ({ siteName, season, inRegion }) => (
        <>
          {`${siteName} ${season}`}
          {inRegion === false && (
            <span className="block text-sm font-normal text-break-even">{t('siteLines.elsewhere')}</span>
          )}
        </>
      ),
    },
    {
      id: 'mean',
      header: t('siteLines.meanYield'),
      align: 'end',
      cell: ({ trialMean }) => format.quantity(trialMean, unit, { decimals }),
    },
    {
      id: 'gap',
      header: t('siteLines.gap'),
      align: 'end',
      cell: ({ estimate }) => format.gap(estimate, unit, decimals),
    },
    {
      id: 'interval',
      header: t('siteLines.interval', { level }),
      align: 'end',
      cell: ({ interval }) =>
        t('gapStrip.fromTo', {
          low: format.number(interval.low, { decimals, isSigned: true }),
          high: format.gap(interval.high, unit, decimals),
        }),
    },
  ];
  return (
    <section className="flex flex-col gap-1 print:block">
      <h3>{title}</h3>
      <p className="text-sm text-faded print:break-after-avoid">{t('siteLines.order')}</p>
      <DataTable caption={title} columns={columns} rows={trials} rowKey={({ trialId }) => trialId} />
    </section>
  );
});
