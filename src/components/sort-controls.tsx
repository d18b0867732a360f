import { useTranslation } from 'react-i18next';
import { Button } from './button.tsx';
import { Field } from './field.tsx';
import { Select } from './select.tsx';

export type SortState = { columnId: string; isDescending: boolean };

type SortHeadingProps = {
  words: string;
  /** Of this column; null while another one orders the rows. */
  direction: 'ascending' | 'descending' | null;
  onSort: () => void;
  className?: string;
};

/** The heading of a column that orders the rows when pressed; the cell around it carries `aria-sort`. */
export function SortHeading({ words, direction, onSort, className = '' }: SortHeadingProps) {
  const { t } = useTranslation('common');
  return (
    <button
      type="button"
      title={t('table.sort')}
      className={`tap-target -mx-1 px-1 font-semibold ${direction === null ? '' : 'text-ink'} ${className}`}
      onClick={onSort}
    >
      {words}{' '}
      <span aria-hidden="true" className={`print:hidden ${direction === null ? 'opacity-50' : ''}`}>
        {direction === null ? '↕' : direction === 'descending' ? '▼' : '▲'}
      </span>
    </button>
  );
}

type SortChooserProps = {
  columns: readonly { id: string; header: string }[];
  sort: SortState | undefined;
  onSort: (sort: SortState) => void;
  className?: string;
};

/** Takes the place of the headings where they are not in view: on a table that has turned into cards. */
export function SortChooser({ columns, sort, onSort, className = '' }: SortChooserProps) {
  const { t } = useTranslation('common');
  return (
    <div className={`items-end gap-3 print:hidden ${className}`}>
      <Field label={t('table.sortBy')} className="grow">
        <Select
          placeholder={t('table.unsorted')}
          value={sort?.columnId ?? ''}
          onChange={(event) => onSort({ columnId: event.target.value, isDescending: false })}
          options={columns.map(({ id, header }) => ({ value: id, label: header }))}
        />
      </Field>
      {sort && sort.columnId !== '' && (
        <Button onClick={() => onSort({ ...sort, isDescending: !sort.isDescending })}>
          {sort.isDescending ? t('table.descending') : t('table.ascending')}
        </Button>
      )}
    </div>
  );
}
