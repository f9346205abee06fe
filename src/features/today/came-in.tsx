import { useMemo } from 'react';
import { Link } from 'react-router-dom';
import type { EntryRow } from '../../../shared/entries/entry.schema.ts';
import { placeWords, reasonWords } from '../../lib/entry-words.ts';
import { useFormat } from '../../lib/format.ts';
import { useMedia } from '../../lib/media.ts';
import { useMessages } from '../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Nothing, Section } from './section.tsx';

/** The newest few; the log has all. */
const SHOWN = 15;

/** What was posted since yesterday, newest first, as the log has it. */
export function CameIn({ rows }: { rows: readonly EntryRow[] }) {
  const t = useMessages();
  const format = useFormat();
  const phone = !useMedia('(width >= 48rem)');
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
            <span className={phone ? 'block min-w-42 whitespace-normal' : 'block'}>
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
      { id: 'who', head: t('log.who'), cell: (row) => row.recordedByName },
    ],
    [t, format, phone],
  );
  return (
    <Section title={t('today.cameIn')} count={rows.length > 0 ? format.number(rows.length) : undefined}>
      {rows.length === 0 ? (
        <Nothing>{t('today.cameIn.none')}</Nothing>
      ) : (
        <LedgerTable
          caption={t('today.cameIn')}
          columns={columns}
          rows={rows.slice(0, SHOWN)}
          rowId={(row) => row.id}
          to={(row) => `/log/${row.groupId}`}
          struck={(row) => row.reversedByGroupId !== null || row.reversesGroupId !== null}
        />
      )}
      <Link to="/log" className="inline-flex min-h-12 items-center">
        {t('today.toLog')}
      </Link>
    </Section>
  );
}
