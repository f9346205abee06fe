import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import type { EntryRow, ReadingRow } from '../../../shared/entries/entry.schema.ts';
import { cylinderQueries } from '../../api/cylinders.ts';
import { entryQueries } from '../../api/entries.ts';
import { rowsOf } from '../../api/page.ts';
import { useSession } from '../../api/session.ts';
import { entryMarks, placeWords, reasonWords } from '../../lib/entry-words.ts';
import { type Formats, useFormat } from '../../lib/format.ts';
import { useMedia } from '../../lib/media.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { ButtonLink } from '../../ui/button.tsx';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Failed } from '../../ui/notice.tsx';

/** The newest; the log has them all. */
const SHOWN = 20;
/** A reading is two lines high there. */
const SHOWN_ON_PHONE = 10;

/** What went in and what went out, newest first by the time it happened. */
export function CylinderEntries({ cylinder }: { cylinder: Cylinder }) {
  const t = useMessages();
  const format = useFormat();
  const list = useInfiniteQuery(entryQueries.list({ cylinderId: cylinder.id, sort: '-occurredAt' }, SHOWN));
  const phone = !useMedia('(width >= 48rem)');
  const rows = useMemo(() => rowsOf(list.data), [list.data]);
  const columns = useMemo(
    () => (phone ? shortEntryColumns : entryColumns)(t, format, cylinder.id, rows),
    [phone, t, format, cylinder.id, rows],
  );
  return (
    <section aria-labelledby="cylinder-entries">
      <div className="flex items-baseline justify-between gap-4">
        <h2 id="cylinder-entries" className="type-title text-[1.25rem]">
          {t('cylinders.entries')}
        </h2>
        <Link to={`/log?cylinderId=${cylinder.id}`} className="inline-flex min-h-12 items-center">
          {t('cylinders.inTheLog')}
        </Link>
      </div>
      {list.isError && rows.length === 0 ? (
        <Failed error={list.error} onRetry={() => void list.refetch()} />
      ) : list.isSuccess && rows.length === 0 ? (
        <p className="border-t border-rule py-3 text-ink-soft">{t('cylinders.noEntries')}</p>
      ) : (
        <LedgerTable
          caption={t('cylinders.entries')}
          columns={columns}
          rows={rows}
          rowId={({ id }) => id}
          to={(row) => `/log/${row.groupId}?cylinderId=${cylinder.id}&entry=${row.sequence}`}
          struck={(row) => row.reversedByGroupId !== null}
          loading={list.isPending}
          {...(phone ? { loadingRow: 'h-16' } : {})}
        />
      )}
      {list.hasNextPage ? (
        <p className="pt-3">
          <ButtonLink to={`/log?cylinderId=${cylinder.id}`} className="not-desk:w-full">
            {t('cylinders.allInTheLog')}
          </ButtonLink>
        </p>
      ) : null}
    </section>
  );
}

type Columns = LedgerColumn<EntryRow>[];

/** On a phone: what, and under it when, why and who, so that nothing has to be scrolled for. */
function shortEntryColumns(t: Translate, format: Formats, cylinderId: string, rows: readonly EntryRow[]): Columns {
  const [number, when, mass, other, why, who] = entryColumns(t, format, cylinderId, rows);
  if (!number || !when || !mass || !other || !why || !who) return [];
  return [
    number,
    mass,
    {
      ...other,
      keep: true,
      cell: (row) => (
        <>
          <span
            className={`block whitespace-normal ${row.reversedByGroupId === null ? '' : 'line-through decoration-1'}`}
          >
            {otherPlace(t, row, cylinderId)}
          </span>
          <span className="type-label block whitespace-normal text-[0.875rem] text-ink-soft">
            {when.cell(row)}, {why.cell(row)}, {who.cell(row)}
          </span>
        </>
      ),
    },
  ];
}

const otherPlace = (t: Translate, row: EntryRow, cylinderId: string) =>
  row.to.id === cylinderId
    ? t('cylinders.in', { place: placeWords(t, row.from) })
    : t('cylinders.out', { place: placeWords(t, row.to) });

