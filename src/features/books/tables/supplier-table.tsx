import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { SupplierBook } from '../../../../shared/books/books.schema.ts';
import { type BooksPeriod, bookQueries } from '../../../api/books.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import type { LedgerColumn } from '../../../ui/ledger-table.tsx';
import { money } from '../book-words.ts';
import { BookTable } from './book-table.tsx';

/** By supplier: what was bought and returned, and what was less in it than the paper said. */
export function SupplierTable({ period }: { period: BooksPeriod }) {
  const t = useMessages();
  const format = useFormat();
  const query = useQuery(bookQueries.suppliers(period));
  const currency = query.data?.currency;
  const columns = useMemo((): LedgerColumn<SupplierBook>[] => {
    const { massUnit: unit, massFigure, number, locale } = format;
    const some = (massG: number) => (massG === 0 ? '' : massFigure(massG));
    return [
      { id: 'name', head: t('books.col.supplier'), cell: (row) => <span className="font-[600]">{row.name}</span> },
      { id: 'bought', head: t('books.col.bought'), unit, figure: true, cell: (row) => some(row.boughtG) },
      { id: 'purchases', head: t('books.col.purchases'), figure: true, cell: (row) => number(row.purchaseCount) },
      {
        id: 'short',
        head: t('books.col.shortFill'),
        unit,
        figure: true,
        cell: (row) => some(row.shortFillG),
      },
      { id: 'returned', head: t('books.col.returned'), unit, figure: true, cell: (row) => some(row.returnedG) },
      {
        id: 'paid',
        head: t('books.col.paid'),
        figure: true,
        cell: (row) => (row.paid === 0 || !currency ? '' : money(locale, row.paid, currency)),
      },
      {
        id: 'unpriced',
        head: t('books.col.withoutPrice'),
        unit,
        figure: true,
        cell: (row) => some(row.withoutPriceG),
      },
    ];
  }, [t, format, currency]);
  return (
    <BookTable
      name="suppliers"
      query={query}
      rows={query.data?.items ?? []}
      columns={columns}
      rowId={(row) => row.supplierId}
    />
  );
}
