import { useMemo } from 'react';
import type { BooksResponse } from '../../../shared/books/books.schema.ts';
import { type BooksPeriod, booksCsvPath } from '../../api/books.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Section } from './section.tsx';

type PlaceRow = BooksResponse['differences'][number];

/** Each kind of difference by itself, in plain sight, so that none can hide another. */
export function DifferencePlaces({ period, books }: { period: BooksPeriod; books: BooksResponse }) {
  const t = useMessages();
  const format = useFormat();
  const columns = useMemo((): LedgerColumn<PlaceRow>[] => {
    const { massUnit: unit, massFigure } = format;
    const some = (massG: number) => (massG === 0 ? '' : massFigure(massG));
    return [
      { id: 'kind', head: t('books.col.place'), cell: (row) => t(`log.place.${row.kind}`) },
      { id: 'start', head: t('books.col.start'), unit, figure: true, cell: (row) => massFigure(row.startG) },
      { id: 'shown', head: t('books.col.shown'), unit, figure: true, cell: (row) => some(row.shownG) },
      { id: 'settled', head: t('books.col.settled'), unit, figure: true, cell: (row) => some(row.settledG) },
      { id: 'end', head: t('books.col.end'), unit, figure: true, cell: (row) => massFigure(row.endG) },
    ];
  }, [t, format]);
  if (books.differences.length === 0) return null;
  return (
    <Section
      title={t('books.differencePlaces')}
      lead={t('books.differencePlaces.lead')}
      csv={booksCsvPath('differences', period)}
    >
      <LedgerTable
        caption={t('books.differencePlaces')}
        columns={columns}
        rows={books.differences}
        rowId={(row) => row.kind}
      />
    </Section>
  );
}