function entryColumns(t: Translate, format: Formats, cylinderId: string, rows: readonly EntryRow[]): Columns {
  return [
    { id: 'number', head: t('log.number'), quiet: true, cell: (row) => format.number(row.sequence) },
    { id: 'when', head: t('log.when'), cell: (row) => format.dateTime(row.occurredAt, row.timeZone) },
    {
      id: 'mass',
      head: t('log.mass'),
      unit: format.massUnit,
      figure: true,
      cell: (row) => (
        <span className={row.to.id === cylinderId ? '' : 'text-move'}>
          {row.to.id === cylinderId ? '+' : '\u2212'}
          {format.massFigure(row.massG)}
        </span>
      ),
    },
    {
      id: 'other',
      head: t('cylinders.fromOrTo'),
      cell: (row) => <span className="block max-w-64 truncate">{otherPlace(t, row, cylinderId)}</span>,
    },
    {
      id: 'why',
      head: t('log.why'),
      keep: true,
      cell: (row) => [whyWords(t, format, row, rows), ...entryMarks(t, row, format.month)].join(', '),
    },
    { id: 'who', head: t('log.who'), cell: (row) => row.recordedByName },
  ];
}

/** As the log says it; the number of the other entry only where it stands in this list. */
function whyWords(t: Translate, format: Formats, row: EntryRow, rows: readonly EntryRow[]): string {
  const numberOf = (groupId: string) => {
    const group = rows.filter((other) => other.groupId === groupId);
    return (group.find(({ addedByServer }) => !addedByServer) ?? group[0])?.sequence;
  };
  if (row.reversesGroupId !== null && !row.addedByServer) {
    const number = numberOf(row.reversesGroupId);
    return number === undefined ? t('log.reversesEarlier') : t('log.reverses', { number: format.number(number) });
  }
  if (row.reversedByGroupId !== null) {
    const number = numberOf(row.reversedByGroupId);
    return number === undefined ? t('log.reversed') : t('log.reversedBy', { number: format.number(number) });
  }
  return reasonWords(t, row);
}

/** What the scale showed, whatever became of it in the books. */
export function CylinderReadings({ cylinder }: { cylinder: Cylinder }) {
  const t = useMessages();
  const format = useFormat();
  const readings = useQuery(cylinderQueries.readings(cylinder.id));
  const zone = useSession()?.firm.timeZone;
  const phone = !useMedia('(width >= 48rem)');
  const columns = useMemo(() => {
    const all = readingColumns(t, format, zone);
    return phone ? shortReadingColumns(all) : all;
  }, [phone, t, format, zone]);
  if (readings.isSuccess && readings.data.length === 0) return null;
  return (
    <section aria-labelledby="cylinder-readings">
      <h2 id="cylinder-readings" className="type-title pb-1 text-[1.25rem]">
        {t('cylinders.readings')}
      </h2>
      {readings.isError ? (
        <Failed error={readings.error} onRetry={() => void readings.refetch()} />
      ) : (
        <LedgerTable
          caption={t('cylinders.readings')}
          columns={columns}
          rows={readings.data?.slice(0, phone ? SHOWN_ON_PHONE : SHOWN) ?? []}
          rowId={({ id }) => id}
          to={(row) => `/log/${row.groupId}?cylinderId=${cylinder.id}`}
          struck={({ reversed }) => reversed}
          loading={readings.isPending}
        />
      )}
    </section>
  );
}

/** On a phone: the figure, what it was, and under that when, with what and by whom. */
function shortReadingColumns([at, value, moment, tool, who]: LedgerColumn<ReadingRow>[]): LedgerColumn<ReadingRow>[] {
  if (!at || !value || !moment || !tool || !who) return [];
  return [
    { ...value, figure: false },
    {
      ...moment,
      cell: (row) => (
        <>
          <span className="block whitespace-normal">{moment.cell(row)}</span>
          <span className="type-label block whitespace-normal text-[0.875rem] text-ink-soft">
            {at.cell(row)}, {tool.cell(row)}, {who.cell(row)}
          </span>
        </>
      ),
    },
  ];
}

/** A reading belongs to a cylinder and not to a site: it is shown on the firm's clock. */
function readingColumns(t: Translate, format: Formats, zone: string | undefined): LedgerColumn<ReadingRow>[] {
  return [
    { id: 'at', head: t('log.when'), cell: (row) => format.dateTime(row.at, zone) },
    {
      id: 'value',
      head: t('cylinders.reading'),
      figure: true,
      // As the scale showed it, in its own unit.
      cell: (row) => `${format.number(Number(row.value), 9)}\u00a0${row.unit}`,
    },
    {
      id: 'moment',
      head: t('cylinders.moment'),
      cell: (row) =>
        [
          t(`cylinders.moment.${row.moment}`),
          ...(row.mode === 'zeroed' ? [t('log.group.zeroed')] : []),
          t(`log.kind.${row.kind}`),
        ].join(', '),
    },
    { id: 'tool', head: t('log.group.scale'), cell: (row) => row.toolName ?? t('log.group.noTool') },
    { id: 'who', head: t('log.who'), cell: (row) => row.recordedByName },
  ];
}
