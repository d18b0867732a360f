import type { RowProblem } from '#shared/trial-desk.ts';

/** Why a row or a whole file is refused; `problems:<reason>` says it and what was expected. */
export const problemReasons = [
  'not-text',
  'empty-file',
  'broken-quotes',
  'no-rows',
  'missing-column',
  'column-twice',
  'named-column-missing',
  'no-value-column',
  'unit-contradicts',
  'unit-doubtful',
  'cell-count',
  'entry-blank',
  'plot-blank',
  'place-blank',
  'trait-unknown',
  'not-a-number',
  'not-finite',
  'mixed-decimals',
  'ambiguous-number',
  'negative-value',
  'outside-scale',
  'not-whole',
  'too-long',
  'duplicate-plot',
  'plot-conflict',
  'position-taken',
  'one-entry',
  'no-values',
] as const;
export type ProblemReason = (typeof problemReasons)[number];

/** Problems listed one by one; beyond them only their number is told. */
const mostListed = 200;
/** Longest piece of a cell that is quoted back. */
const mostQuoted = 80;

/** Collects what is wrong with a file. */
export type ProblemList = {
  add: (
    reason: ProblemReason,
    where: { row?: number; column?: string | null; value?: string | null },
    values?: RowProblem['values'],
  ) => void;
  list: () => RowProblem[];
  total: () => number;
};

export function openProblemList(): ProblemList {
  const listed: RowProblem[] = [];
  let total = 0;
  return {
    add: (reason, { row = 1, column = null, value = null }, values = {}) => {
      total += 1;
      if (listed.length < mostListed)
        listed.push({
          row,
          column,
          value: value === null ? null : value.slice(0, mostQuoted),
          reason,
          values,
        });
    },
    list: () => listed.toSorted((a, b) => a.row - b.row),
    total: () => total,
  };
}
