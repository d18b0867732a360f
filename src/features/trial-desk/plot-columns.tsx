import { useTranslation } from 'react-i18next';
import type { PlotView } from '#shared/trial.ts';
import { Checkbox } from '#src/components/checkbox.tsx';
import type { Column } from '#src/components/data-table.tsx';
import { useFormat } from '#src/components/use-format.ts';

/** Columns of the desk's list of plots; the first chooses a plot. */
export function usePlotColumns(
  chosenIds: readonly string[],
  onChoose: (ids: readonly string[]) => void,
  unit: string,
  decimals: number,
): Column<PlotView>[] {
  const { t } = useTranslation('desk');
  const format = useFormat();
  const toggle = (id: string, isChosen: boolean) =>
    onChoose(isChosen ? [...chosenIds, id] : chosenIds.filter((chosen) => chosen !== id));
  const stateOf = (plot: PlotView) => {
    if (plot.excludedReason !== null) return t('plots.leftOut', { reason: plot.excludedReason });
    return plot.value === null ? t('plots.notMeasured') : t('plots.used');
  };
  return [
    {
      id: 'plot',
      header: t('plots.column.plot'),
      cell: (plot) => (
        <Checkbox
          label={plot.plotNumber}
          className="-my-2"
          aria-label={t('plots.choose', { plot: plot.plotNumber, entry: plot.entryLabel })}
          checked={chosenIds.includes(plot.id)}
          onChange={(event) => toggle(plot.id, event.target.checked)}
        />
      ),
    },
    { id: 'entry', header: t('plots.column.entry'), cell: (plot) => plot.entryLabel },
    {
      id: 'place',
      header: t('plots.column.place'),
      cell: ({ row, col }) => (row === null || col === null ? '–' : t('plots.place', { row, col })),
    },
    { id: 'block', header: t('plots.column.block'), cell: (plot) => plot.block ?? plot.rep ?? '–' },
    {
      id: 'value',
      header: t('plots.column.value'),
      align: 'end',
      cell: ({ value }) => (value === null ? '–' : format.quantity(value, unit, { decimals })),
    },
    {
      id: 'residual',
      header: t('plots.column.residual'),
      align: 'end',
      cell: ({ residual }) => (residual === null ? '–' : format.gap(residual, unit, decimals)),
    },
    { id: 'state', header: t('plots.column.state'), cell: stateOf },
  ];
}
