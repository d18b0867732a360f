import { useId, useState } from 'react';
import { useTranslation } from 'react-i18next';
import type { CandidateResult } from '#shared/weigh-up.ts';
import { VerdictMark } from '#src/components/beam.tsx';
import { Button } from '#src/components/button.tsx';
import { Checkbox } from '#src/components/checkbox.tsx';
import { Field } from '#src/components/field.tsx';
import { SortChooser, SortHeading } from '#src/components/sort-controls.tsx';
import { TextInput } from '#src/components/text-input.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { useCautionItems } from '#src/use-caution-items.ts';
import {
  candidateColumns,
  chanceToTell,
  useCandidateTable,
  type CandidateColumn,
  type CandidateTable,
} from './use-candidate-table.ts';

const unit = 't/ha';

/** Figures stand at the end of their column. */
const columnSides: Record<CandidateColumn, string> = {
  candidate: 'text-left',
  gap: 'text-right',
  verdict: 'text-left',
  siteYears: 'text-right',
  money: 'text-right',
  cautions: 'text-right',
};

type CandidateListProps = {
  candidates: readonly CandidateResult[];
  keptIds: readonly string[];
  /** Whether one more can be kept. */
  hasRoom: boolean;
  onKeep: (id: string, isKept: boolean) => void;
  currentName: string;
  aliasesOf: (varietyId: string) => readonly string[];
};

/** Every candidate with its gap, verdict and cautions, searched and sorted; on a phone each is a card. */
export function CandidateList({ candidates, aliasesOf, currentName, ...row }: CandidateListProps) {
  const { t } = useTranslation('weigh-up');
  const table = useCandidateTable(candidates, aliasesOf);
  return (
    <div className="@container">
      <CandidateSearch table={table} total={candidates.length} />
      {/* Roles are repeated because a turned table is laid out as blocks, and browsers then drop its meaning. */}
      <table role="table" className="w-full border-collapse text-left">
        <caption className="sr-only">{t('new.caption', { current: currentName })}</caption>
        <CandidateHeadings table={table} />
        {table.shown.map((candidate) => (
          <CandidateRow key={candidate.varietyId} candidate={candidate} {...row} />
        ))}
      </table>
      {table.shown.length === 0 && (
        <div className="flex flex-wrap items-center gap-x-4 border-b border-rule py-4">
          <p>{t('new.noMatch', { search: table.search })}</p>
          <Button tone="quiet" onClick={() => table.setSearch('')}>
            {t('new.showAll')}
          </Button>
        </div>
      )}
    </div>
  );
}

function CandidateSearch({ table, total }: { table: CandidateTable; total: number }) {
  const { t } = useTranslation('weigh-up');
  const { search, setSearch, shown, sort, setSort } = table;
  return (
    <div className="mb-2 flex flex-wrap items-end gap-x-4 gap-y-2">
      <Field label={t('new.search')} className="grow @xl:max-w-xs">
        <TextInput
          type="search"
          value={search}
          onChange={(event) => setSearch(event.target.value)}
          // Enter here would send the whole form off.
          onKeyDown={(event) => event.key === 'Enter' && event.preventDefault()}
        />
      </Field>
      <SortChooser
        columns={candidateColumns.map((id) => ({ id, header: t(`new.column.${id}`) }))}
        sort={sort}
        onSort={setSort}
        className="flex grow @xl:hidden"
      />
      <p role="status" className="py-2 text-sm text-faded">
        {shown.length < total ? t('new.shown', { count: shown.length, total }) : ''}
      </p>
    </div>
  );
}

function CandidateHeadings({ table: { sort, sortBy } }: { table: CandidateTable }) {
  const { t } = useTranslation('weigh-up');
  return (
    <thead role="rowgroup" className="@max-xl:hidden">
      <tr role="row" className="border-b-2 border-ink">
        {candidateColumns.map((column) => {
          const direction =
            sort?.columnId === column ? (sort.isDescending ? 'descending' : 'ascending') : null;
          return (
            <th
              key={column}
              role="columnheader"
              scope="col"
              aria-sort={direction ?? 'none'}
              className={`px-2 align-bottom text-sm font-semibold text-faded first:pl-0 last:pr-0 ${columnSides[column]}`}
            >
              <SortHeading
                words={t(`new.column.${column}`)}
                direction={direction}
                onSort={() => sortBy(column)}
                className={columnSides[column]}
              />
            </th>
          );
        })}
      </tr>
    </thead>
  );
}

type CandidateRowProps = Pick<CandidateListProps, 'keptIds' | 'hasRoom' | 'onKeep'> & {
  candidate: CandidateResult;
};

