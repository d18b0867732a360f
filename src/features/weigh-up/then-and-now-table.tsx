import { useTranslation } from 'react-i18next';
import type { Decision, SaidOfCandidate } from '#shared/decision.ts';
import { VerdictMark } from '#src/components/beam.tsx';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { usePaysIn } from '#src/components/use-seasons.ts';
import type { ThenAndNowRow } from './then-and-now.ts';

/** Decimals at which what was said then and what is said now can be told apart and are both supported. */
const decimals = 2;

/** What was said when it was decided, beside what the evidence says now. */
export function ThenAndNowTable({ decision, rows }: { decision: Decision; rows: readonly ThenAndNowRow[] }) {
  const { t } = useTranslation('record');
  const columns: Column<ThenAndNowRow>[] = [
    {
      id: 'candidate',
      header: t('then.candidate'),
      cell: ({ then }) => (
        <>
          {then.varietyName}
          {then.varietyId === decision.varietyId && (
            <span className="block text-sm font-normal text-faded">{t('then.chosen')}</span>
          )}
        </>
      ),
    },
    { id: 'then', header: t('then.then'), cell: ({ then }) => <Said said={then} /> },
    {
      id: 'now',
      header: t('then.now'),
      cell: ({ now }) => (now === null ? t('then.notNow') : <Said said={now} />),
    },
  ];
  return (
    <DataTable
      caption={t('then.caption', { current: decision.said.currentVarietyName })}
      isCaptionVisible
      columns={columns}
      rows={rows}
      rowKey={({ then }) => then.varietyId}
    />
  );
}

function Said({ said }: { said: SaidOfCandidate }) {
  const { t } = useTranslation('record');
  const format = useFormat();
  const paysIn = usePaysIn();
  const { verdict, estimate, interval, chancePays } = said;
  const gap = (value: number) => format.gap(value, 't/ha', decimals);
  return (
    <span className="flex flex-col gap-0.5 text-left">
      <VerdictMark verdict={verdict} />
      {estimate !== null && interval !== null && verdict !== 'thin' && (
        <span className="text-sm">
          {t('then.gap', {
            gap: gap(estimate),
            low: gap(interval.low),
            high: gap(interval.high),
            level: format.percent(100 * interval.level),
          })}
        </span>
      )}
      {chancePays !== null && <span className="text-sm">{paysIn(chancePays)}</span>}
    </span>
  );
}
