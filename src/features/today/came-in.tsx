import { useMemo } from 'react';
import { Link, useNavigate } from 'react-router-dom';
import type { EntryRow } from '../../../shared/entries/entry.schema.ts';
import { placeWords, reasonWords } from '../../lib/entry-words.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Nothing, Section } from './section.tsx';

/** What was posted since yesterday, newest first, as the log has it. */
export function CameIn({ rows }: { rows: readonly EntryRow[] }) {
  const t = useMessages();
  const format = useFormat();
  const navigate = useNavigate();
  const columns = useMemo(
    (): LedgerColumn<EntryRow>[] => [
      { id: 'number', head: t('log.number'), quiet: true, cell: (row) => format.number(row.sequence) },
      { id: 'when', head: t('log.when'), cell: (row) => format.dateTime(row.occurredAt, row.timeZone) },
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
            {placeWords(t, row.from)} <span className="text-move">{'\u2192'}</span> {placeWords(t, row.to)}
          </>
        ),
      },
      { id: 'why', head: t('log.why'), cell: (row) => reasonWords(t, row) },
      { id: 'who', head: t('log.who'), cell: (row) => row.recordedByName },
    ],
    [t, format],
  );
  return (
    <Section title={t('today.cameIn')} count={rows.length > 0 ? format.number(rows.length) : undefined}>
      {rows.length === 0 ? (
        <Nothing>{t('today.cameIn.none')}</Nothing>
      ) : (
        <LedgerTable
          caption={t('today.cameIn')}
          columns={columns}
          rows={rows}
          rowId={(row) => row.id}
          onOpen={(row) => void navigate(`/log/${row.groupId}`)}
          struck={(row) => row.reversedByGroupId !== null || row.reversesGroupId !== null}
        />
      )}
      <Link to="/log" className="inline-flex min-h-12 items-center">
        {t('today.toLog')}
      </Link>
    </Section>
  );
}
