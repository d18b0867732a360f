import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import { sayGapRow, scaleOfRows, type GapRow } from '#shared/gap-rows.ts';
import type { Scale } from '#shared/gap-scale.ts';
import type { Interval } from '#shared/verdict.ts';
import { VerdictMark, verdictColours } from './beam.tsx';
import { DataTable, type Column } from './data-table.tsx';
import { DrawingFrame } from './drawing-frame.tsx';
import { GapAxis, GapLabel, GapTrack } from './gap-track.tsx';
import { useFormat } from './use-format.ts';

export type GapStripRow = GapRow & {
  id: string;
  /** What stands as the name where it is more than words: a link. */
  head?: ReactNode;
  /** Beside the strip: return per hectare, trials, cautions. */
  aside?: ReactNode;
  /** Under the strip, over the whole width: the row's story when it is open. */
  below?: ReactNode;
};

type GapStripProps = {
  title: ReactNode;
  rows: readonly GapStripRow[];
  currentName: string;
  unit: string;
  /** Of the figures in words, in the unit that is read; see `useFormat().decimals`. */
  decimals: number;
  /** Level of the candidates' names in the page's outline. */
  headingLevel?: 2 | 3;
};

/** Too few trials for a verdict are too few for an interval: whatever a model would give is not shown. */
function withoutThinIntervals(row: GapStripRow): GapStripRow {
  return row.verdict === 'thin' ? { ...row, region: null, ownSeason: null } : row;
}

/** The signature drawing: a list of gaps to the current variety on one shared scale, with what is left uncertain. */
export function GapStrip({
  title,
  rows: given,
  currentName,
  unit,
  decimals,
  headingLevel = 2,
}: GapStripProps) {
  const { t } = useTranslation('drawings');
  const format = useFormat();
  const rows = given.map(withoutThinIntervals);
  const scale = scaleOfRows(rows);
  const shared = { scale, currentName, unit, decimals };
  return (
    <DrawingFrame
      title={title}
      drawing={
        <div className="@container">
          <div className="grid @2xl:grid-cols-[11rem_minmax(0,1fr)_10rem] @2xl:gap-x-5">
            <p className="self-end pb-1 text-sm text-faded">
              {t('gapStrip.axis', { current: currentName, unit: format.unit(unit) })}
            </p>
            <GapAxis scale={scale} zeroLabel={currentName} />
          </div>
          <ul className="border-t-2 border-ink">
            {rows.map((row) => (
              <StripRow key={row.id} row={row} headingLevel={headingLevel} {...shared} />
            ))}
          </ul>
          <StripKey rows={rows} />
        </div>
      }
      table={<StripTable rows={rows} currentName={currentName} unit={unit} decimals={decimals} />}
    />
  );
}

type SharedProps = { scale: Scale; currentName: string; unit: string; decimals: number };

type StripRowProps = SharedProps & { row: GapStripRow; headingLevel: 2 | 3 };

function StripRow({ row, scale, currentName, unit, decimals, headingLevel }: StripRowProps) {
  const Heading = `h${headingLevel}` as const;
  const { t } = useTranslation('drawings');
  const format = useFormat();
  const sentence = useGapSentence(currentName, unit, decimals)(row);
  return (
    <li className="grid grid-cols-[minmax(0,1fr)_auto] items-center gap-x-4 gap-y-1 border-b border-rule py-3 print:py-0.5 @2xl:grid-cols-[11rem_minmax(0,1fr)_10rem] @2xl:gap-x-5">
      <div>
        <Heading className="text-lg font-bold [&_a]:tap-target [&_a]:inline-flex [&_a]:items-center">
          {row.head ?? row.name}
        </Heading>
        <VerdictMark verdict={row.verdict} className="text-sm" />
      </div>
      <div className="relative col-span-2 row-start-2 py-6 print:py-2.5 @2xl:col-span-1 @2xl:col-start-2 @2xl:row-start-1">
        {row.estimate !== null && (
          <GapLabel scale={scale} value={row.estimate} className="top-0.5 font-semibold">
            {format.gap(row.estimate, unit, decimals)}
          </GapLabel>
        )}
        <GapTrack
          scale={scale}
          colour={verdictColours[row.verdict]}
          estimate={row.estimate}
          region={row.region}
          ownSeason={row.ownSeason}
          breakEven={row.breakEven}
          isThin={row.verdict === 'thin'}
          sentence={sentence}
        />
        {row.breakEven !== null && (
          <GapLabel scale={scale} value={row.breakEven} className="bottom-0.5 text-break-even">
            {t('gapStrip.paysFrom', { gap: format.gap(row.breakEven, unit, decimals) })}
          </GapLabel>
        )}
        {row.verdict === 'thin' && row.breakEven === null && (
          <GapLabel scale={scale} value={row.estimate ?? 0} className="bottom-0.5 text-faded">
            {t('gapStrip.thin')}
          </GapLabel>
        )}
      </div>
      <div className="col-start-2 row-start-1 text-right @2xl:col-start-3">{row.aside}</div>
      {row.below && <div className="col-span-full min-w-0">{row.below}</div>}
    </li>
  );
}

