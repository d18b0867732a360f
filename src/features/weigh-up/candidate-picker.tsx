import type { ReactNode } from 'react';
import { useTranslation } from 'react-i18next';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { VerdictMark } from '#src/components/beam.tsx';
import { Checkbox } from '#src/components/checkbox.tsx';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useUrlPatch } from '#src/url-state.ts';
import { mostCandidates } from './question-draft.ts';

const unit = 't/ha';

type CandidatePickerProps = {
  candidates: readonly CandidateResult[];
  chosenIds: readonly string[];
  currentName: string;
};

/** The candidates with their verdicts already there; one to eight are kept, in the order in which they were chosen. */
export function CandidatePicker({ candidates, chosenIds, currentName }: CandidatePickerProps) {
  const { t } = useTranslation('weigh-up');
  const patch = useUrlPatch();
  const choose = (id: string, isChosen: boolean) => {
    const next = isChosen ? [...chosenIds, id] : chosenIds.filter((chosen) => chosen !== id);
    patch({ candidates: next.join(',') });
  };
  const isFull = chosenIds.length >= mostCandidates;
  const columns = useCandidateColumns((candidate) => (
    <Checkbox
      label={candidate.varietyName}
      className="-my-2"
      checked={chosenIds.includes(candidate.varietyId)}
      disabled={isFull && !chosenIds.includes(candidate.varietyId)}
      onChange={(event) => choose(candidate.varietyId, event.target.checked)}
    />
  ));
  return (
    <>
      <p role="status" className="text-sm text-faded">
        {t('new.chosen', { count: chosenIds.length })}
        {isFull && ` · ${t('new.tooMany')}`}
      </p>
      <DataTable
        caption={t('new.caption', { current: currentName })}
        columns={columns}
        rows={candidates}
        rowKey={(candidate) => candidate.varietyId}
      />
      <p className="max-w-prose text-sm text-faded">{t('new.listNote')}</p>
    </>
  );
}

function useCandidateColumns(
  nameCandidate: (candidate: CandidateResult) => ReactNode,
): Column<CandidateResult>[] {
  const { t } = useTranslation(['weigh-up', 'common']);
  const format = useFormat();
  return [
    {
      id: 'candidate',
      header: t('new.column.candidate'),
      cell: nameCandidate,
      sortValue: (candidate) => candidate.varietyName,
    },
    {
      id: 'gap',
      header: t('new.column.gap'),
      align: 'end',
      cell: ({ gap }) =>
        gap === null ? t('new.noGap') : format.gap(gap.estimate, unit, format.decimals(gap.se, unit)),
      sortValue: ({ gap }) => gap?.estimate ?? null,
    },
    {
      id: 'verdict',
      header: t('new.column.verdict'),
      cell: ({ verdict }) => <VerdictMark verdict={verdict} className="text-sm" />,
      sortValue: ({ verdict }) => t(`common:verdict.${verdict}`),
    },
    {
      id: 'site-years',
      header: t('new.column.siteYears'),
      align: 'end',
      cell: ({ siteYears }) => format.number(siteYears),
      sortValue: ({ siteYears }) => siteYears,
    },
    {
      id: 'money',
      header: t('new.column.money'),
      align: 'end',
      cell: ({ money, verdict }) =>
        money?.chancePays === null || money === null || verdict === 'thin'
          ? '–'
          : format.chance(money.chancePays),
      sortValue: ({ money, verdict }) => (verdict === 'thin' ? null : (money?.chancePays ?? null)),
    },
    {
      id: 'cautions',
      header: t('new.column.cautions'),
      align: 'end',
      cell: ({ cautions }) => format.number(cautions.length),
      sortValue: ({ cautions }) => cautions.length,
    },
  ];
}