/** A card of three lines where the screen is narrow: name and gap, verdict and chance, trials and cautions. */
function CandidateRow({ candidate, keptIds, hasRoom, onKeep }: CandidateRowProps) {
  const { t } = useTranslation(['weigh-up', 'verdicts']);
  const format = useFormat();
  const [isOpen, setOpen] = useState(false);
  const wordsId = useId();
  const { varietyId, varietyName, verdict, siteYears, cautions } = candidate;
  const isKept = keptIds.includes(varietyId);
  const chance = chanceToTell(candidate);
  const space = 'px-2 py-1 @xl:py-2 first:pl-0 last:pr-0 align-top @max-xl:px-0';
  return (
    <tbody role="rowgroup" className="border-b border-rule">
      <tr
        role="row"
        className="@max-xl:grid @max-xl:grid-cols-[minmax(0,1fr)_auto] @max-xl:gap-x-4 @max-xl:py-2"
      >
        <th role="rowheader" scope="row" className={`${space} text-left font-semibold`}>
          <Checkbox
            label={varietyName}
            className="-my-2"
            checked={isKept}
            disabled={!isKept && !hasRoom}
            onChange={(event) => onKeep(varietyId, event.target.checked)}
          />
        </th>
        <td role="cell" className={`${space} text-right`}>
          <GapOfCandidate candidate={candidate} />
        </td>
        <td role="cell" className={space}>
          <VerdictMark verdict={verdict} className="text-sm" />
        </td>
        {/* Where there are no headings, the figures of a card say themselves what they are. */}
        <td
          role="cell"
          className={`${space} text-right @max-xl:row-start-3 @max-xl:self-center @max-xl:text-left @max-xl:text-sm`}
        >
          <span className="@xl:hidden">{t('verdicts:siteYears', { count: siteYears })}</span>
          <span className="@max-xl:hidden">{format.number(siteYears)}</span>
        </td>
        <td role="cell" className={`${space} text-right @max-xl:text-sm`}>
          {chance === null ? (
            <span className="text-sm text-faded">{t('verdicts:cantSay')}</span>
          ) : (
            <>
              <span className="@xl:hidden">{t('weigh-up:new.column.money')} </span>
              {format.chance(chance)}
            </>
          )}
        </td>
        <td role="cell" className={`${space} text-right`}>
          {cautions.length === 0 ? (
            <span className="text-sm text-faded">{t('weigh-up:new.noCautions')}</span>
          ) : (
            <button
              type="button"
              aria-expanded={isOpen}
              aria-controls={wordsId}
              onClick={() => setOpen(!isOpen)}
              className="tap-target -my-2 text-sm text-break-even underline underline-offset-4 hover:decoration-2"
            >
              {t('verdicts:cautionCount', { count: cautions.length })}
              <span className="sr-only"> {varietyName}</span>{' '}
              <span aria-hidden="true">{isOpen ? '▲' : '▼'}</span>
            </button>
          )}
        </td>
      </tr>
      {isOpen && <CautionRow candidate={candidate} wordsId={wordsId} />}
    </tbody>
  );
}

function GapOfCandidate({ candidate: { gap, verdict } }: { candidate: CandidateResult }) {
  const { t } = useTranslation(['weigh-up', 'drawings']);
  const format = useFormat();
  if (gap === null) return <span className="text-faded">{t('weigh-up:new.noGap')}</span>;
  const decimals = format.decimals(gap.se, unit);
  return (
    <>
      <span className="block font-semibold">{format.gap(gap.estimate, unit, decimals)}</span>
      {verdict !== 'thin' && (
        <span className="block text-sm whitespace-nowrap text-faded">
          {t('drawings:gapStrip.fromTo', format.ends(gap.region, unit, decimals))}
        </span>
      )}
    </>
  );
}

function CautionRow({ candidate, wordsId }: { candidate: CandidateResult; wordsId: string }) {
  const { t } = useTranslation('common');
  const cautionItems = useCautionItems();
  return (
    <tr role="row" id={wordsId} className="@max-xl:block">
      <td role="cell" colSpan={candidateColumns.length} className="@max-xl:block">
        <ul className="mb-3 flex flex-col gap-1.5 rounded-lg bg-warning px-4 py-3">
          {cautionItems(candidate.cautions).map(({ id, severity, text }) => (
            <li key={id} className="max-w-prose">
              <strong className="font-semibold">{t(`severity.${severity}`)}</strong> {text}
            </li>
          ))}
        </ul>
      </td>
    </tr>
  );
}
