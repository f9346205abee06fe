import { type ReactNode, useMemo } from 'react';
import type { EntryRow } from '../../../shared/entries/entry.schema.ts';
import { entryMarks, placeWords, reasonWords } from '../../lib/entry-words.ts';
import { type Formats, useFormat } from '../../lib/format.ts';
import { deviceNow } from '../../lib/local-time.ts';
import { useMedia } from '../../lib/media.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import type { LedgerColumn } from '../../ui/ledger-table.tsx';
import { reversedEntry, type Ties } from './ties.ts';

interface Shown {
  rows: readonly EntryRow[];
  ties: Ties;
  /** The zone in which most times are shown; any other is named. */
  zone: string;
}

/** @param beside a sheet stands beside the table and says the rest, so there is less room */
export function useLogColumns({ rows, ties, zone, beside }: Shown & { beside: boolean }): LedgerColumn<EntryRow>[] {
  const t = useMessages();
  const format = useFormat();
  const phone = !useMedia('(width >= 48rem)');
  const narrow = !useMedia('(width >= 90rem)');
  return useMemo(() => {
    const number: LedgerColumn<EntryRow> = {
      id: 'number',
      head: t('log.number'),
      sort: 'sequence',
      firstDown: true,
      quiet: true,
      cell: (row) => format.number(row.sequence),
    };
    const mass: LedgerColumn<EntryRow> = {
      id: 'mass',
      head: t('log.mass'),
      unit: format.massUnit,
      figure: true,
      cell: (row) => format.massFigure(row.massG),
    };
    const refrigerant: LedgerColumn<EntryRow> = {
      id: 'refrigerant',
      head: t('log.refrigerant'),
      cell: (row) => <span className="type-narrow">{row.refrigerant}</span>,
    };
    const why: LedgerColumn<EntryRow> = {
      id: 'why',
      head: t('log.why'),
      keep: true,
      // Beside the open sheet there is no room for marks; the sheet says what they say.
      cell: (row) => <Why row={row} rows={rows} ties={ties} marks={!beside} />,
    };
    const who: LedgerColumn<EntryRow> = { id: 'who', head: t('log.who'), cell: (row) => row.recordedByName };
    if (phone) {
      const moved: LedgerColumn<EntryRow> = {
        id: 'moved',
        head: `${t('log.from')} \u2192 ${t('log.to')}`,
        cell: (row) => (
          <>
            <span className="block min-w-42 whitespace-normal">
              {placeWords(t, row.from)} <Arrow /> {placeWords(t, row.to)}
            </span>
            <span className="type-label block whitespace-normal text-[0.875rem] text-ink-soft">
              <When row={row} zone={zone} />, {row.refrigerant}
            </span>
          </>
        ),
      };
      return [number, mass, moved, why, who];
    }
    const when: LedgerColumn<EntryRow> = {
      id: 'when',
      head: t('log.when'),
      sort: 'occurredAt',
      firstDown: true,
      cell: (row) => <When row={row} zone={zone} />,
    };
    if (beside && narrow) {
      // Two lines a row, or the sheet would cover why and who.
      const moved: LedgerColumn<EntryRow> = {
        id: 'moved',
        head: `${t('log.from')} \u2192 ${t('log.to')}`,
        keep: true,
        cell: (row) => (
          <>
            <span
              className={`block min-w-36 whitespace-normal ${row.reversedByGroupId === null ? '' : 'line-through decoration-1'}`}
            >
              {placeWords(t, row.from)} <Arrow /> {placeWords(t, row.to)}
            </span>
            <span className="type-label block text-[0.875rem] text-ink-soft">
              <Why row={row} rows={rows} ties={ties} marks={false} />
            </span>
          </>
        ),
      };
      return [number, when, mass, moved, who];
    }
    return [
      number,
      when,
      mass,
      ...(beside ? [] : [refrigerant]),
      { id: 'from', head: t('log.from'), cell: (row) => <Place t={t} place={row.from} /> },
      { id: 'arrow', head: t('log.arrow'), headHidden: true, cell: () => <Arrow /> },
      { id: 'to', head: t('log.to'), cell: (row) => <Place t={t} place={row.to} /> },
      why,
      who,
    ];
  }, [t, format, rows, ties, zone, phone, narrow, beside]);
}

