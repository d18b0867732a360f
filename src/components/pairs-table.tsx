import { useState } from 'react';
import { useTranslation } from 'react-i18next';
import type { PairGap, TrialAnalysisView } from '#shared/trial.ts';
import { Button } from './button.tsx';
import { DataTable, type Column } from './data-table.tsx';
import { Field } from './field.tsx';
import { Select } from './select.tsx';
import { useFormat } from './use-format.ts';

/** Rows shown at first: a trial of thirty entries has 435 pairs. */
const firstRows = 20;

type PairsTableProps = {
  analysis: TrialAnalysisView;
  unit: string;
  decimals: number;
  /** Pairs with this entry only; all where null. */
  entry: string | null;
  onEntry: (entry: string | null) => void;
};

/** A pair turned so that the named entry, or else the higher one, stands first. */
function turnPair(gap: PairGap, entry: string | null): PairGap {
  const isTurned = entry === null ? (gap.estimate ?? 0) < 0 : gap.b === entry;
  if (!isTurned) return gap;
  return { ...gap, a: gap.b, b: gap.a, estimate: gap.estimate === null ? null : -gap.estimate };
}

/** Every gap with its own LSD and p, sortable; pairs of one variety on demand. */
export function PairsTable({ analysis, unit, decimals, entry, onEntry }: PairsTableProps) {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const [isWhole, setWhole] = useState(false);
  const columns = usePairColumns(analysis, unit, decimals, analysis.best.length === 0);
  const names = analysis.means.map((mean) => mean.entry);
  const pairs = analysis.gaps
    .filter((gap) => entry === null || gap.a === entry || gap.b === entry)
    .map((gap) => turnPair(gap, entry))
    .sort((x, y) => (y.estimate ?? -Infinity) - (x.estimate ?? -Infinity));
  const shown = isWhole ? pairs : pairs.slice(0, firstRows);
  const hidden = pairs.length - shown.length;
  return (
    <section className="flex flex-col gap-3">
      <h2>{t('pairs.title')}</h2>
      <p className="max-w-prose text-faded">
        {t('pairs.lead', { alpha: format.percent(analysis.alpha * 100) })}
      </p>
      <Field label={t('pairs.filter')} className="max-w-xs">
        <Select
          value={entry ?? ''}
          onChange={(event) => onEntry(event.target.value === '' ? null : event.target.value)}
          placeholder={t('pairs.all')}
          options={names.map((name) => ({ value: name, label: name }))}
        />
      </Field>
      <DataTable
        caption={t('pairs.caption')}
        columns={columns}
        rows={shown}
        rowKey={(gap) => `${gap.a}\n${gap.b}`}
      />
      {hidden > 0 && (
        <Button tone="quiet" className="self-start" onClick={() => setWhole(true)}>
          {t('pairs.more', { count: hidden })}
        </Button>
      )}
    </section>
  );
}

/**
 * Columns of a table of pairs. Under the comparison with the best no pair has a p: the columns that judge are left out.
 */
export function usePairColumns(
  analysis: Pick<TrialAnalysisView, 'alpha' | 'comparison'>,
  unit: string,
  decimals: number,
  hasJudgement = true,
): Column<PairGap>[] {
  const { t } = useTranslation('analysis');
  const format = useFormat();
  const quantity = (value: number | null) =>
    value === null ? '–' : format.quantity(value, unit, { decimals });
  const isApart = (gap: PairGap) => gap.p !== null && gap.p < analysis.alpha;
  const columns: Column<PairGap>[] = [
    {
      id: 'pair',
      header: t('pairs.pair'),
      cell: ({ a, b }) => t('pairs.pairName', { a, b }),
      sortValue: ({ a, b }) => `${a} ${b}`,
    },
    {
      id: 'gap',
      header: t('pairs.gap'),
      align: 'end',
      cell: ({ estimate }) => (estimate === null ? '–' : format.gap(estimate, unit, decimals)),
      sortValue: ({ estimate }) => estimate,
    },
    {
      id: 'se',
      header: t('pairs.se'),
      align: 'end',
      cell: ({ se }) => (se === null ? '–' : format.quantity(se, unit, { decimals: decimals + 1 })),
      sortValue: ({ se }) => se,
    },
    {
      id: 'lsd',
      header: t('pairs.lsd'),
      align: 'end',
      cell: ({ lsd }) => quantity(lsd),
      sortValue: ({ lsd }) => lsd,
    },
  ];
  const judging: Column<PairGap>[] = [
    {
      id: 'p',
      header: t('pairs.p', { comparison: t(`comparison.${analysis.comparison}`) }),
      align: 'end',
      cell: ({ p }) => (p === null ? '–' : format.pValue(p)),
      sortValue: ({ p }) => p,
    },
    {
      id: 'apart',
      header: t('pairs.apart'),
      cell: (gap) => (gap.p === null ? '–' : isApart(gap) ? t('pairs.yes') : t('pairs.no')),
      sortValue: (gap) => (gap.p === null ? null : Number(!isApart(gap))),
    },
  ];
  return hasJudgement ? [...columns, ...judging] : columns;
}
