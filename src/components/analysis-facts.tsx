import { useTranslation } from 'react-i18next';
import type { TrialAnalysisView } from '#shared/trial.ts';
import { FactRow, type Fact } from './fact-row.tsx';
import { useFormat } from './use-format.ts';

/** Power at which `detectable` is reckoned by the engine. */
const power = 0.8;

type AnalysisFactsProps = { analysis: TrialAnalysisView; unit: string; decimals: number };

/** The figures that stand for a trial, in one line; those it does not have are left out. */
export function AnalysisFacts({ analysis, unit, decimals }: AnalysisFactsProps) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const quantity = (value: number) => format.quantity(value, unit, { decimals });
  const facts: (Fact | null)[] = [
    analysis.lsd && {
      id: 'lsd',
      label: t('facts.lsd', { alpha: format.percent(analysis.alpha * 100) }),
      value: quantity(analysis.lsd.mean),
    },
    analysis.cvPercent === null
      ? null
      : { id: 'cv', label: t('facts.cv'), value: format.percent(analysis.cvPercent, { decimals: 1 }) },
    analysis.grandMean === null
      ? null
      : { id: 'mean', label: t('facts.mean'), value: quantity(analysis.grandMean) },
    analysis.residualDf === null
      ? null
      : {
          id: 'error-df',
          label: t('facts.errorDf'),
          value: format.number(analysis.residualDf, {
            decimals: Number.isInteger(analysis.residualDf) ? 0 : 1,
          }),
        },
    analysis.plotsTotal === 0
      ? null
      : {
          id: 'plots',
          label: t('facts.plots'),
          value: t('facts.plotsOf', {
            used: format.number(analysis.plotsUsed),
            total: format.number(analysis.plotsTotal),
          }),
        },
    analysis.detectable === null
      ? null
      : {
          id: 'detectable',
          label: t('facts.detectable', { power: format.percent(power * 100) }),
          value: quantity(analysis.detectable),
        },
    analysis.method && { id: 'method', label: t('facts.method'), value: t(`method.${analysis.method}`) },
  ];
  return <FactRow facts={facts.filter((fact) => fact !== null)} />;
}
