import { useInfiniteQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import type { JobBook } from '../../../../shared/books/books.schema.ts';
import { type BooksPeriod, bookQueries } from '../../../api/books.ts';
import { exportPath } from '../../../api/exports.ts';
import { rowsOf } from '../../../api/page.ts';
import { usePermission, useSession } from '../../../api/session.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import type { LedgerColumn } from '../../../ui/ledger-table.tsx';
import { money } from '../book-words.ts';
import { BookTable } from './book-table.tsx';

/** By job: what went in and came out, and what of ours went in costs. */
export function JobTable({ period }: { period: BooksPeriod }) {
  const t = useMessages();
  const format = useFormat();
  const query = useInfiniteQuery(bookQueries.jobs(period));
  const takesOut = usePermission('exports:make');
  const zone = useSession()?.firm.timeZone;
  const currency = query.data?.pages[0]?.currency;
  const columns = useMemo((): LedgerColumn<JobBook>[] => {
    const { massUnit: unit, massFigure, locale } = format;
    const some = (massG: number) => (massG === 0 ? '' : massFigure(massG));
    return [
      {
        id: 'job',
        head: t('books.col.job'),
        cell: (row) => <span className="font-[600]">{row.title ?? t(`books.jobKind.${row.kind}`)}</span>,
      },
      { id: 'unit', head: t('books.col.unit'), cell: (row) => row.unitLabel },
      { id: 'customer', head: t('books.col.customer'), cell: (row) => `${row.customerName}, ${row.siteName}` },
      { id: 'into', head: t('books.col.intoUnit'), unit, figure: true, cell: (row) => some(row.intoUnitG) },
      {
        id: 'recovered',
        head: t('books.col.recovered'),
        unit,
        figure: true,
        cell: (row) => some(row.recoveredG),
      },
      { id: 'ours', head: t('books.col.ofOurs'), unit, figure: true, cell: (row) => some(row.chargedG) },
      {
        id: 'cost',
        head: t('books.col.cost'),
        figure: true,
        cell: (row) => (row.cost === null || !currency ? '' : money(locale, row.cost, currency)),
      },
      { id: 'opened', head: t('books.col.opened'), cell: (row) => format.dateTime(row.openedAt, zone), quiet: true },
      ...(takesOut
        ? [
            {
              id: 'record',
              head: t('books.jobRecord'),
              headHidden: true,
              cell: (row: JobBook) => (
                <Link to={exportPath('jobRecord', { jobId: row.jobId })}>
                  {t('books.jobRecord')}
                  <span className="sr-only"> {row.title ?? t(`books.jobKind.${row.kind}`)}</span>
                </Link>
              ),
            },
          ]
        : []),
    ];
  }, [t, format, currency, takesOut, zone]);
  return (
    <BookTable
      name="jobs"
      query={query}
      rows={rowsOf(query.data)}
      columns={columns}
      rowId={(row) => row.jobId}
      to={(row) => `/units/${row.unitId}`}
    />
  );
}
