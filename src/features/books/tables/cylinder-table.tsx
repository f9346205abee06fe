import { useInfiniteQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { CylinderBook } from '../../../../shared/books/books.schema.ts';
import { type BooksPeriod, bookQueries } from '../../../api/books.ts';
import { rowsOf } from '../../../api/page.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import type { LedgerColumn } from '../../../ui/ledger-table.tsx';
import { lastDayOf } from '../books-period.ts';
import { BookTable } from './book-table.tsx';

/** By cylinder; each leads to its statement over the same months. */
export function CylinderTable({ period }: { period: BooksPeriod }) {
  const t = useMessages();
  const format = useFormat();
  const query = useInfiniteQuery(bookQueries.cylinders(period));
  const columns = useMemo((): LedgerColumn<CylinderBook>[] => {
    const { massUnit: unit, massFigure } = format;
    const some = (massG: number) => (massG === 0 ? '' : massFigure(massG));
    return [
      { id: 'tag', head: t('books.col.cylinder'), cell: (row) => <span className="font-[600]">{row.tag}</span> },
      { id: 'refrigerant', head: t('books.col.refrigerant'), cell: (row) => row.refrigerant },
      { id: 'start', head: t('books.col.start'), unit, figure: true, cell: (row) => massFigure(row.startG) },
      { id: 'in', head: t('books.col.in'), unit, figure: true, cell: (row) => some(row.inG) },
      { id: 'out', head: t('books.col.out'), unit, figure: true, cell: (row) => some(row.outG) },
      {
        id: 'difference',
        head: t('books.col.difference'),
        unit,
        figure: true,
        cell: (row) => some(row.differenceG),
      },
      { id: 'end', head: t('books.col.end'), unit, figure: true, cell: (row) => massFigure(row.endG) },
      { id: 'held', head: t('books.col.heldBy'), cell: (row) => row.heldByName ?? '', quiet: true },
    ];
  }, [t, format]);
  return (
    <BookTable
      name="cylinders"
      query={query}
      rows={rowsOf(query.data)}
      columns={columns}
      rowId={(row) => `${row.cylinderId} ${row.refrigerant}`}
      to={(row) => `/cylinders/${row.cylinderId}/statement?from=${period.from}-01&to=${lastDayOf(period.to)}`}
    />
  );
}
