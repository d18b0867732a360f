import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import { useSearchParams } from 'react-router-dom';
import type { PlotView, TrialAnalysisView, TrialDetail } from '#shared/trial.ts';
import { decimalsOfAnalysis } from '#src/components/analysis-decimals.ts';
import { DataTable } from '#src/components/data-table.tsx';
import { Field } from '#src/components/field.tsx';
import { FieldMap } from '#src/components/field-map.tsx';
import { Select } from '#src/components/select.tsx';
import { readChoice, useUrlPatch } from '#src/url-state.ts';
import { ExclusionForm } from './exclusion-form.tsx';
import { usePlotColumns } from './plot-columns.tsx';

const views = ['all', 'far', 'out'] as const;
type View = (typeof views)[number];

/** Plots of one view: all as they lie, the farthest residuals first, or those left out. */
export function choosePlots(plots: readonly PlotView[], view: View): PlotView[] {
  if (view === 'out') return plots.filter((plot) => plot.excludedReason !== null);
  if (view === 'all') return [...plots];
  const distance = (plot: PlotView) => Math.abs(plot.residual ?? 0);
  return plots.filter((plot) => plot.residual !== null).sort((a, b) => distance(b) - distance(a));
}

type PlotDeskProps = { trial: TrialDetail; analysis: TrialAnalysisView; unit: string };

/** Leaves plots out with a reason and takes them back; nothing is ever deleted. */
export function PlotDesk({ trial, analysis, unit }: PlotDeskProps) {
  const { t } = useTranslation(['desk', 'analysis']);
  const [search] = useSearchParams();
  const patch = useUrlPatch();
  const [chosenIds, setChosenIds] = useState<readonly string[]>([]);
  const decimals = decimalsOfAnalysis(analysis, unit);
  const columns = usePlotColumns(chosenIds, setChosenIds, unit, decimals);
  const view = readChoice(search, 'plots', views);
  const plots = choosePlots(analysis.plots, view);
  if (analysis.plots.length === 0) return <p>{t('desk:plots.noPlots')}</p>;
  const hasResiduals = analysis.plots.some((plot) => plot.residual !== null);
  return (
    <div className="flex flex-col gap-6">
      <p className="max-w-prose">{t('desk:plots.lead')}</p>
      <FieldMap
        title={hasResiduals ? t('analysis:fieldTitle') : t('analysis:fieldValuesTitle')}
        plots={analysis.plots}
        unit={unit}
        decimals={decimals}
        shade={hasResiduals ? 'residual' : 'value'}
      />
      <ExclusionForm
        trial={trial}
        plots={analysis.plots.filter((plot) => chosenIds.includes(plot.id))}
        onDone={() => setChosenIds([])}
      />
      <Field label={t('desk:plots.filter')} className="max-w-xs">
        <Select
          value={view}
          onChange={(event) => patch({ plots: event.target.value === 'all' ? null : event.target.value })}
          options={views.map((one) => ({ value: one, label: t(`desk:plots.${one}`) }))}
        />
      </Field>
      {plots.length === 0 ? (
        <p>{t('desk:plots.none')}</p>
      ) : (
        <DataTable
          caption={t('desk:plots.caption')}
          columns={columns}
          rows={plots}
          rowKey={(plot) => plot.id}
        />
      )}
    </div>
  );
}
