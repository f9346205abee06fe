import { useInfiniteQuery } from '@tanstack/react-query';
import { useMemo, useState } from 'react';
import type { PurchaseRow } from '../../../../shared/books/books.schema.ts';
import { type BooksPeriod, bookQueries } from '../../../api/books.ts';
import { rowsOf } from '../../../api/page.ts';
import { usePermission, useSession } from '../../../api/session.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { Button } from '../../../ui/button.tsx';
import type { LedgerColumn } from '../../../ui/ledger-table.tsx';
import { money } from '../book-words.ts';
import { PriceDialog } from '../price-dialog.tsx';
import { BookTable } from './book-table.tsx';

/** What was bought and at which price; a price is given here, and given again where it was wrong. */
export function PurchaseTable({ period }: { period: BooksPeriod }) {
  const t = useMessages();
  const format = useFormat();
  const settles = usePermission('books:settle');
  const zone = useSession()?.firm.timeZone;
  const query = useInfiniteQuery(bookQueries.purchases(period));
  const currency = query.data?.pages[0]?.currency;
  const [priced, setPriced] = useState<PurchaseRow | null>(null);
  const columns = useMemo((): LedgerColumn<PurchaseRow>[] => {
    const { massUnit: unit, massFigure, locale } = format;
    return [
      { id: 'when', head: t('books.col.bought'), cell: (row) => format.dateTime(row.occurredAt, zone) },
      { id: 'supplier', head: t('books.col.supplier'), cell: (row) => row.supplierName },
      { id: 'refrigerant', head: t('books.col.refrigerant'), cell: (row) => row.refrigerant },
      { id: 'mass', head: t('books.col.mass'), unit, figure: true, cell: (row) => massFigure(row.massG) },
      { id: 'cylinders', head: t('books.col.cylinders'), cell: (row) => row.cylinderTags.join(', '), quiet: true },
      { id: 'paper', head: t('books.col.paper'), cell: (row) => row.documentNumber ?? '', quiet: true },
      {
        id: 'price',
        head: t('books.col.price'),
        figure: true,
        cell: (row) =>
          row.price && currency
            ? `${money(locale, Number(row.price.value), currency)} / ${row.price.per}`
            : t('books.price.none'),
      },
      {
        id: 'cost',
        head: t('books.col.cost'),
        figure: true,
        cell: (row) => (row.cost === null || !currency ? '' : money(locale, row.cost, currency)),
      },
      ...(settles
        ? [
            {
              id: 'give',
              head: t('books.price.give'),
              headHidden: true,
              cell: (row: PurchaseRow) => (
                <Button kind="quiet" className="min-h-10!" onClick={() => setPriced(row)}>
                  {row.price ? t('books.price.change') : t('books.price.give')}{' '}
                  <span className="sr-only">
                    {row.refrigerant}, {row.supplierName}
                  </span>
                </Button>
              ),
            },
          ]
        : []),
    ];
  }, [t, format, currency, settles, zone]);
  return (
    <>
      <BookTable
        name="purchases"
        query={query}
        rows={rowsOf(query.data)}
        columns={columns}
        rowId={(row) => `${row.groupId} ${row.refrigerant}`}
        to={(row) => `/log/${row.groupId}`}
      />
      {priced && currency ? (
        <PriceDialog purchase={priced} currency={currency} onClose={() => setPriced(null)} />
      ) : null}
    </>
  );
}
