import { useTranslation } from 'react-i18next';
import type { Trait } from '#shared/catalogue.ts';
import type { UsualEstimate, UsualOfTrait } from '#shared/usual-variance.ts';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { useFormat } from '#src/components/use-format.ts';

const terms = ['site', 'season', 'rest'] as const;
type Term = (typeof terms)[number];

/** A movement that holds now, in the trait's unit. */
type Movement = { term: Term; sd: number; interval: UsualEstimate['intervals']['site'] };

/** An upper bound this many times the estimate says only that the trials set none. */
const unboundedFrom = 10;

type UsualOfTraitProps = { trait: Trait; usual: UsualOfTrait };

/** What holds for one trait now, where it came from, and what held before. */
export function UsualOfTraitView({ trait, usual }: UsualOfTraitProps) {
  const { t } = useTranslation('desk');
  const format = useFormat();
  const [newest, ...earlier] = usual.estimates;
  return (
    <section className="flex flex-col gap-2">
      <h2>{format.name(trait.name)}</h2>
      <p className="max-w-prose">
        {newest ? (
          <EstimateFacts estimate={newest} />
        ) : (
          t(usual.cropDefault ? 'usual.default' : 'usual.noDefault')
        )}
      </p>
      <MovementTable trait={trait} movements={listMovements(usual)} mean={usual.mean} />
      {earlier.length > 0 && <History trait={trait} estimates={earlier} />}
    </section>
  );
}

function listMovements({ estimates: [newest], cropDefault }: UsualOfTrait): Movement[] {
  if (newest) return terms.map((term) => ({ term, sd: newest.sd[term], interval: newest.intervals[term] }));
  return cropDefault ? terms.map((term) => ({ term, sd: cropDefault[term], interval: null })) : [];
}

function EstimateFacts({ estimate }: { estimate: UsualEstimate }) {
  const { t } = useTranslation('desk');
  const format = useFormat();
  const { environments, seasons, entries } = estimate;
  return t('usual.facts', {
    ...{ environments, seasons, entries },
    date: format.date(estimate.estimatedAt),
    who: estimate.estimatedBy ?? t('usual.byCommand'),
  });
}

type MovementTableProps = { trait: Trait; movements: readonly Movement[]; mean: number | null };

function MovementTable({ trait, movements, mean }: MovementTableProps) {
  const { t } = useTranslation('desk');
  const format = useFormat();
  const isEstimated = movements.some(({ interval }) => interval !== null);
  const columns: Column<Movement>[] = [
    { id: 'movement', header: t('usual.column.movement'), cell: ({ term }) => t(`usual.movement.${term}`) },
    {
      id: 'sd',
      header: t('usual.column.sd'),
      align: 'end',
      cell: ({ sd }) => format.quantity(sd, trait.unit, { decimals: 2 }),
    },
    {
      id: 'percent',
      header: t('usual.column.percent'),
      align: 'end',
      cell: ({ sd }) =>
        mean === null || mean <= 0 ? '–' : format.percent((100 * sd) / mean, { decimals: 1 }),
    },
    {
      id: 'interval',
      header: t('usual.column.interval'),
      align: 'end',
      cell: ({ sd, interval }) => {
        if (interval === null) return t('usual.leastShare');
        const write = (bound: number) => format.quantity(bound, trait.unit, { decimals: 2 });
        if (interval.high > unboundedFrom * sd) return t('usual.intervalOpen', { low: write(interval.low) });
        const low = format.number(interval.low, { decimals: 2 });
        return t('usual.interval', { low, high: write(interval.high) });
      },
    },
  ];
  if (movements.length === 0) return null;
  return (
    <DataTable
      caption={t('usual.caption', { trait: format.name(trait.name) })}
      columns={isEstimated ? columns : columns.slice(0, 3)}
      rows={movements}
      rowKey={({ term }) => term}
    />
  );
}

function History({ trait, estimates }: { trait: Trait; estimates: readonly UsualEstimate[] }) {
  const { t } = useTranslation('desk');
  const format = useFormat();
  const write = (sd: number) => format.quantity(sd, trait.unit, { decimals: 2 });
  return (
    <details>
      <summary className="tap-target flex items-center font-semibold text-action underline underline-offset-4">
        {t('usual.history')}
      </summary>
      <ul className="flex flex-col gap-1">
        {estimates.map(({ id, sd, estimatedAt, estimatedBy }) => (
          <li key={id}>
            {t('usual.historyLine', {
              date: format.date(estimatedAt),
              who: estimatedBy ?? t('usual.byCommand'),
              ...{ site: write(sd.site), season: write(sd.season), rest: write(sd.rest) },
            })}
          </li>
        ))}
      </ul>
    </details>
  );
}
