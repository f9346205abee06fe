import { useMemo } from 'react';
import type { Unit } from '../../../shared/unit-register/unit.schema.ts';
import { useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';

export interface UnitListProps {
  units: readonly Unit[];
  loading: boolean;
  sort: string;
  onSort: (sort: string) => void;
  to: (unit: Unit) => string;
  more: { has: boolean; loading: boolean; load: () => void };
}

/** On a desk: a ledger of units, what each holds by its book beside what it should hold. */
export function UnitTable({ units, loading, sort, onSort, to, more }: UnitListProps) {
  const t = useMessages();
  const format = useFormat();
  const columns = useMemo(
    (): LedgerColumn<Unit>[] => [
      {
        id: 'tag',
        head: t('units.tag'),
        sort: 'tag',
        cell: (unit) => <strong className="font-[650]">{unit.tag}</strong>,
      },
      { id: 'name', head: t('units.name'), sort: 'name', cell: (unit) => unit.name },
      { id: 'site', head: t('units.site'), cell: (unit) => unit.siteName },
      { id: 'customer', head: t('units.customer'), wideOnly: true, quiet: true, cell: (unit) => unit.customerName },
      {
        id: 'refrigerant',
        head: t('units.refrigerant'),
        cell: (unit) => <span className="type-narrow">{unit.refrigerant}</span>,
      },
      {
        id: 'full',
        head: t('units.fullCharge'),
        unit: format.massUnit,
        figure: true,
        cell: (unit) =>
          unit.fullCharge ? format.massFigure(unit.fullCharge.massG) : <Unknown text={t('units.notDetermined')} />,
      },
      {
        id: 'book',
        head: t('units.book'),
        unit: format.massUnit,
        figure: true,
        cell: (unit) =>
          unit.book.known ? format.massFigure(Math.round(unit.book.massG)) : <Unknown text={t('units.notKnown')} />,
      },
    ],
    [t, format],
  );
  return (
    <LedgerTable
      caption={t('units.title')}
      columns={columns}
      rows={units}
      rowId={(unit) => unit.id}
      sort={sort}
      onSort={onSort}
      to={to}
      more={more}
      loading={loading}
    />
  );
}

/** An honest state, not a missing figure. */
const Unknown = ({ text }: { text: string }) => <span className="type-label font-[400] text-ink-soft">{text}</span>;
