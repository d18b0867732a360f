import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import type { TrialAnalysisView } from '#shared/trial.ts';
import { decimalsOfAnalysis } from './analysis-decimals.ts';
import { AnalysisFacts } from './analysis-facts.tsx';
import { AnalysisHeadline } from './analysis-headline.tsx';
import { OutcomeList, RecoveredError } from './analysis-notes.tsx';
import { AnovaTable } from './anova-table.tsx';
import { BestTable } from './best-table.tsx';
import { DiagnosticList } from './diagnostic-list.tsx';
import { FactorFamilies, FactorLead } from './factor-families.tsx';
import { FieldMap } from './field-map.tsx';
import { LayoutCheck } from './layout-check.tsx';
import { MeansChart } from './means-chart.tsx';
import { MeansTable } from './means-table.tsx';
import { PairsTable } from './pairs-table.tsx';
import { RatingTable } from './rating-table.tsx';
import { SpatialModels } from './spatial-models.tsx';

type AnalysisViewProps = {
  analysis: TrialAnalysisView;
  traitName: string;
  unit: string;
  /** Letters, factors and models of the field belong to the analysis view of a trial, not to its first reading. */
  hasLetters: boolean;
  /** Pairs with this entry only; without `onEntry` the table of pairs is left out. */
  entry?: string | null;
  onEntry?: (entry: string | null) => void;
  /** Between the facts and the drawings: choices, cautions. */
  children?: ReactNode;
};

/** One trait of one trial, from the sentence to the tables. What the trial does not give is left out, and said. */
export function AnalysisView(props: AnalysisViewProps) {
  const { analysis, traitName, unit, hasLetters, children, entry = null, onEntry } = props;
  const decimals = decimalsOfAnalysis(analysis, unit);
  return (
    <div className="flex flex-col gap-7">
      <AnalysisHeadline analysis={analysis} unit={unit} decimals={decimals} />
      <FactorLead analysis={analysis} />
      {analysis.kind !== 'none' && <AnalysisFacts analysis={analysis} unit={unit} decimals={decimals} />}
      {children}
      <OutcomeList outcomes={analysis.outcomes} />
      <BestTable analysis={analysis} unit={unit} decimals={decimals} />
      <AnalysisDrawings {...props} decimals={decimals} />
      {analysis.kind === 'ordinal' && <RatingTable ratings={analysis.ordinal} traitName={traitName} />}
      <RecoveredError from={analysis.recoveredFrom} />
      <div className="grid gap-7 xl:grid-cols-2">
        <AnovaTable analysis={analysis} traitName={traitName} />
        <div className="flex flex-col gap-7">
          <DiagnosticList diagnostics={analysis.diagnostics} />
          {hasLetters && <LayoutCheck findings={analysis.layout} />}
        </div>
      </div>
      {hasLetters && (
        <>
          <MeansTable analysis={analysis} unit={unit} decimals={decimals} />
          <FactorFamilies analysis={analysis} unit={unit} decimals={decimals} />
          <SpatialModels models={analysis.spatial} unit={unit} decimals={decimals} />
        </>
      )}
      {onEntry && analysis.gaps.length > 0 && (
        <PairsTable analysis={analysis} unit={unit} decimals={decimals} entry={entry} onEntry={onEntry} />
      )}
    </div>
  );
}

function AnalysisDrawings({
  analysis,
  unit,
  hasLetters,
  decimals,
}: AnalysisViewProps & { decimals: number }) {
  const { t } = useTranslation('analysis');
  const means = analysis.means.flatMap((row) => (row.mean === null ? [] : [{ ...row, mean: row.mean }]));
  const hasResiduals = analysis.plots.some((plot) => plot.residual !== null);
  return (
    <div className="grid gap-x-8 gap-y-7 xl:grid-cols-2">
      {means.length > 0 && (
        <div className="min-w-0">
          <MeansChart
            title={analysis.kind === 'summary' ? t('publishedMeansTitle') : t('meansTitle')}
            means={means}
            unit={unit}
            decimals={decimals}
            lsd={analysis.lsd?.mean ?? null}
            alpha={analysis.alpha}
            hasLetters={hasLetters}
          />
        </div>
      )}
      {analysis.plots.length > 0 && (
        <div className="min-w-0">
          <FieldMap
            title={hasResiduals ? t('fieldTitle') : t('fieldValuesTitle')}
            plots={analysis.plots}
            unit={unit}
            decimals={decimals}
            shade={hasResiduals ? 'residual' : 'value'}
          />
        </div>
      )}
    </div>
  );
}
