import { useTranslation } from 'react-i18next';
import type { SpatialModelView } from '#shared/trial.ts';
import { decimalsOfSquares } from './analysis-decimals.ts';
import { DataTable, type Column } from './data-table.tsx';
import { useFormat } from './use-format.ts';

type SpatialModelsProps = { models: readonly SpatialModelView[]; unit: string; decimals: number };

/** Entries whose change of place is told in the sentence; the table has them all. */
const mostMovers = 5;

/** The design's model and those that follow a trend across the field, side by side: fit, LSD, and who changes places. */
export function SpatialModels({ models, unit, decimals }: SpatialModelsProps) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  if (models.length < 2) return null;
  const columns: Column<SpatialModelView>[] = [
    { id: 'model', header: t('spatial.model'), cell: (model) => t(`spatial.${model.code}`) },
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
      <TrendVerdict models={models} unit={unit} decimals={decimals} />
      <RankTable models={models} unit={unit} decimals={decimals} />
    </section>
  );
}

/** What the best model of a trend changes, in sentences: LSD and places; or that none fits better. */
function TrendVerdict({ models, unit, decimals }: SpatialModelsProps) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const [design, ...others] = models;
  const best = [...others].sort((a, b) => a.aic - b.aic)[0];
  if (!design || !best) return null;
  const hasPlugIn = others.some(({ code }) => code === 'autoregressive');
  const said = {
    model: sentenceCase(t(`spatial.${best.code}`)),
    difference: format.number(design.aic - best.aic, { decimals: 1 }),
  };
  const quantity = (value: number) => format.quantity(value, unit, { decimals });
  return (
    <div className="flex max-w-prose flex-col gap-2">
      {best.aic >= design.aic ? (
        <p>{t('spatial.noBetter')}</p>
      ) : (
        <p>
          {design.lsd === null || best.lsd === null
            ? t('spatial.betterNoLsd', said)
            : t('spatial.better', { ...said, lsd: quantity(best.lsd), usual: quantity(design.lsd) })}{' '}
          <ChangedPlaces design={design} other={best} />
        </p>
      )}
      {hasPlugIn && <p className="text-sm text-faded">{t('spatial.plugIn')}</p>}
    </div>
  );
}

function ChangedPlaces({ design, other }: { design: SpatialModelView; other: SpatialModelView }) {
  const { t } = useTranslation('analysis');
  const places = new Map(other.means.map(({ entry, rank }) => [entry, rank]));
  const moved = design.means
    .map(({ entry, rank }) => ({ entry, from: rank, to: places.get(entry) ?? rank }))
    .filter(({ from, to }) => from !== to)
    .sort((a, b) => Math.abs(b.to - b.from) - Math.abs(a.to - a.from));
  if (moved.length === 0) return t('spatial.noMoves');
  const told = moved.slice(0, mostMovers).map((move) => t('spatial.move', move));
  return t('spatial.moves', { moves: told.join(', ') + (moved.length > mostMovers ? '…' : '') });
}

function sentenceCase(words: string): string {
  return words.charAt(0).toLocaleUpperCase() + words.slice(1);
}

function RankTable({ models, unit, decimals }: SpatialModelsProps) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const entries = models[0]?.means.map((mean) => mean.entry) ?? [];
  const meanOf = (model: SpatialModelView, entry: string) => model.means.find((mean) => mean.entry === entry);
  const columns: Column<string>[] = [
    { id: 'entry', header: t('ordinal.entry'), cell: (entry) => entry, sortValue: (entry) => entry },
    ...models.map((model): Column<string> => ({
      id: model.code,
      header: t(`spatial.short.${model.code}`),
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
