import { useId, useMemo, useState, type ReactNode } from 'react';
import { SortChooser, SortHeading, type SortState } from './sort-controls.tsx';
import { useLanguage } from './use-language.ts';

export type Column<Row> = {
  id: string;
  header: string;
  cell: (row: Row) => ReactNode;
  /** Makes the column sortable; null sorts last in both directions. */
  sortValue?: (row: Row) => number | string | null;
  /** Figures stand at the end, so that their decimals line up. */
  align?: 'start' | 'end';
};

type DataTableProps<Row> = {
  /** Says what the table holds; read first by a screen reader. */
  caption: ReactNode;
  isCaptionVisible?: boolean;
  columns: readonly Column<Row>[];
  rows: readonly Row[];
  rowKey: (row: Row) => string;
  /** The column that names the row; the first without it. */
  headColumnId?: string;
  initialSort?: SortState;
  /** On a narrow screen each row becomes a card (`turn`), or the table scrolls inside its own box (`scroll`). */
  whenNarrow?: 'turn' | 'scroll';
};

function compareValues(a: number | string, b: number | string, language: string): number {
  if (typeof a === 'number' && typeof b === 'number') return a - b;
  return String(a).localeCompare(String(b), language, { numeric: true, sensitivity: 'base' });
}

/** Orders rows by a column; rows without a value go last whichever way it is turned. */
export function sortRows<Row>(
  rows: readonly Row[],
  sortValue: (row: Row) => number | string | null,
  isDescending: boolean,
  language: string,
): Row[] {
  return rows
    .map((row) => ({ row, value: sortValue(row) }))
    .sort((a, b) => {
      if (a.value === null || b.value === null) return Number(a.value === null) - Number(b.value === null);
      const order = compareValues(a.value, b.value, language);
      return isDescending ? -order : order;
    })
    .map(({ row }) => row);
}

/** A plain table: sorts by its headings and turns into cards where the screen is narrow. */
export function DataTable<Row>({
  caption,
  isCaptionVisible = false,
  columns,
  rows,
  rowKey,
  headColumnId,
  initialSort,
  whenNarrow = 'turn',
}: DataTableProps<Row>) {
  const language = useLanguage();
  const captionId = useId();
  const [sort, setSort] = useState<SortState | undefined>(initialSort);
  const sortColumn = columns.find((column) => column.id === sort?.columnId);
  const sorted = useMemo(
    () =>
      sort && sortColumn?.sortValue
        ? sortRows(rows, sortColumn.sortValue, sort.isDescending, language)
        : [...rows],
    [rows, sort, sortColumn, language],
  );
  const headId = headColumnId ?? columns[0]?.id;
  const isTurned = whenNarrow === 'turn';
  return (
    // A container of its own keeps a wide table from widening the page around it.
    <div className="@container">
      {isTurned && columns.some((column) => column.sortValue) && (
        <SortChooser
          columns={columns.filter((column) => column.sortValue)}
          sort={sort}
          onSort={setSort}
          className="hidden border-b-2 border-ink pb-3 @max-[44rem]:flex"
        />
      )}
      <div
        className={isTurned ? '' : 'overflow-x-auto'}
        {...(isTurned ? {} : { tabIndex: 0, role: 'group', 'aria-labelledby': captionId })}
      >
        {/* Roles are repeated because a turned table is laid out as blocks, and browsers then drop its meaning. */}
        <table role="table" className={isTurned ? 'data-table turns-to-cards' : 'data-table'}>
          <caption
            id={captionId}
            className={isCaptionVisible ? 'pb-2 text-left text-sm text-faded' : 'sr-only'}
          >
            {caption}
          </caption>
          <thead role="rowgroup">
            <tr role="row">
              {columns.map((column) => (
                <HeadCell key={column.id} column={column} sort={sort} onSort={setSort} />
              ))}
            </tr>
          </thead>
          <tbody role="rowgroup">
            {sorted.map((row) => (
              <tr role="row" key={rowKey(row)}>
                {columns.map((column) => (
                  <BodyCell
                    key={column.id}
                    column={column}
                    row={row}
                    isHead={column.id === headId}
                    isTurned={isTurned}
                  />
                ))}
              </tr>
            ))}
          </tbody>
        </table>
      </div>
    </div>
  );
}

type HeadCellProps<Row> = {
  column: Column<Row>;
  sort: SortState | undefined;
  onSort: (sort: SortState) => void;
};

function HeadCell<Row>({ column, sort, onSort }: HeadCellProps<Row>) {
  const isSorted = sort?.columnId === column.id;
  const side = sideOf(column);
  if (!column.sortValue) {
    return (
      <th role="columnheader" scope="col" className={side}>
        {column.header}
      </th>
    );
  }
  const direction = sort?.isDescending ? 'descending' : 'ascending';
  return (
    <th role="columnheader" scope="col" aria-sort={isSorted ? direction : 'none'} className={side}>
      <SortHeading
        words={column.header}
        direction={isSorted ? direction : null}
        onSort={() => onSort({ columnId: column.id, isDescending: isSorted && !sort.isDescending })}
        className={column.align === 'end' ? 'text-right' : 'text-left'}
      />
    </th>
  );
}

const sideOf = <Row,>({ align }: Column<Row>): 'at-end' | undefined =>
  align === 'end' ? 'at-end' : undefined;

type BodyCellProps<Row> = { column: Column<Row>; row: Row; isHead: boolean; isTurned: boolean };

function BodyCell<Row>({ column, row, isHead, isTurned }: BodyCellProps<Row>) {
  if (isHead) {
    return (
      <th role="rowheader" scope="row" className={sideOf(column)}>
        {column.cell(row)}
      </th>
    );
  }
  return (
    <td role="cell" className={sideOf(column)}>
      {isTurned ? (
        <>
          <span className="cell-name">{column.header}</span>
          <span>{column.cell(row)}</span>
        </>
      ) : (
        column.cell(row)
      )}
    </td>
  );
}