/** Mass on the move: the one place for copper in a row. */
const Arrow = () => (
  <span aria-hidden="true" className="text-move">
    {'\u2192'}
  </span>
);

/** On the clock of the site; the year only where it is another one, the zone only where it is not the firm's. */
function When({ row, zone }: { row: EntryRow; zone: string }) {
  const format = useFormat();
  const thisYear = new Date(row.occurredAt).getFullYear() === deviceNow().getFullYear();
  return (
    <>
      {thisYear ? format.dateTime(row.occurredAt, row.timeZone) : format.longDateTime(row.occurredAt, row.timeZone)}
      {row.timeZone === zone ? null : (
        <span className="type-label pl-1.5 text-[0.8125rem] text-ink-soft">{zoneWord(format, row)}</span>
      )}
    </>
  );
}

function Place({ t, place }: { t: Translate; place: EntryRow['from'] }) {
  const words = placeWords(t, place);
  return (
    <span className="block max-w-60 truncate" title={words}>
      {words}
    </span>
  );
}

/** `EST`: the short name of the zone at that moment. */
function zoneWord({ locale }: Formats, { occurredAt, timeZone }: EntryRow): string {
  const parts = new Intl.DateTimeFormat(locale, { timeZone, timeZoneName: 'short' }).formatToParts(
    new Date(occurredAt),
  );
  return parts.find((part) => part.type === 'timeZoneName')?.value ?? timeZone;
}

/** What was done, what cancels what, and in words what else has to be known of the entry. */
export function Why({
  row,
  rows,
  ties,
  marks = true,
}: {
  row: EntryRow;
  rows: readonly EntryRow[];
  ties: Ties;
  marks?: boolean;
}) {
  const t = useMessages();
  const format = useFormat();
  return (
    <span className="flex items-center gap-2">
      <span className={marks ? '' : 'block max-w-44 truncate'}>
        <What row={row} rows={rows} ties={ties} />
      </span>
      {(marks ? entryMarks(t, row, format.month) : []).map((mark) => (
        <Mark key={mark}>{mark}</Mark>
      ))}
    </span>
  );
}

export function Mark({ children }: { children: ReactNode }) {
  return (
    <span className="type-label border border-edge px-1 text-[0.8125rem] leading-[1.125rem] whitespace-nowrap text-ink-soft">
      {children}
    </span>
  );
}

function What({ row, rows, ties }: Omit<Parameters<typeof Why>[0], 'marks'>) {
  const t = useMessages();
  const format = useFormat();
  const words = reasonWords(t, row);
  const number = (groupId: string) => ties.numbers.get(groupId)?.first;
  // What judging again added to a reversal's group reverses nothing itself.
  if (row.reversesGroupId !== null && !row.addedByServer) {
    const original = reversedEntry(row, rows)?.sequence ?? number(row.reversesGroupId);
    return original === undefined ? t('log.reversesEarlier') : t('log.reverses', { number: format.number(original) });
  }
  if (row.reversedByGroupId !== null) {
    const reversal = number(row.reversedByGroupId);
    return (
      <>
        <s className="decoration-1">{words}</s>{' '}
        <span className="text-ink">
          {reversal === undefined ? t('log.reversed') : t('log.reversedBy', { number: format.number(reversal) })}
        </span>
      </>
    );
  }
  if (row.addedByServer) return row.correctsGroupId === null ? words : t('log.judgedAgain', { why: words });
  const wrong = ties.corrects.get(row.groupId);
  const wrongNumber = wrong === undefined ? undefined : number(wrong);
  if (wrongNumber === undefined) return words;
  return `${words}, ${t('log.corrects', { number: format.number(wrongNumber) })}`;
}
