import { useTranslation } from 'react-i18next';
import type { AdjustedMean, FactorFamily, PairGap, TrialAnalysisView } from '#shared/trial.ts';
import { useTermName } from './anova-table.tsx';
import { DataTable, type Column } from './data-table.tsx';
import { usePairColumns } from './pairs-table.tsx';
import { useFormat } from './use-format.ts';
import { useLanguage } from './use-language.ts';

/** The factor on the main plots of a split plot, as the engine names its term. */
const mainFactor = 'main';

/** Which factor is which, in words; nothing where the trial has one factor alone. */
export function FactorLead({ analysis }: { analysis: TrialAnalysisView }) {
  const { t } = useTranslation('analysis');
  const list = new Intl.ListFormat(useLanguage(), { type: 'conjunction' });
  const main = analysis.factors.find(({ name }) => name === mainFactor);
  if (analysis.factors.length === 0) return null;
  const levels = (family: FactorFamily) => list.format(family.means.map((mean) => mean.entry));
  const single = analysis.factors.filter(({ name }) => !name.includes(':'));
  return (
    <p className="max-w-prose">
      {main
        ? t('factors.splitPlot', { main: levels(main), count: analysis.means.length })
        : t('factors.factorial', {
            factors: list.format(
              single.map((family) => t('factors.of', { name: family.name, levels: levels(family) })),
            ),
          })}
    </p>
  );
}

type FactorFamiliesProps = { analysis: TrialAnalysisView; unit: string; decimals: number };

/** Means, LSD and gaps of each factor and of their combinations. */
export function FactorFamilies({ analysis, unit, decimals }: FactorFamiliesProps) {
  return analysis.factors.map((family) => (
    <FactorTable key={family.name} family={family} analysis={analysis} unit={unit} decimals={decimals} />
  ));
}

/** A combination reads as its levels side by side: `treated · Quillane`. */
function nameLevel(family: FactorFamily, label: string): string {
  return family.name.includes(':') ? label.split(':').join(' · ') : label;
}

function FactorTable({ family, analysis, unit, decimals }: FactorFamiliesProps & { family: FactorFamily }) {
  const { t } = useTranslation('analysis');
  const factor = useTermName()(family.name);
  const columns = useLevelColumns(family, unit, decimals);
  // Comparisons of entries with a check or the best do not speak of levels: their LSD stands here.
  const isOfEntries = analysis.comparison === 'dunnett' || analysis.comparison === 'best';
  const judged = { alpha: analysis.alpha, comparison: isOfEntries ? ('lsd' as const) : analysis.comparison };
  const pairColumns = usePairColumns(judged, unit, decimals);
  return (
    <section className="flex flex-col gap-3">
      <h2>{t('factors.title', { factor })}</h2>
      <LevelDifference family={family} alpha={analysis.alpha} unit={unit} decimals={decimals} />
      <DataTable
        caption={t('factors.title', { factor })}
        columns={columns}
        rows={family.means}
        rowKey={({ entry }) => entry}
      />
      {family.gaps.length > 0 && (
        <DataTable
          caption={t('factors.pairs', { factor })}
          isCaptionVisible
          columns={pairColumns}
          rows={family.gaps.map((gap) => nameGap(family, gap))}
          rowKey={({ a, b }) => `${a}\n${b}`}
        />
      )}
    </section>
  );
}

/** The pair with its higher level first. */
function nameGap(family: FactorFamily, gap: PairGap): PairGap {
  const [a, b] = [nameLevel(family, gap.a), nameLevel(family, gap.b)];
  if (gap.estimate === null || gap.estimate >= 0) return { ...gap, a, b };
  return { ...gap, a: b, b: a, estimate: -gap.estimate };
}

type LevelDifferenceProps = { family: FactorFamily; alpha: number; unit: string; decimals: number };

function LevelDifference({ family: { lsd }, alpha, unit, decimals }: LevelDifferenceProps) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  if (lsd === null) return <p className="text-faded">{t('factors.noLsd')}</p>;
  const said = { alpha: format.percent(alpha * 100), lsd: format.quantity(lsd.mean, unit, { decimals }) };
  const [min, max] = [format.number(lsd.min, { decimals }), format.quantity(lsd.max, unit, { decimals })];
  const isOne = format.quantity(lsd.min, unit, { decimals }) === max;
  return (
    <p className="max-w-prose text-faded">
      {isOne ? t('factors.lsd', said) : t('factors.lsdOnAverage', { ...said, min, max })}
    </p>
  );
}

function useLevelColumns(family: FactorFamily, unit: string, decimals: number): Column<AdjustedMean>[] {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const quantity = (value: number | null, digits: number) =>
    value === null ? '–' : format.quantity(value, unit, { decimals: digits });
  const columns: Column<AdjustedMean>[] = [
    { id: 'level', header: t('factors.level'), cell: ({ entry }) => nameLevel(family, entry) },
    {
      id: 'plots',
      header: t('meansTable.plots'),
      align: 'end',
      cell: ({ n }) => format.number(n),
      sortValue: ({ n }) => n,
    },
    {
      id: 'mean',
      header: t('meansTable.mean'),
      align: 'end',
      cell: ({ mean }) => quantity(mean, decimals),
      sortValue: ({ mean }) => mean,
    },
    {
      id: 'se',
      header: t('meansTable.se'),
      align: 'end',
      cell: ({ se }) => quantity(se, decimals + 1),
      sortValue: ({ se }) => se,
    },
  ];
  if (family.means.every(({ letters }) => letters === '')) return columns;
  return [...columns, { id: 'letters', header: t('meansTable.letters'), cell: ({ letters }) => letters }];
}
