import type { UseInfiniteQueryResult, UseQueryResult } from '@tanstack/react-query';
import type { To } from 'react-router-dom';
import { useMessages } from '../../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../../ui/ledger-table.tsx';
import { Failed } from '../../../ui/notice.tsx';

interface Props<Row> {
  name: string;
  query: UseQueryResult<unknown> | UseInfiniteQueryResult<unknown>;
  rows: readonly Row[];
  columns: readonly LedgerColumn<Row>[];
  rowId: (row: Row) => string;
  to?: (row: Row) => To;
}

/** One table of the books: rows on their way, none, an error, or more to ask for. */
export function BookTable<Row extends object>({ name, query, rows, columns, rowId, to }: Props<Row>) {
  const t = useMessages();
  if (query.isError && rows.length === 0) {
    return (
      <div className="pt-3">
        <Failed error={query.error} onRetry={() => void query.refetch()} />
      </div>
    );
  }
  if (!query.isPending && rows.length === 0) return <p className="py-3">{t(`books.table.${name}.none`)}</p>;
  return (
    <LedgerTable
      caption={t(`books.table.${name}`)}
      columns={columns}
      rows={rows}
      rowId={rowId}
      loading={query.isPending}
      {...(to ? { to } : {})}
      {...('fetchNextPage' in query
        ? {
            more: {
              has: query.hasNextPage,
              loading: query.isFetchingNextPage,
              load: () => void query.fetchNextPage(),
            },
          }
        : {})}
    />
  );
}
