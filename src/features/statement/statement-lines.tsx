import { useMemo } from 'react';
import type { CylinderStatement, StatementLine } from '../../../shared/statements/cylinder-statement.schema.ts';
import { entryMarks, placeWords, reasonWords } from '../../lib/entry-words.ts';
import { type Formats, useFormat } from '../../lib/format.ts';
import { type Translate, useMessages } from '../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Empty } from '../../ui/notice.tsx';
import { signed } from './statement-figures.tsx';
import { Verdict } from './verdict.tsx';

/** Entries and readings as they happened: what came in, what went out, what was left, and what the scale said. */
export function StatementLines({ statement }: { statement: CylinderStatement }) {
  const t = useMessages();
  const columns = useColumns(statement.timeZone);
  if (statement.lines.length === 0) return <Empty title={t('statement.noLines')}>{t('statement.noLines.text')}</Empty>;
  return (
    <section aria-labelledby="statement-lines">
      <h2 id="statement-lines" className="type-narrow pb-1 text-[1.1875rem] font-[650]">
        {t('statement.lines')}
      </h2>
      <LedgerTable
        caption={t('statement.lines')}
        columns={columns}
        rows={statement.lines}
        rowId={(line) => line.id}
        to={(line) => `/log/${line.groupId}`}
        struck={(line) => line.cancelled}
      />
    </section>
  );
}

function useColumns(zone: string): LedgerColumn<StatementLine>[] {
  const t = useMessages();
  const format = useFormat();
  return useMemo(
    () => [
      { id: 'when', head: t('statement.col.when'), cell: (line) => format.dateTime(line.at, zone), quiet: true },
      {
        id: 'what',
        head: t('statement.col.what'),
        cell: (line) => (
          <span className="block w-38 leading-tight whitespace-normal desk:w-auto desk:whitespace-nowrap">
            {line.line === 'entry' ? entryWords(t, format, line) : readingWords(t, format, line)}
          </span>
        ),
      },
      {
        id: 'in',
        head: t('statement.col.in'),
        unit: format.massUnit,
        figure: true,
        cell: (line) => (line.line === 'entry' && line.massG > 0 ? format.massFigure(line.massG) : ''),
      },
      {
        id: 'out',
        head: t('statement.col.out'),
        unit: format.massUnit,
        figure: true,
        cell: (line) => (line.line === 'entry' && line.massG < 0 ? format.massFigure(-line.massG) : ''),
      },
      {
        id: 'balance',
        head: t('statement.col.balance'),
        unit: format.massUnit,
        figure: true,
        keep: true,
        cell: (line) => (line.line === 'entry' ? format.massFigure(line.balanceG) : ''),
      },
      {
        id: 'scale',
        head: t('statement.col.scale'),
        unit: format.massUnit,
        figure: true,
        cell: (line) => (line.line === 'reading' && line.contentG !== null ? format.massFigure(line.contentG) : ''),
      },
      {
        id: 'difference',
        head: t('statement.col.difference'),
        figure: true,
        cell: (line) => (line.line === 'reading' && line.differenceG !== null ? signed(format, line.differenceG) : ''),
      },
      {
        id: 'verdict',
        head: t('statement.col.verdict'),
        cell: (line) => (line.line === 'reading' && line.verdict ? <Verdict verdict={line.verdict} /> : ''),
      },
      { id: 'who', head: t('statement.col.who'), cell: (line) => line.recordedByName, quiet: true },
    ],
    [t, format, zone],
  );
}

type EntryLine = Extract<StatementLine, { line: 'entry' }>;
type ReadingLine = Extract<StatementLine, { line: 'reading' }>;

/** `extra charge, unit 0412`; what the server found, and what else has to be said of it. */
function entryWords(t: Translate, format: Formats, line: EntryLine): string {
  const cylinder = { place: 'cylinder', id: null, as: null, label: '' };
  const ends = line.massG > 0 ? { from: line.counter, to: cylinder } : { from: cylinder, to: line.counter };
  const why = reasonWords(t, { ...ends, kind: line.kind, addedByServer: line.addedByServer });
  const other = placeWords(t, line.counter);
  const marks = entryMarks(t, { ...line, atLeast: false, addedByServer: false }, format.month);
  return [...(line.addedByServer ? [why] : [why, other]), ...marks].join(', ');
}

function readingWords(t: Translate, format: Formats, line: ReadingLine): string {
  const reading = `${format.number(Number(line.value), 9)}\u00a0${line.unit}`;
  return [t(`statement.reading.${line.mode}`, { reading }), line.toolName ?? t('statement.noTool')].join(', ');
}
