import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import type { PersonBook } from '../../../../shared/books/books.schema.ts';
import { type BooksPeriod, bookQueries } from '../../../api/books.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import type { LedgerColumn } from '../../../ui/ledger-table.tsx';
import { BookTable } from './book-table.tsx';

/** By whom and van: what was recorded, what is held now, what differed in these hands. */
export function PeopleTable({ period }: { period: BooksPeriod }) {
  const t = useMessages();
  const format = useFormat();
  const query = useQuery(bookQueries.people(period));
  const columns = useMemo((): LedgerColumn<PersonBook>[] => {
    const { massUnit: unit, massFigure, number } = format;
    const some = (massG: number) => (massG === 0 ? '' : massFigure(massG));
    return [
      { id: 'name', head: t('books.col.person'), cell: (row) => <span className="font-[600]">{row.name}</span> },
      { id: 'van', head: t('books.col.van'), cell: (row) => row.van ?? '' },
      {
        id: 'charged',
        head: t('books.col.charged'),
        unit,
        figure: true,
        cell: (row) => some(row.chargedG),
      },
      {
        id: 'beyond',
        head: t('books.col.beyond'),
        figure: true,
        cell: (row) => (row.chargedBeyondCount === 0 ? '' : number(row.chargedBeyondCount)),
      },
      { id: 'shared', head: t('books.col.shared'), unit, figure: true, cell: (row) => some(row.sharedG) },
      { id: 'into', head: t('books.col.intoUnits'), unit, figure: true, cell: (row) => some(row.intoUnitsG) },
      {
        id: 'recovered',
        head: t('books.col.recovered'),
        unit,
        figure: true,
        cell: (row) => some(row.recoveredG),
      },
      { id: 'hose', head: t('books.col.hose'), unit, figure: true, cell: (row) => some(row.hoseG) },
      { id: 'entries', head: t('books.col.entries'), figure: true, cell: (row) => number(row.entryCount) },
      { id: 'holds', head: t('books.col.holds'), unit, figure: true, cell: (row) => some(row.holdsG) },
      { id: 'cylinders', head: t('books.col.cylinders'), figure: true, cell: (row) => number(row.holdsCylinders) },
    ];
  }, [t, format]);
  return (
    <BookTable
      name="people"
      query={query}
      rows={query.data?.items ?? []}
      columns={columns}
      rowId={(row) => row.personId}
    />
  );
}
