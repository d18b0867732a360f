import { useTranslation } from 'react-i18next';
import type { TrialVersionLine } from '#shared/trial.ts';
import { DataTable, type Column } from './data-table.tsx';
import { useFormat } from './use-format.ts';

/** So much of a hash tells two versions apart by eye; the whole stands in its title. */
const shownHash = 12;

/** Who did what, when and why: every version of a trial, newest first. */
export function VersionHistory({ versions }: { versions: readonly TrialVersionLine[] }) {
  const { t } = useTranslation('trials');
  const format = useFormat();
  if (versions.length === 0) return <p className="text-faded">{t('page.noHistory')}</p>;
  const columns: Column<TrialVersionLine>[] = [
    {
      id: 'version',
      header: t('page.column.version'),
      cell: (line) => t('page.versionNumber', { version: line.number }),
    },
    { id: 'action', header: t('page.column.action'), cell: (line) => t(`page.action.${line.action}`) },
    { id: 'at', header: t('page.column.at'), cell: (line) => format.dateTime(line.at) },
    {
      id: 'author',
      header: t('page.column.author'),
      cell: (line) => line.authorName ?? t('page.unknownAuthor'),
    },
    { id: 'reason', header: t('page.column.reason'), cell: (line) => line.reason },
    {
      id: 'hash',
      header: t('page.column.hash'),
      cell: (line) => (
        <code title={line.sha256} className="text-sm">
          {line.sha256.slice(0, shownHash)}
        </code>
      ),
    },
  ];
  return (
    <DataTable
      caption={t('page.history')}
      columns={columns}
      rows={versions}
      rowKey={(line) => String(line.number)}
    />
  );
}
