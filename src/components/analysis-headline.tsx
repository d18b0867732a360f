import { useTranslation } from 'react-i18next';
import { sayFrequency } from '#shared/natural-frequency.ts';
import type { TrialAnalysisView } from '#shared/trial.ts';
import { useFormat } from './use-format.ts';

/** What the means belong to: the entries, or in a split plot its sub factor. */
const entryTerms: ReadonlySet<string> = new Set(['entry', 'sub']);

type AnalysisHeadlineProps = { analysis: TrialAnalysisView; unit: string; decimals: number };

/** What the trial can and cannot say, in sentences, before any figure. */
export function AnalysisHeadline({ analysis, unit, decimals }: AnalysisHeadlineProps) {
  const { t } = useTranslation('analysis');
  if (analysis.kind === 'none') return null;
  if (analysis.kind === 'ordinal') return <p className="max-w-prose text-lg">{t('headline.ordinal')}</p>;
  return (
    <p className="max-w-prose text-lg md:text-xl">
      <strong className="font-bold">
        <LeastDifference analysis={analysis} unit={unit} decimals={decimals} />
      </strong>{' '}
      <PairCount analysis={analysis} /> <IfAllEqual analysis={analysis} />
      {analysis.kind === 'summary' && <> {t('headline.summary')}</>}
    </p>
  );
}

function LeastDifference({ analysis, unit, decimals }: AnalysisHeadlineProps) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  if (analysis.lsd === null) return t('headline.noLsd');
  const { mean, min, max } = analysis.lsd;
  const [lsd, low, high] = [mean, min, max].map((value) => format.quantity(value, unit, { decimals }));
  return low === high
    ? t('headline.tells', { lsd })
    : t('headline.tellsOnAverage', { lsd, min: format.number(min, { decimals }), max: high });
}

function PairCount({ analysis }: { analysis: TrialAnalysisView }) {
  const { t } = useTranslation('analysis');
  const { pairsDifferent: different, pairsTotal: count, comparison } = analysis;
  if (analysis.lsd === null || count === 0) return null;
  if (comparison !== 'lsd') {
    return t('headline.pairsUnder', {
      comparison: t(`comparison.${comparison}`),
      different,
      count,
    });
  }
  return different === 0
    ? t('headline.noneDiffer', { total: count })
    : t('headline.pairs', { different, count });
}

/** How often equal entries would show an F this large: the p-value as a count that a person can picture. */
function IfAllEqual({ analysis }: { analysis: TrialAnalysisView }) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const p = analysis.anova.find((row) => entryTerms.has(row.term))?.p ?? null;
  if (p === null) return null;
  const { key, count } = sayFrequency(p);
  return t(`headline.ifEqual.${key}`, {
    entries: format.number(analysis.means.length),
    number: format.number(count),
  });
}