/** Says a row in words: what a screen reader gets for the strip. */
export function useGapSentence(current: string, unit: string, decimals: number): (row: GapRow) => string {
  const { t } = useTranslation(['drawings']);
  const format = useFormat();
  return (row) => sayGapRow(row, current, { unit, decimals }, t, format);
}

/** What each kind of mark stands for; only those that occur. */
function StripKey({ rows }: { rows: readonly GapStripRow[] }) {
  const { t } = useTranslation('drawings');
  const format = useFormat();
  const shown = rows.find((row) => row.region);
  const region = shown?.region;
  const ownSeason = rows.find((row) => row.ownSeason)?.ownSeason;
  const level = (interval: Interval) => ({ level: format.percent(interval.level * 100) });
  return (
    <ul className="mt-2 flex flex-wrap gap-x-6 gap-y-1 text-sm text-faded">
      <KeyEntry words={t('gapStrip.legendEstimate')} width={8}>
        <line x1="4" x2="4" y1="1" y2="19" stroke="var(--color-ink)" strokeWidth="3" />
      </KeyEntry>
      {region && (
        <KeyEntry
          words={t(shown.isBeyondRegion ? 'gapStrip.legendSites' : 'gapStrip.legendRegion', level(region))}
          width={34}
        >
          <rect y="4" width="34" height="12" rx="2" fill="var(--color-open)" />
        </KeyEntry>
      )}
      {ownSeason && (
        <KeyEntry words={t('gapStrip.legendOwnSeason', level(ownSeason))} width={34}>
          <rect
            x="0.5"
            y="1"
            width="33"
            height="18"
            rx="9"
            fill="var(--color-open)"
            fillOpacity="0.16"
            stroke="var(--color-open)"
            strokeOpacity="0.75"
          />
        </KeyEntry>
      )}
      {rows.some((row) => row.breakEven !== null) && (
        <KeyEntry words={t('gapStrip.legendBreakEven')} width={8}>
          <line
            x1="4"
            x2="4"
            y1="0"
            y2="20"
            stroke="var(--color-break-even)"
            strokeWidth="2"
            strokeDasharray="5 4"
          />
        </KeyEntry>
      )}
    </ul>
  );
}

function KeyEntry({ words, width, children }: { words: string; width: number; children: ReactNode }) {
  return (
    <li className="flex items-center gap-2">
      <svg width={width} height="20" className="shrink-0" aria-hidden="true">
        {children}
      </svg>
      {words}
    </li>
  );
}

function StripTable({
  rows,
  currentName,
  unit,
  decimals,
}: Omit<SharedProps, 'scale'> & { rows: readonly GapStripRow[] }) {
  const { t } = useTranslation('drawings');
  const format = useFormat();
  const level = (interval: Interval | null | undefined) => format.percent((interval?.level ?? 0.95) * 100);
  const gap = (value: number | null) =>
    value === null ? t('gapStrip.none') : format.gap(value, unit, decimals);
  const fromTo = (interval: Interval | null) =>
    interval === null ? t('gapStrip.none') : t('gapStrip.fromTo', format.ends(interval, unit, decimals));
  const shown = rows.find((row) => row.region);
  const firstOwnSeason = rows.find((row) => row.ownSeason)?.ownSeason;
  const columns: Column<GapStripRow>[] = [
    { id: 'name', header: t('gapStrip.candidate'), cell: (row) => row.name },
    { id: 'verdict', header: t('gapStrip.verdict'), cell: (row) => <VerdictMark verdict={row.verdict} /> },
    { id: 'gap', header: t('gapStrip.gap'), align: 'end', cell: (row) => gap(row.estimate) },
    {
      id: 'region',
      header: t(shown?.isBeyondRegion ? 'gapStrip.sites' : 'gapStrip.region', {
        level: level(shown?.region),
      }),
      align: 'end',
      cell: (row) => fromTo(row.region),
    },
    {
      id: 'own-season',
      header: t('gapStrip.ownSeason', { level: level(firstOwnSeason) }),
      align: 'end',
      cell: (row) => fromTo(row.ownSeason),
    },
    { id: 'break-even', header: t('gapStrip.breakEven'), align: 'end', cell: (row) => gap(row.breakEven) },
  ];
  return (
    <DataTable
      caption={t('gapStrip.caption', { current: currentName })}
      columns={columns}
      rows={rows}
      rowKey={(row) => row.id}
    />
  );
}
