import { useMemo } from 'react';
import type { EmissionLine, EmissionsResponse } from '../../../../shared/books/emissions.schema.ts';
import { useFormat } from '../../../lib/format.ts';
import { useMessages } from '../../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../../ui/ledger-table.tsx';
import { longMonth } from '../book-words.ts';

/** By what was asked, each refrigerant by itself. */
export function EmissionTable({ emissions: { lines, by } }: { emissions: EmissionsResponse }) {
  const t = useMessages();
  const format = useFormat();
  const columns = useMemo((): LedgerColumn<EmissionLine>[] => {
    const { massUnit: unit, massFigure, number } = format;
    const some = (massG: number) => (massG === 0 ? '' : massFigure(massG));
    const tonnes = (co2eT: number | null) => (co2eT === null ? t('books.emissions.noFigure') : number(co2eT, 3, 3));
    const named = (row: EmissionLine) =>
      by === 'month' && row.key ? longMonth(format.locale, row.key) : (row.label ?? t('books.emissions.ofNoSite'));
    return [
      ...(by === 'refrigerant'
        ? []
        : [
            {
              id: 'of',
              head: t(`books.emissions.by.${by}`),
              cell: (row: EmissionLine) => <span className="font-[600]">{named(row)}</span>,
            },
          ]),
      {
        id: 'refrigerant',
        head: t('books.col.refrigerant'),
        cell: (row) => <span className={by === 'refrigerant' ? 'font-[600]' : ''}>{row.refrigerant}</span>,
      },
      { id: 'total', head: t('books.emissions.total'), unit, figure: true, cell: (row) => massFigure(row.totalG) },
      { id: 'co2e', head: t('books.emissions.co2e'), unit: 't', figure: true, cell: (row) => tonnes(row.co2eT) },
      { id: 'measured', head: t('books.emissions.measured'), unit, figure: true, cell: (row) => some(row.measuredG) },
      { id: 'inferred', head: t('books.emissions.inferred'), unit, figure: true, cell: (row) => some(row.inferredG) },
      { id: 'hose', head: t('books.emissions.hose'), unit, figure: true, cell: (row) => some(row.hoseG) },
      {
        id: 'atLeast',
        head: t('books.emissions.ofItAtLeast'),
        unit,
        figure: true,
        cell: (row) => some(row.atLeastG),
      },
      {
        id: 'before',
        head: t('books.emissions.before'),
        unit,
        figure: true,
        cell: (row) => some(row.beforeOurCareG),
      },
      { id: 'gwp', head: 'GWP', figure: true, cell: (row) => (row.gwp === null ? '' : number(row.gwp)) },
    ];
  }, [t, format, by]);
  if (lines.length === 0) return <p className="py-3">{t('books.emissions.none')}</p>;
  return (
    <LedgerTable
      caption={t(`books.emissions.table.${by}`)}
      columns={columns}
      rows={lines}
      rowId={(row) => `${row.key} ${row.refrigerant}`}
    />
  );
}
