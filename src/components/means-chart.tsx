import { lazy, Suspense, type ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import { DataTable, type Column } from './data-table.tsx';
import { DrawingFrame } from './drawing-frame.tsx';
import { scaleOfMeans, type EntryMean } from './means-scale.ts';
import { Skeleton } from './skeleton.tsx';
import { useFormat } from './use-format.ts';

/** nivo is fetched only when a chart is on the page. */
const MeansPlot = lazy(async () => ({ default: (await import('./means-plot.tsx')).MeansPlot }));

type MeansChartProps = {
  title: ReactNode;
  means: readonly EntryMean[];
  unit: string;
  decimals: number;
  /** At `alpha`; null where the trial has none. */
  lsd: number | null;
  alpha: number;
  /** Letters belong to the analysis view only. */
  hasLetters?: boolean;
};

/** Adjusted means, highest first, with the LSD drawn once as a ruler. */
export function MeansChart({
  title,
  means,
  unit,
  decimals,
  lsd,
  alpha,
  hasLetters = false,
}: MeansChartProps) {
  const { t } = useTranslation('drawings');
  const format = useFormat();
  const sorted = [...means].sort((a, b) => b.mean - a.mean);
  const first = sorted[0];
  const last = sorted.at(-1);
  if (!first || !last) return null;
  const quantity = (value: number) => format.quantity(value, unit, { decimals });
  const scale = scaleOfMeans(sorted, lsd);
  const columns: Column<EntryMean>[] = [
    { id: 'entry', header: t('meansChart.entry'), cell: (entry) => entry.entry },
    { id: 'mean', header: t('meansChart.mean'), align: 'end', cell: (entry) => quantity(entry.mean) },
    {
      id: 'se',
      header: t('meansChart.standardError'),
      align: 'end',
      cell: (entry) =>
        entry.se === null ? '–' : format.quantity(entry.se, unit, { decimals: decimals + 1 }),
    },
    ...(hasLetters
      ? [{ id: 'letters', header: t('meansChart.letters'), cell: (entry: EntryMean) => entry.letters ?? '' }]
      : []),
  ];
  return (
    <DrawingFrame
      title={title}
      isPicture
      drawing={
        <div
          role="img"
          aria-label={t('meansChart.summary', {
            count: sorted.length,
            first: first.entry,
            highest: quantity(first.mean),
            last: last.entry,
            lowest: quantity(last.mean),
          })}
        >
          <Suspense fallback={<Skeleton lines={sorted.length} />}>
            <MeansPlot
              means={sorted}
              scale={scale}
              lsd={lsd}
              formatMean={(mean) => format.number(mean, { decimals })}
            />
          </Suspense>
        </div>
      }
      table={<DataTable caption={title} columns={columns} rows={sorted} rowKey={(entry) => entry.entry} />}
      footer={
        <p className="text-sm text-faded">
          {lsd === null
            ? t('meansChart.noLsd')
            : t('meansChart.lsd', { lsd: quantity(lsd), alpha: format.percent(alpha * 100) })}{' '}
          {scale.isFromZero ? t('meansChart.fromZero') : t('meansChart.cutAxis')}
        </p>
      }
    />
  );
}
