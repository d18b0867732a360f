import { useMemo, useState } from 'react';
import {
  columnFilteringFeature,
  createFilteredRowModel,
  createSortedRowModel,
  rowSortingFeature,
  tableFeatures,
  useTable,
  type ColumnDef,
  type SortFn,
} from '@tanstack/react-table';
import { useTranslation } from 'react-i18next';
import type { VerdictCode } from '#shared/verdict.ts';
import type { CandidateResult } from '#shared/weigh-up.ts';
import type { SortState } from '#src/components/sort-controls.tsx';
import { useLanguage } from '#src/components/use-language.ts';
import { matchesWords } from './match-words.ts';

/** What the table does: it filters by what is typed and sorts by every column. */
const features = tableFeatures({
  columnFilteringFeature,
  filteredRowModel: createFilteredRowModel(),
  rowSortingFeature,
  sortedRowModel: createSortedRowModel(),
});

export const candidateColumns = ['candidate', 'gap', 'verdict', 'siteYears', 'money', 'cautions'] as const;
export type CandidateColumn = (typeof candidateColumns)[number];

/** Of these the largest stands first when they are pressed once; of words the first of the alphabet. */
const largestFirst: ReadonlySet<CandidateColumn> = new Set(['gap', 'siteYears', 'money', 'cautions']);

/** The chance that a candidate pays, where there is one to tell. */
export function chanceToTell({ money, verdict }: CandidateResult): number | null {
  return verdict === 'thin' ? null : (money?.chancePays ?? null);
}

/** From what is surely good to what cannot be said. */
const verdictRanks: Record<VerdictCode, number> = { ahead: 0, level: 1, open: 2, behind: 3, thin: 4 };

export type CandidateTable = {
  /** Those that match what is typed, in the order asked for. */
  shown: readonly CandidateResult[];
  search: string;
  setSearch: (search: string) => void;
  sort: SortState | undefined;
  setSort: (sort: SortState) => void;
  /** Orders by a column; pressed again it turns round. */
  sortBy: (column: CandidateColumn) => void;
};

/**
 * The list of candidates, searched by name, alias and verdict and sorted by any column.
 * @param candidates as the server lists them, which is the order until another is asked for
 * @param aliasesOf other names of a variety
 */
export function useCandidateTable(
  candidates: readonly CandidateResult[],
  aliasesOf: (varietyId: string) => readonly string[],
): CandidateTable {
  const columns = useCandidateColumns(aliasesOf);
  const [search, setSearch] = useState('');
  const [sort, setSort] = useState<SortState>();
  const data = useMemo(() => [...candidates], [candidates]);
  const state = useMemo(
    () => ({
      columnFilters: search === '' ? [] : [{ id: 'candidate', value: search }],
      sorting: sort && sort.columnId !== '' ? [{ id: sort.columnId, desc: sort.isDescending }] : [],
    }),
    [search, sort],
  );
  const table = useTable({ features, columns, data, state, getRowId: ({ varietyId }) => varietyId });
  const sortBy = (column: CandidateColumn) =>
    setSort({
      columnId: column,
      isDescending: sort?.columnId === column ? !sort.isDescending : largestFirst.has(column),
    });
  return {
    shown: table.getRowModel().rows.map((row) => row.original),
    ...{ search, setSearch, sort, setSort, sortBy },
  };
}

type Columns = ColumnDef<typeof features, CandidateResult>[];

/** What each column sorts by; nothing, which is undefined here, goes last whichever way it is turned. */
function useCandidateColumns(aliasesOf: (varietyId: string) => readonly string[]): Columns {
  const { t } = useTranslation('common');
  const language = useLanguage();
  return useMemo(() => {
    const byWords: SortFn<typeof features, CandidateResult> = (a, b, id) =>
      a
        .getValue<string>(id)
        .localeCompare(b.getValue<string>(id), language, { numeric: true, sensitivity: 'base' });
    const byFigure: SortFn<typeof features, CandidateResult> = (a, b, id) =>
      a.getValue<number>(id) - b.getValue<number>(id);
    const figure = (id: CandidateColumn, of: (candidate: CandidateResult) => number | null | undefined) => ({
      id,
      accessorFn: (candidate: CandidateResult) => of(candidate) ?? undefined,
      sortFn: byFigure,
      sortUndefined: 'last' as const,
    });
    return [
      {
        id: 'candidate',
        accessorFn: ({ varietyName }) => varietyName,
        sortFn: byWords,
        filterFn: ({ original: { varietyId, varietyName, verdict } }, _id, search) =>
          matchesWords(
            [varietyName, ...aliasesOf(varietyId), t(`verdict.${verdict}`)].join(' '),
            String(search),
          ),
      },
      figure('gap', ({ gap }) => gap?.estimate),
      figure('verdict', ({ verdict }) => verdictRanks[verdict]),
      figure('siteYears', ({ siteYears }) => siteYears),
      figure('money', chanceToTell),
      figure('cautions', ({ cautions }) => cautions.length),
    ];
  }, [aliasesOf, t, language]);
}
