import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import type { DifferenceItem, DifferencesResponse } from '../../../shared/books/books.schema.ts';
import { type BooksPeriod, booksCsvPath } from '../../api/books.ts';
import { useFormat } from '../../lib/format.ts';
import { useMedia } from '../../lib/media.ts';
import { useMessages } from '../../lib/messages.ts';
import { Disclosure } from '../../ui/disclosure.tsx';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import {
  aboutFigure,
  bookMass,
  differencePath,
  handsSentence,
  handsWords,
  money,
  signed,
  subjectWords,
} from './book-words.ts';
import { Section } from './section.tsx';
import { Verdict } from './verdict.tsx';

/** Every difference of the period, what the scales do not explain first: book, scale, by how much, in whose hands. */
export function DifferenceList({ period, found }: { period: BooksPeriod; found: DifferencesResponse }) {
  const t = useMessages();
  const format = useFormat();
  if (found.items.length === 0) {
    return (
      <Section title={t('books.differences')}>
        <p className="py-2 text-ink-soft">{t('books.differences.none')}</p>
      </Section>
    );
  }
  const beyond = found.items.filter(({ verdict }) => verdict !== 'withinScales');
  const within = found.items.filter(({ verdict }) => verdict === 'withinScales');
  // A few are no bother; a year of them would push the books out of sight.
  const folds = within.length > FEW;
  const shown = folds ? beyond : found.items;
  return (
    <Section title={t('books.differences')} csv={booksCsvPath('items', period)}>
      {shown.length > 0 ? (
        <Differences caption={t('books.differences')} rows={shown} found={found} />
      ) : (
        <p className="py-3">{t('books.differences.noneBeyond')}</p>
      )}
      {folds ? (
        <Disclosure title={t('books.differences.within', { count: within.length })}>
          <Differences caption={t('books.differences.within', { count: within.length })} rows={within} found={found} />
        </Disclosure>
      ) : null}
      {found.notListed.count > 0 ? (
        <p className="type-label pt-2 text-ink-soft">
          {t('books.differences.notListed', {
            count: found.notListed.count,
            mass: bookMass(format, found.notListed.massG),
          })}
        </p>
      ) : null}
    </Section>
  );
}

const FEW = 3;

/** A table where there is room for one, else a line for each. */
function Differences({
  caption,
  rows,
  found,
}: {
  caption: string;
  rows: readonly DifferenceItem[];
  found: DifferencesResponse;
}) {
  const desk = useMedia('(width >= 64rem)');
  const columns = useColumns(found);
  if (desk) {
    return (
      <LedgerTable
        caption={caption}
        columns={columns}
        rows={rows}
        rowId={(item) => item.key}
        to={differencePath}
        struck={(item) => item.standsG === 0}
      />
    );
  }
  return (
    <ul>
      {rows.map((item) => (
        <PhoneLine key={item.key} item={item} currency={found.currency} />
      ))}
    </ul>
  );
}

function useColumns({ currency, items }: DifferencesResponse): LedgerColumn<DifferenceItem>[] {
  const t = useMessages();
  const format = useFormat();
  const priced = items.some(({ cost }) => cost !== null);
  const settled = items.some(({ settledG }) => settledG !== 0);
  return useMemo(() => {
    const { massUnit: unit, massFigure } = format;
    const known = (massG: number | null) => (massG === null ? '' : massFigure(massG));
    return [
      {
        id: 'what',
        head: t('books.col.what'),
        cell: (item) => <span className="font-[600]">{subjectWords(t, item)}</span>,
      },
      { id: 'refrigerant', head: t('books.col.refrigerant'), cell: (item) => item.refrigerant },
      { id: 'book', head: t('books.col.book'), unit, figure: true, cell: (item) => known(item.bookG) },
      { id: 'scale', head: t('books.col.scale'), unit, figure: true, cell: (item) => known(item.scaleG) },
      {
        id: 'difference',
        head: t('books.col.difference'),
        unit,
        figure: true,
        cell: (item) => massFigure(item.differenceG),
      },
      {
        id: 'twoU',
        head: '2u',
        unit,
        figure: true,
        cell: (item) => (item.twoUG === null ? '' : aboutFigure(format, item.twoUG)),
      },
      ...(settled
        ? [
            {
              id: 'stands',
              head: t('books.col.stands'),
              unit,
              figure: true,
              keep: true,
              cell: (item: DifferenceItem) => (item.standsG === 0 ? t('books.settled') : massFigure(item.standsG)),
            },
          ]
        : []),
      { id: 'verdict', head: t('books.col.verdict'), cell: (item) => <Judged item={item} /> },
      { id: 'hands', head: t('books.col.hands'), cell: (item) => handsOf(item) },
      ...(priced
        ? [
            {
              id: 'cost',
              head: t('books.col.cost'),
              figure: true,
              cell: (item: DifferenceItem) => (item.cost === null ? '' : money(format.locale, item.cost, currency)),
            },
          ]
        : []),
      {
        id: 'when',
        head: t('books.col.shownOn'),
        cell: (item) => format.longDateTime(item.at, item.timeZone),
        quiet: true,
      },
    ];

    function handsOf(item: DifferenceItem): string {
      return item.subject.kind === 'cylinder' ? handsWords(t, item.heldBetween) : item.recordedByName;
    }
  }, [t, format, priced, settled, currency]);
}

/** The verdict; where the difference is one refrigerant's share, with what the reading shows and the verdict is of. */
function Judged({ item }: { item: DifferenceItem }) {
  const t = useMessages();
  const format = useFormat();
  const isShare = item.readingDifferenceG !== item.differenceG;
  return (
    <span>
      <Verdict verdict={item.verdict} />
      {isShare ? (
        <span className="text-ink-soft">
          {' '}
          {t('books.ofReading', { mass: signed(format, item.readingDifferenceG) })}
        </span>
      ) : null}
    </span>
  );
}

/** One difference on a phone: what, how much, the verdict, and in whose hands it was. */
function PhoneLine({ item, currency }: { item: DifferenceItem; currency: string }) {
  const t = useMessages();
  const format = useFormat();
  const isSettled = item.standsG === 0;
  return (
    <li className="border-b border-rule">
      <Link to={differencePath(item)} className="block py-3 text-ink no-underline hover:bg-well">
        <span className="flex items-baseline justify-between gap-3">
          <span className="font-[650]">
            {subjectWords(t, item)} <span className="font-[400] text-ink-soft">{item.refrigerant}</span>
          </span>
          <span
            className={`type-figure text-[1.375rem] whitespace-nowrap ${isSettled ? 'line-through decoration-2' : ''}`}
          >
            {signed(format, item.differenceG)}
          </span>
        </span>
        <span className="flex flex-wrap items-baseline justify-between gap-x-3">
          <Judged item={item} />
          <span className="text-ink-soft">
            {isSettled
              ? t('books.settled')
              : item.twoUG === null
                ? null
                : t('books.scalesExplain', { mass: format.massAbout(item.twoUG) })}
          </span>
        </span>
        <span className="block leading-snug">
          {item.subject.kind === 'cylinder'
            ? handsSentence(t, item.heldBetween)
            : t('books.recordedBy', { who: item.recordedByName })}
          {item.cost === null ? null : `, ${money(format.locale, item.cost, currency)}`}
        </span>
        <span className="type-label block text-ink-soft">{format.longDateTime(item.at, item.timeZone)}</span>
      </Link>
    </li>
  );
}
