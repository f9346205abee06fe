import { useMemo } from 'react';
import type { Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { type Formats, NBSP, useFormat } from '../../lib/format.ts';
import { useMessages } from '../../lib/messages.ts';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { CylinderMarks } from './cylinder-marks.tsx';
import { SmallBeam } from './small-beam.tsx';

export interface CylinderListProps {
  cylinders: readonly Cylinder[];
  loading: boolean;
  sort: string;
  onSort: (sort: string) => void;
  onOpen: (cylinder: Cylinder) => void;
  more: { has: boolean; loading: boolean; load: () => void };
}

/** The unit stands in the head; pounds and ounces keep theirs. */
function figureOf(format: Formats, massG: number): string {
  const { value, unit } = format.massAboutParts(massG);
  return format.massUnit === unit ? value : `${value}${NBSP}${unit}`;
}

/** On a desk: a ledger whose middle column is the beam. */
export function CylinderTable({ cylinders, loading, sort, onSort, more }: CylinderListProps) {
  const t = useMessages();
  const format = useFormat();
  const columns = useMemo<LedgerColumn<Cylinder>[]>(
    () => [
      {
        id: 'tag',
        head: t('cylinders.tag'),
        sort: 'tag',
        cell: ({ tag }) => <strong className="text-[1.0625rem] font-[660]">{tag}</strong>,
      },
      {
        id: 'refrigerant',
        head: t('cylinders.refrigerant'),
        cell: ({ refrigerant, kind }) => (
          <>
            <span className="block leading-tight">{refrigerant}</span>
            <span className="type-label text-[0.875rem] text-ink-soft">{t(`cylinders.kind.${kind}`)}</span>
          </>
        ),
      },
      {
        id: 'beam',
        head: t('cylinders.beam.head'),
        cell: (cylinder) => (
          <SmallBeam cylinder={cylinder} className="w-[clamp(16rem,calc(100vw-32.5rem),60rem)] pt-1" />
        ),
      },
      {
        id: 'content',
        head: t('cylinders.content'),
        unit: format.massUnit,
        figure: true,
        cell: ({ contentG }) => <span className="text-[1.0625rem]">{figureOf(format, contentG)}</span>,
      },
      {
        id: 'holder',
        head: t('cylinders.holder'),
        cell: (cylinder) => (
          <span className="flex min-w-40 flex-col items-start gap-0.5 whitespace-normal">
            {cylinder.heldByName ?? <span className="text-ink-soft">{t('cylinders.nobody')}</span>}
            <CylinderMarks cylinder={cylinder} />
          </span>
        ),
      },
    ],
    [t, format],
  );
  return (
    <LedgerTable
      caption={t('cylinders.title')}
      columns={columns}
      rows={cylinders}
      rowId={({ id }) => id}
      to={({ id }) => `/cylinders/${id}`}
      sort={sort}
      onSort={onSort}
      more={more}
      loading={loading}
      loadingRow="h-[4.75rem]"
    />
  );
}
