import { useInfiniteQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import type { EntryRow } from '../../../shared/entries/entry.schema.ts';
import { entryQueries } from '../../api/entries.ts';
import { rowsOf } from '../../api/page.ts';
import { placeWords, reasonWords } from '../../lib/entry-words.ts';
import { useFormat } from '../../lib/format.ts';
import { useMedia } from '../../lib/media.ts';
import { useMessages } from '../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Failed } from '../../ui/notice.tsx';
import { Part } from './part.tsx';

const SHOWN = 20;

/** The newest entries of this unit; the whole of it is one press away. */
export function UnitLog({ unitId }: { unitId: string }) {
  const t = useMessages();
  const format = useFormat();
  const phone = !useMedia('(width >= 48rem)');
  const list = useInfiniteQuery(entryQueries.list({ unitId }, SHOWN));
  const rows = useMemo(() => rowsOf(list.data), [list.data]);
  const columns = useMemo(
    (): LedgerColumn<EntryRow>[] => [
      { id: 'number', head: t('log.number'), quiet: true, cell: (row) => format.number(row.sequence) },
      ...(phone
        ? []
        : [
            {
              id: 'when',
              head: t('log.when'),
              cell: (row: EntryRow) => format.dateTime(row.occurredAt, row.timeZone),
            },
          ]),
      {
        id: 'mass',
        head: t('log.mass'),
        unit: format.massUnit,
        figure: true,
        cell: (row) => format.massFigure(row.massG),
      },
      {
        id: 'moved',
        head: `${t('log.from')} \u2192 ${t('log.to')}`,
        cell: (row) => (
          <>
            <span className={phone ? 'block whitespace-normal' : 'block'}>
              {placeWords(t, row.from)} <span className="text-move">{'\u2192'}</span> {placeWords(t, row.to)}
            </span>
            {phone ? (
              <span className="type-label block whitespace-normal text-[0.875rem] text-ink-soft">
                {format.dateTime(row.occurredAt, row.timeZone)}, {reasonWords(t, row)}
              </span>
            ) : null}
          </>
        ),
      },
      ...(phone ? [] : [{ id: 'why', head: t('log.why'), cell: (row: EntryRow) => reasonWords(t, row) }]),
    ],
    [t, format, phone],
  );
  return (
    <Part
      title={t('units.log')}
      action={
        <Link to={`/log?unitId=${unitId}`} className="inline-flex min-h-12 items-end">
          {t('units.log.all')}
        </Link>
      }
    >
      {list.isError ? <Failed error={list.error} onRetry={() => void list.refetch()} /> : null}
      {list.isSuccess && rows.length === 0 ? <p className="py-3 text-ink-soft">{t('units.log.none')}</p> : null}
      {rows.length > 0 || list.isPending ? (
        <LedgerTable
          caption={t('units.log')}
          columns={columns}
          rows={rows}
          rowId={(row) => row.id}
          to={(row) => `/log/${row.groupId}`}
          struck={(row) => row.reversedByGroupId !== null || row.reversesGroupId !== null}
          loading={list.isPending}
        />
      ) : null}
    </Part>
  );
}
