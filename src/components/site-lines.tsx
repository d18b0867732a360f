import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import { spanScale } from '#shared/gap-scale.ts';
import type { TrialGap } from '#shared/weigh-up.ts';
import { DataTable, type Column } from './data-table.tsx';
import { DrawingFrame } from './drawing-frame.tsx';
import { GapAxis, GapTrack } from './gap-track.tsx';
import { useFormat } from './use-format.ts';

type SiteLinesProps = {
  candidateName: string;
  currentName: string;
  trials: readonly TrialGap[];
  unit: string;
  decimals: number;
  /** Turns a trial's name into a link to it. */
  linkTrial?: (trial: TrialGap, words: string) => ReactNode;
};

/** Poor sites first: so a candidate that is ahead only where yields are high is seen to turn. */
export function sortByMeanYield(trials: readonly TrialGap[]): TrialGap[] {
  return [...trials].sort((a, b) => a.trialMean - b.trialMean);
}

/** One line per trial in which both varieties stood: its gap with its own interval, sorted by the trial's mean yield. */
export function SiteLines({ candidateName, currentName, trials, unit, decimals, linkTrial }: SiteLinesProps) {
  const { t } = useTranslation('drawings');
  const format = useFormat();
  const sorted = sortByMeanYield(trials);
  const scale = spanScale(
    sorted.flatMap(({ estimate, interval }) => [estimate, interval.low, interval.high]),
  );
  const level = format.percent((sorted[0]?.interval.level ?? 0.95) * 100);
  const gap = (value: number) => format.gap(value, unit, decimals);
  const columns: Column<TrialGap>[] = [
    {
      id: 'site',
      header: t('siteLines.trial'),
      cell: (trial) => (
        <>
          {trial.siteName}
          {trial.inRegion === false && (
            <span className="block text-sm font-normal text-break-even">{t('siteLines.elsewhere')}</span>
          )}
        </>
      ),
    },
    { id: 'season', header: t('siteLines.season'), align: 'end', cell: (trial) => String(trial.season) },
    {
      id: 'mean',
      header: t('siteLines.meanYield'),
      align: 'end',
      cell: (trial) => format.quantity(trial.trialMean, unit, { decimals }),
    },
    { id: 'gap', header: t('siteLines.gap'), align: 'end', cell: (trial) => gap(trial.estimate) },
    {
      id: 'interval',
      header: t('siteLines.interval', { level }),
      align: 'end',
      cell: ({ interval }) => t('gapStrip.fromTo', format.ends(interval, unit, decimals)),
    },
  ];
  const title = t('siteLines.title', { candidate: candidateName, current: currentName });
  return (
    <DrawingFrame
      title={title}
      drawing={
        <div className="@container">
          <p className="text-sm text-faded">{t('siteLines.order')}</p>
          <div className="grid @2xl:grid-cols-[17rem_minmax(0,1fr)_6rem] @2xl:gap-x-5">
            <span className="@max-2xl:hidden" />
            <GapAxis scale={scale} zeroLabel={currentName} />
          </div>
          <ul className="border-t-2 border-ink">
            {sorted.map((trial) => {
              const words = `${trial.siteName} ${trial.season}`;
              return (
                <li
                  key={trial.trialId}
                  className="grid grid-cols-[minmax(0,1fr)_auto] items-center gap-x-4 border-b border-rule py-1 print:py-0 @2xl:grid-cols-[17rem_minmax(0,1fr)_6rem] @2xl:gap-x-5"
                >
                  <span className="text-sm [&_a]:tap-target [&_a]:inline-flex [&_a]:items-center">
                    {linkTrial ? linkTrial(trial, words) : words}{' '}
                    <span className="whitespace-nowrap text-faded">
                      {t('siteLines.mean', { mean: format.quantity(trial.trialMean, unit, { decimals }) })}
                    </span>
                    {trial.inRegion === false && (
                      <span className="block text-break-even">{t('siteLines.elsewhere')}</span>
                    )}
                  </span>
                  <span className="text-right text-sm font-semibold @2xl:col-start-3 @2xl:row-start-1">
                    {gap(trial.estimate)}
                  </span>
                  <div className="print:-my-1.5 @max-2xl:col-span-2 @2xl:col-start-2 @2xl:row-start-1">
                    <GapTrack
                      scale={scale}
                      colour="var(--color-open)"
                      estimate={trial.estimate}
                      region={trial.interval}
                      height={30}
                      sentence={t('siteLines.sentence', {
                        site: trial.siteName,
                        season: trial.season,
                        mean: format.quantity(trial.trialMean, unit, { decimals }),
                        gap: gap(trial.estimate),
                        low: gap(trial.interval.low),
                        high: gap(trial.interval.high),
                        level,
                      })}
                    />
                  </div>
                </li>
              );
            })}
          </ul>
        </div>
      }
      table={<DataTable caption={title} columns={columns} rows={sorted} rowKey={(trial) => trial.trialId} />}
      footer={<p className="mt-2 text-sm text-faded">{t('siteLines.legendInterval', { level })}</p>}
    />
  );
}
