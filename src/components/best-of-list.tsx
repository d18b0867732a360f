import { memo } from 'react';
import { useTranslation } from 'react-i18next';
import { errorOfStandings, sayStanding, tellBest } from '#shared/best-sentences.ts';
import type { BestOfList, BestStanding } from '#shared/question-kind.ts';
import { DataTable, type Column } from './data-table.tsx';
import { useFormat } from './use-format.ts';
import { useLanguage } from './use-language.ts';

type BestOfListProps = { best: BestOfList; currentId: string; currentName: string };

/** Which of the list can be the best and whether the current variety is one of them, in sentences; the figures fold out. */
export const BestOfListAnswer = memo(function BestOfListAnswer({
  best,
  currentId,
  currentName,
}: BestOfListProps) {
  const { t } = useTranslation(['verdicts']);
  const language = useLanguage();
  const said = tellBest(best, { id: currentId, name: currentName }, language, t);
  return (
    <div className="flex max-w-prose flex-col gap-2 print:contents">
      {said.map((text) => (
        <p key={text}>{text}</p>
      ))}
      {/* On paper the list stands behind the first sheet, with the other tables. */}
      <details className="print:order-2 print:break-inside-avoid">
        <summary className="tap-target flex items-center font-semibold text-action underline underline-offset-4">
          {t('verdicts:best.show')}
        </summary>
        <BestStandings standings={best.standings} />
      </details>
    </div>
  );
});

/** Unit of yield gaps. */
const unit = 't/ha';

function BestStandings({ standings }: { standings: readonly BestStanding[] }) {
  const { t } = useTranslation(['verdicts', 'drawings']);
  const format = useFormat();
  const [first] = standings;
  if (first === undefined) return null;
  const decimals = format.decimals(errorOfStandings(standings), unit);
  const columns: Column<BestStanding>[] = [
    {
      id: 'variety',
      header: t('verdicts:best.variety'),
      cell: ({ varietyName }) => varietyName,
      sortValue: ({ varietyName }) => varietyName,
    },
    {
      id: 'gap',
      header: t('verdicts:best.gap'),
      align: 'end',
      cell: ({ estimate }) => format.gap(estimate, unit, decimals),
      sortValue: ({ estimate }) => estimate,
    },
    {
      id: 'interval',
      header: t('verdicts:best.interval', { level: format.percent(first.interval.level * 100) }),
      align: 'end',
      cell: ({ interval }) => t('drawings:gapStrip.fromTo', format.ends(interval, unit, decimals)),
    },
    {
      id: 'verdict',
      header: t('verdicts:best.verdict'),
      cell: (standing) => sayStanding(standing, t),
    },
  ];
  return (
    <DataTable
      caption={t('verdicts:best.show')}
      columns={columns}
      rows={standings}
      rowKey={({ varietyId }) => varietyId}
    />
  );
}
