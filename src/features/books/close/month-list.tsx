import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { PeriodRow } from '../../../../shared/periods/periods.schema.ts';
import { periodQueries } from '../../../api/periods.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { Disclosure } from '../../../ui/disclosure.tsx';
import { type LedgerColumn, LedgerTable } from '../../../ui/ledger-table.tsx';
import { longMonth } from '../book-words.ts';

/** Every month, whether it is closed, and who signed it off. */
export function MonthList({ here }: { here: string }) {
  const t = useMessages();
  const format = useFormat();
  const { data } = useQuery(periodQueries.list());
  const zone = data?.timeZone;
  const columns = useMemo(
    (): LedgerColumn<PeriodRow>[] => [
      {
        id: 'month',
        head: t('books.col.month'),
        cell: (row) => (
          <span className={row.month === here ? 'font-[680]' : ''}>{longMonth(format.locale, row.month)}</span>
        ),
      },
      { id: 'state', head: t('books.col.state'), cell: (row) => t(`books.state.${row.state}`) },
      { id: 'entries', head: t('books.col.entries'), figure: true, cell: (row) => format.number(row.entryCount) },
      { id: 'by', head: t('books.closed.by'), cell: (row) => row.closedByName ?? '' },
      {
        id: 'at',
        head: t('books.closed.at'),
        cell: (row) => (row.closedAt ? format.longDateTime(row.closedAt, zone) : ''),
        quiet: true,
      },
    ],
    [t, format, zone, here],
  );
  if (!data) return null;
  return (
    <div className="border-t border-rule">
      <Disclosure title={t('books.months')} summary={t('books.months.count', { count: data.items.length })}>
        <LedgerTable
          caption={t('books.months')}
          columns={columns}
          rows={data.items}
          rowId={(row) => row.month}
          to={(row) => `/books/close/${row.month}`}
        />
      </Disclosure>
    </div>
  );
}
