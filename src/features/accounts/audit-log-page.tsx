import { useInfiniteQuery } from '@tanstack/react-query';
import { useTranslation } from 'react-i18next';
import { Link } from 'react-router-dom';
import type { AuditEvent } from '#shared/account.ts';
import { Button } from '#src/components/button.tsx';
import { DataTable, type Column } from '#src/components/data-table.tsx';
import { EmptyState } from '#src/components/empty-state.tsx';
import { PageHeading } from '#src/components/page-heading.tsx';
import { Skeleton } from '#src/components/skeleton.tsx';
import { useFormat } from '#src/components/use-format.ts';
import { paths } from '#src/paths.ts';
import { QueryErrorState } from '#src/query-error-state.tsx';
import { auditLogQuery } from './account-queries.ts';

/** Who did what and when. */
export function AuditLogPage() {
  const { t } = useTranslation('accounts');
  const log = useInfiniteQuery(auditLogQuery);
  const events = log.data?.pages.flat() ?? [];
  const columns = useEventColumns();
  return (
    <>
      <PageHeading
        title={t('audit.title')}
        above={<Link to={paths.accounts}>{t('title')}</Link>}
        below={t('audit.lead')}
      />
      {log.isPending && <Skeleton lines={8} />}
      {log.isError && <QueryErrorState query={log} />}
      {log.data && events.length === 0 && <EmptyState title={t('audit.empty')} />}
      {events.length > 0 && (
        <DataTable
          caption={t('audit.caption')}
          columns={columns}
          rows={events}
          rowKey={(event) => String(event.id)}
        />
      )}
      {log.hasNextPage && (
        <Button className="mt-4" isBusy={log.isFetchingNextPage} onClick={() => void log.fetchNextPage()}>
          {t('audit.older')}
        </Button>
      )}
      {events.length > 0 && !log.hasNextPage && (
        <p className="mt-4 text-sm text-faded">{t('audit.noOlder')}</p>
      )}
    </>
  );
}

/** Ids and fingerprints say nothing to a reader beyond their first signs. */
const longCode = /^[0-9a-f-]{30,}$/;
const shownCode = 8;

/** One value of an event's detail as text; lists are joined. */
function writeDetail(value: unknown): string {
  if (value === null || value === undefined) return '–';
  if (typeof value === 'string' && longCode.test(value)) return value.slice(0, shownCode);
  if (Array.isArray(value)) return value.map(writeDetail).join(', ');
  return typeof value === 'object' ? JSON.stringify(value) : String(value);
}

function useEventColumns(): Column<AuditEvent>[] {
  const { t, i18n } = useTranslation('accounts');
  const format = useFormat();
  const actionText = (action: string) =>
    // The key was just found to exist; its type cannot be known here.
    i18n.exists(`accounts:audit.actions.${action}`)
      ? t(`audit.actions.${action}` as 'audit.actions.trial.imported')
      : action;
  const detailName = (name: string) =>
    i18n.exists(`accounts:audit.details.${name}`)
      ? // The key was just found to exist; its type cannot be known here.
        t(`audit.details.${name}` as 'audit.details.reason')
      : name;
  const subjectText = (kind: string) =>
    i18n.exists(`accounts:audit.subject.${kind}`)
      ? // The key was just found to exist; its type cannot be known here.
        t(`audit.subject.${kind}` as 'audit.subject.trial')
      : kind;
  return [
    { id: 'at', header: t('audit.column.at'), cell: (event) => format.dateTime(event.at) },
    {
      id: 'actor',
      header: t('audit.column.actor'),
      cell: (event) => event.actorName ?? t('audit.system'),
    },
    { id: 'action', header: t('audit.column.action'), cell: (event) => actionText(event.action) },
    {
      id: 'subject',
      header: t('audit.column.subject'),
      cell: (event) => (
        <>
          {subjectText(event.subjectKind)}{' '}
          <code className="text-sm" title={event.subjectId}>
            {event.subjectId.slice(0, 8)}
          </code>
        </>
      ),
    },
    {
      id: 'detail',
      header: t('audit.column.detail'),
      cell: (event) => (
        <span className="text-sm break-words">
          {Object.entries(event.detail)
            .map(([name, value]) =>
              t('audit.detailOf', { name: detailName(name), value: writeDetail(value) }),
            )
            .join(' · ')}
        </span>
      ),
    },
  ];
}
