import { useTranslation } from 'react-i18next';
import type { TrialAnalysisView } from '#shared/trial.ts';
import { decimalsOfSquares } from './analysis-decimals.ts';
import { DataTable, type Column } from './data-table.tsx';
import { useFormat } from './use-format.ts';

type Model = TrialAnalysisView['spatial'][number];
type SpatialModelsProps = { models: readonly Model[]; unit: string; decimals: number };

/** The design's model and those that follow a trend across the field, side by side: fit, LSD, and who changes places. */
export function SpatialModels({ models, unit, decimals }: SpatialModelsProps) {
  const { t, i18n } = useTranslation('analysis');
  const format = useFormat();
  if (models.length < 2) return null;
  const nameOf = (code: string) =>
    // The key was just found to exist; its type cannot be known here.
    i18n.exists(`analysis:spatial.${code}`) ? t(`spatial.${code}` as 'spatial.design') : code;
  const columns: Column<Model>[] = [
    { id: 'model', header: t('spatial.model'), cell: (model) => nameOf(model.code) },
    {
      id: 'aic',
      header: t('spatial.aic'),
      align: 'end',
      cell: (model) => format.number(model.aic, { decimals: 1 }),
    },
    {
      id: 'ms',
      header: t('spatial.residualMs'),
      align: 'end',
      cell: (model) => format.number(model.residualMs, { decimals: decimalsOfSquares(model.residualMs) }),
    },
    {
      id: 'lsd',
      header: t('spatial.lsd'),
      align: 'end',
      cell: (model) => (model.lsd === null ? '–' : format.quantity(model.lsd, unit, { decimals })),
    },
  ];
  return (
    <section className="flex flex-col gap-3">
      <h2>{t('spatial.title')}</h2>
      <p className="max-w-prose text-faded">{t('spatial.lead')}</p>
      <DataTable caption={t('spatial.title')} columns={columns} rows={models} rowKey={({ code }) => code} />
      <RankTable models={models} unit={unit} decimals={decimals} nameOf={nameOf} />
    </section>
  );
}

type RankTableProps = SpatialModelsProps & { nameOf: (code: string) => string };

function RankTable({ models, unit, decimals, nameOf }: RankTableProps) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const entries = models[0]?.means.map((mean) => mean.entry) ?? [];
  const meanOf = (model: Model, entry: string) => model.means.find((mean) => mean.entry === entry);
  const columns: Column<string>[] = [
    { id: 'entry', header: t('ordinal.entry'), cell: (entry) => entry, sortValue: (entry) => entry },
    ...models.map((model): Column<string> => ({
      id: model.code,
      header: nameOf(model.code),
      align: 'end',
      cell: (entry) => {
        const found = meanOf(model, entry);
        if (!found) return '–';
        return t('spatial.rank', {
          mean: format.quantity(found.mean, unit, { decimals }),
          rank: found.rank,
        });
      },
      sortValue: (entry) => meanOf(model, entry)?.rank ?? null,
    })),
  ];
  return (
    <DataTable
      caption={t('spatial.ranksCaption')}
      columns={columns}
      rows={entries}
      rowKey={(entry) => entry}
    />
  );
}
