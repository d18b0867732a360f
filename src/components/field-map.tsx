import type { CSSProperties, ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import { sayUnit } from '#shared/format-number.ts';
import type { PlotView } from '#shared/trial.ts';
import { DataTable, type Column } from './data-table.tsx';
import { DrawingFrame } from './drawing-frame.tsx';
import { useFormat } from './use-format.ts';
import { useLanguage } from './use-language.ts';

type FieldMapProps = {
  title: ReactNode;
  plots: readonly PlotView[];
  unit: string;
  decimals: number;
  /** What the shade stands for. */
  shade: 'residual' | 'value';
};

type PlacedPlot = PlotView & { row: number; col: number };
type PlotState = 'used' | 'excluded' | 'missing';

/** The strongest share of colour under a cell's words that still leaves them 4.5 : 1. */
const strongestShade = 45;

function isPlaced(plot: PlotView): plot is PlacedPlot {
  return plot.row !== null && plot.col !== null;
}

export function stateOfPlot(plot: PlotView): PlotState {
  if (plot.excludedReason !== null) return 'excluded';
  return plot.value === null ? 'missing' : 'used';
}

/**
 * The ground of a used plot: teal above and orange below for residuals, teal by height for values.
 * @param share of the largest residual in size (−1 to 1), or of the range of values (0 to 1)
 */
export function shadeOf(share: number): string {
  const strength = Math.round(Math.min(Math.abs(share), 1) * strongestShade);
  const hue = share < 0 ? 'var(--color-behind)' : 'var(--color-ahead)';
  return `color-mix(in srgb, ${hue} ${strength}%, var(--color-card))`;
}

/** How strongly each plot is shaded; residuals share one scale around zero. */
function makeShare(plots: readonly PlotView[], shade: 'residual' | 'value'): (plot: PlotView) => number {
  const used = plots.filter((plot) => stateOfPlot(plot) === 'used');
  if (shade === 'residual') {
    const largest = Math.max(0, ...used.map((plot) => Math.abs(plot.residual ?? 0)));
    return (plot) => (largest > 0 ? (plot.residual ?? 0) / largest : 0);
  }
  const values = used.map((plot) => plot.value ?? 0);
  const low = Math.min(...values);
  const span = Math.max(...values) - low;
  return (plot) => (span > 0 ? ((plot.value ?? low) - low) / span : 0);
}

/** The field as it lay: every plot at its row and column. On a phone it slides sideways inside its own box. */
export function FieldMap({ title, plots, unit, decimals, shade }: FieldMapProps) {
  const { t } = useTranslation('drawings');
  const placed = plots.filter(isPlaced);
  if (placed.length === 0) return <p className="text-faded">{t('fieldMap.noLayout')}</p>;
  const rows = placed.map((plot) => plot.row);
  const columns = placed.map((plot) => plot.col);
  const firstRow = Math.min(...rows);
  const firstColumn = Math.min(...columns);
  const columnCount = Math.max(...columns) - firstColumn + 1;
  const count = (state: PlotState) => placed.filter((plot) => stateOfPlot(plot) === state).length;
  const shareOf = makeShare(placed, shade);
  return (
    <DrawingFrame
      title={title}
      isPicture
      drawing={
        <div className="@container">
          <div
            className="overflow-x-auto pb-2"
            role="group"
            aria-label={t('fieldMap.scrollHint')}
            tabIndex={0}
          >
            <div
              role="img"
              aria-label={t('fieldMap.summary', {
                rows: Math.max(...rows) - firstRow + 1,
                columns: columnCount,
                used: count('used'),
                excluded: count('excluded'),
                missing: count('missing'),
              })}
              className="grid gap-0.5"
              style={{
                gridTemplateColumns: `repeat(${columnCount}, minmax(6.25rem, 1fr))`,
                maxWidth: `${columnCount * 8}rem`,
              }}
            >
              {placed.map((plot) => (
                <PlotCell
                  key={plot.id}
                  plot={plot}
                  decimals={decimals}
                  shade={shade}
                  style={{
                    gridRow: plot.row - firstRow + 1,
                    gridColumn: plot.col - firstColumn + 1,
                    backgroundColor: stateOfPlot(plot) === 'used' ? shadeOf(shareOf(plot)) : undefined,
                  }}
                />
              ))}
            </div>
          </div>
        </div>
      }
      table={<PlotTable plots={placed} unit={unit} decimals={decimals} />}
      footer={
        <MapKey
          unit={unit}
          shade={shade}
          hasExcluded={count('excluded') > 0}
          hasMissing={count('missing') > 0}
        />
      }
    />
  );
}

type PlotCellProps = {
  plot: PlacedPlot;
  decimals: number;
  shade: 'residual' | 'value';
  style: CSSProperties;
};

const stateShapes: Record<PlotState, string> = {
  used: 'border-transparent',
  excluded: 'border-edge plot-hatched',
  missing: 'border-dashed border-edge text-faded',
};

function PlotCell({ plot, decimals, shade, style }: PlotCellProps) {
  const { t } = useTranslation('drawings');
  const format = useFormat();
  const state = stateOfPlot(plot);
  const figure = shade === 'residual' ? plot.residual : plot.value;
  return (
    <div
      data-state={state}
      className={`prints-colour min-w-0 border px-1 py-1 text-center text-sm leading-tight ${stateShapes[state]}`}
      style={style}
      title={`${plot.plotNumber} · ${plot.entryLabel}`}
    >
      <span className="block truncate">{plot.entryLabel}</span>
      <span className="block whitespace-nowrap">
        {state === 'used' && figure !== null
          ? format.number(figure, { decimals, isSigned: shade === 'residual' })
          : state === 'used'
            ? ''
            : t(`fieldMap.${state}`)}
      </span>
    </div>
  );
}

type MapKeyProps = { unit: string; shade: 'residual' | 'value'; hasExcluded: boolean; hasMissing: boolean };

function MapKey({ unit, shade, hasExcluded, hasMissing }: MapKeyProps) {
  const { t } = useTranslation('drawings');
  const said = { unit: sayUnit(unit, useLanguage()) };
  return (
    <ul className="mt-1 flex flex-wrap gap-x-6 text-sm text-faded">
      <li>{shade === 'residual' ? t('fieldMap.keyResidual', said) : t('fieldMap.keyValue', said)}</li>
      {hasExcluded && <li>{t('fieldMap.keyExcluded')}</li>}
      {hasMissing && <li>{t('fieldMap.keyMissing')}</li>}
    </ul>
  );
}

function PlotTable({
  plots,
  unit,
  decimals,
}: {
  plots: readonly PlacedPlot[];
  unit: string;
  decimals: number;
}) {
  const { t } = useTranslation('drawings');
  const format = useFormat();
  const none = '–';
  const stateWords = (plot: PlotView) =>
    plot.excludedReason === null
      ? t(`fieldMap.${stateOfPlot(plot)}`)
      : t('fieldMap.excludedBecause', { reason: plot.excludedReason });
  const columns: Column<PlacedPlot>[] = [
    { id: 'plot', header: t('fieldMap.plot'), cell: (plot) => plot.plotNumber },
    { id: 'row', header: t('fieldMap.row'), align: 'end', cell: (plot) => String(plot.row) },
    { id: 'col', header: t('fieldMap.column'), align: 'end', cell: (plot) => String(plot.col) },
    { id: 'entry', header: t('fieldMap.entry'), cell: (plot) => plot.entryLabel },
    {
      id: 'value',
      header: t('fieldMap.value'),
      align: 'end',
      cell: (plot) => (plot.value === null ? none : format.quantity(plot.value, unit, { decimals })),
    },
    {
      id: 'residual',
      header: t('fieldMap.residual'),
      align: 'end',
      cell: (plot) => (plot.residual === null ? none : format.gap(plot.residual, unit, decimals)),
    },
    { id: 'state', header: t('fieldMap.state'), cell: stateWords },
  ];
  const ordered = [...plots].sort((a, b) => a.row - b.row || a.col - b.col);
  return (
    <DataTable caption={t('fieldMap.caption')} columns={columns} rows={ordered} rowKey={(plot) => plot.id} />
  );
}
