import { useMemo } from 'react';
import type { BooksResponse } from '../../../../shared/books/books.schema.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../../ui/ledger-table.tsx';
import { placeKindWords } from '../book-words.ts';

type PlaceRow = BooksResponse['places'][number];

/** Every kind of place: its ends all together come to nothing, for each entry takes from one what it gives another. */
export function PlaceTable({ books }: { books: BooksResponse }) {
  const t = useMessages();
  const format = useFormat();
  const columns = useMemo((): LedgerColumn<PlaceRow>[] => {
    const { massUnit: unit, massFigure } = format;
    const some = (massG: number) => (massG === 0 ? '' : massFigure(massG));
    return [
      { id: 'kind', head: t('books.col.place'), cell: (row) => placeKindWords(t, row.kind) },
      { id: 'start', head: t('books.col.start'), unit, figure: true, cell: (row) => massFigure(row.startG) },
      { id: 'in', head: t('books.col.in'), unit, figure: true, cell: (row) => some(row.inG) },
      { id: 'out', head: t('books.col.out'), unit, figure: true, cell: (row) => some(row.outG) },
      { id: 'end', head: t('books.col.end'), unit, figure: true, cell: (row) => massFigure(row.endG) },
    ];
  }, [t, format]);
  return (
    <LedgerTable caption={t('books.table.places')} columns={columns} rows={books.places} rowId={(row) => row.kind} />
  );
}
