import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import type { BooksResponse } from '../../../shared/books/books.schema.ts';
import type { CameIn, WentOut } from '../../../shared/books/equation.ts';
import type { PlaceKind } from '../../../shared/ledger/place.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { bookMass, partWords } from './book-words.ts';
import { type FlowPart, flowSides } from './flow-parts.ts';

/** What stands at the other end of a part in the log; of the stock itself nothing does. */
const PLACES: Partial<Record<CameIn | WentOut, PlaceKind>> = {
  bought: 'supplier',
  returned: 'supplier',
  recovered: 'unit',
  intoUnits: 'unit',
  opened: 'opening',
  fromCustomers: 'customer',
  toCustomers: 'customer',
  fromContractors: 'otherContractor',
  toContractors: 'otherContractor',
  fromReclaimer: 'reclaimer',
  toReclaimer: 'reclaimer',
  destroyed: 'destroyed',
  lost: 'atmosphere',
  cylinderDifference: 'cylinderDifference',
  supplierShortFill: 'supplierShortFill',
  missing: 'missing',
};

/** Under the picture: the flow that is pointed at, with the way to its entries; and all of them as a table. */
export function FlowReadout({ books, part }: { books: BooksResponse; part: FlowPart | null }) {
  const t = useMessages();
  const format = useFormat();
  return (
    <figcaption>
      <p className="min-h-12 border-t border-rule pt-2.5">
        {part ? (
          <>
            <span className="font-[600]">
              {t('books.flow.reading', {
                part: partWords(t, part),
                mass: format.mass(part.massG),
                percent: format.number((part.massG / books.equation.totalG) * 100, 1),
              })}
            </span>{' '}
            {part.entryCount > 0 ? t('books.flow.entries', { count: part.entryCount }) : null}{' '}
            <ToLog books={books} part={part} />
          </>
        ) : (
          <span className="text-ink-soft">
            {t('books.flow.total', { mass: bookMass(format, books.equation.totalG) })}
          </span>
        )}
      </p>
      <details>
        <summary className="inline-flex min-h-12 items-center text-rest underline decoration-1 underline-offset-[3px]">
          {t('books.asTable')}
        </summary>
        <FlowTable books={books} />
      </details>
    </figcaption>
  );
}

/** The log is narrowed by one month, so only one month leads there. */
function ToLog({ books, part }: { books: BooksResponse; part: FlowPart }) {
  const t = useMessages();
  const place = PLACES[part.part];
  if (!place || books.from !== books.to) return null;
  const search = new URLSearchParams({
    month: books.from,
    place,
    ...(books.refrigerant ? { refrigerant: books.refrigerant } : {}),
  });
  return <Link to={`/log?${search}`}>{t('books.flow.inLog')}</Link>;
}

interface FlowRow extends FlowPart {
  side: 'left' | 'right';
}

function FlowTable({ books }: { books: BooksResponse }) {
  const t = useMessages();
  const format = useFormat();
  const rows = useMemo((): FlowRow[] => {
    const { left, right } = flowSides(books.equation);
    return [
      ...left.map((part) => ({ ...part, side: 'left' as const })),
      ...right.map((part) => ({ ...part, side: 'right' as const })),
    ];
  }, [books.equation]);
  const columns = useMemo(
    (): LedgerColumn<FlowRow>[] => [
      { id: 'part', head: t('books.col.part'), cell: (row) => partWords(t, row) },
      { id: 'side', head: t('books.col.side'), cell: (row) => t(`books.side.${row.side}`), quiet: true },
      {
        id: 'mass',
        head: t('books.col.mass'),
        unit: format.massUnit,
        figure: true,
        cell: (row) => format.massFigure(row.massG),
      },
      {
        id: 'share',
        head: t('books.col.share'),
        unit: '%',
        figure: true,
        cell: (row) => format.number((row.massG / books.equation.totalG) * 100, 1, 1),
      },
      {
        id: 'entries',
        head: t('books.col.entries'),
        figure: true,
        cell: (row) => (row.entryCount > 0 ? format.number(row.entryCount) : ''),
      },
    ],
    [t, format, books.equation.totalG],
  );
  return <LedgerTable caption={t('books.flow')} columns={columns} rows={rows} rowId={(row) => row.key} />;
}
