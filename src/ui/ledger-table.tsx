import { type ColumnDef, rowSortingFeature, type SortingState, tableFeatures, useTable } from '@tanstack/react-table';
import { type ReactNode, useEffect, useMemo, useRef } from 'react';
import { useMessages } from '../lib/messages.ts';
import { Button } from './button.tsx';
import { RowsSkeleton } from './notice.tsx';

export interface LedgerColumn<Row> {
  id: string;
  head: string;
  /** Stands in the head, so that the figures under it stand alone. */
  unit?: string;
  cell: (row: Row) => ReactNode;
  /** Figures are set right-aligned and heavier. */
  figure?: boolean;
  /** The server's name of this order, upwards; `-name` is downwards. */
  sort?: string;
  /** Left out where there is no room for it; the side sheet or the row's page has it. */
  wideOnly?: boolean;
  /** Soft ink: numbers, times. */
  quiet?: boolean;
  /** Stays as it is in a row that is struck through. */
  keep?: boolean;
}

interface Props<Row> {
  /** Says what the table holds; for a screen reader, and above it where `showCaption`. */
  caption: string;
  columns: readonly LedgerColumn<Row>[];
  rows: readonly Row[];
  rowId: (row: Row) => string;
  /** The order that the server was asked for: `sequence`, `-sequence`. */
  sort?: string;
  onSort?: (sort: string) => void;
  /** Opens the row: a click anywhere in it, or its first cell by keyboard. */
  onOpen?: (row: Row) => void;
  openId?: string | null;
  /** Reversed entries and what reverses them. */
  struck?: (row: Row) => boolean;
  /** Keyset paging: more rows can be asked for. */
  more?: { has: boolean; loading: boolean; load: () => void };
  /** The first page is on its way: rows of the same height stand in. */
  loading?: boolean;
}

const features = tableFeatures({ rowSortingFeature });

/**
 * A ledger: dense rows, a head and a first column that stay in view, figures right-aligned with their unit in the head.
 * Order, filter and pages are the server's; the table only shows and asks.
 */
export function LedgerTable<Row extends object>(props: Props<Row>) {
  const { caption, columns, rows, rowId, sort, onSort, onOpen, openId, struck, more, loading = false } = props;
  const t = useMessages();
  const definitions = useMemo(
    () =>
      columns.map(
        (column): ColumnDef<typeof features, Row> => ({
          id: column.id,
          header: column.head,
          accessorFn: (row: Row) => row,
          cell: ({ row }) => column.cell(row.original),
          enableSorting: column.sort !== undefined,
        }),
      ),
    [columns],
  );
  const sorting = useMemo((): SortingState => {
    const column = columns.find(({ sort: name }) => name !== undefined && (name === sort || `-${name}` === sort));
    return column ? [{ id: column.id, desc: sort?.startsWith('-') ?? false }] : [];
  }, [columns, sort]);
  const table = useTable({
    features,
    columns: definitions,
    data: rows as Row[],
    getRowId: rowId,
    manualSorting: true,
    state: { sorting },
  });
  const byId = useMemo(() => new Map(columns.map((column) => [column.id, column])), [columns]);
  return (
    // Only a table may scroll sideways; its first column stays.
    <div className="relative -mx-[1.125rem] overflow-x-auto px-[1.125rem] desk:-mx-6 desk:px-6 lg:mx-0 lg:overflow-x-visible lg:px-0">
      <table className="w-full border-separate border-spacing-0 text-[0.9375rem]">
        <caption className="sr-only">{caption}</caption>
        <thead>
          {table.getHeaderGroups().map((group) => (
            <tr key={group.id}>
              {group.headers.map((header, index) => {
                const column = byId.get(header.column.id) as LedgerColumn<Row>;
                const direction = header.column.getIsSorted();
                return (
                  <th
                    key={header.id}
                    scope="col"
                    aria-sort={direction === 'asc' ? 'ascending' : direction === 'desc' ? 'descending' : undefined}
                    className={`type-label border-b border-ink bg-ground pr-4 text-[0.875rem] font-[550] whitespace-nowrap text-ink-soft lg:sticky lg:top-14 lg:z-2 ${column.figure ? 'text-right' : 'text-left'} ${index === 0 ? 'sticky left-0 z-1' : ''} ${column.wideOnly ? 'hidden lg:table-cell' : ''}`}
                  >
                    {column.sort && onSort ? (
                      <button
                        type="button"
                        className={`inline-flex min-h-10 items-center gap-1 hover:text-ink ${direction ? 'text-ink' : ''}`}
                        onClick={() => onSort(direction === 'asc' ? `-${column.sort}` : (column.sort as string))}
                      >
                        <Head column={column} />
                        <span className="sr-only">{t('ui.table.sortBy', { column: column.head })}</span>
                        <SortMark direction={direction} />
                      </button>
                    ) : (
                      <span className="inline-flex min-h-10 items-center">
                        <Head column={column} />
                      </span>
                    )}
                  </th>
                );
              })}
            </tr>
          ))}
        </thead>
        <tbody>
          {table.getRowModel().rows.map((row) => {
            const open = row.id === openId;
            const isStruck = struck?.(row.original) ?? false;
            return (
              <tr
                key={row.id}
                aria-current={open || undefined}
                className={`group ${onOpen ? 'cursor-pointer' : ''} ${open ? 'bg-rest-wash [&>td]:border-rest [&>td]:shadow-[inset_0_1px_0_var(--color-rest)]' : 'hover:bg-well'} ${isStruck ? 'text-ink-soft' : ''}`}
                onClick={onOpen ? (event) => openUnlessLink(event, () => onOpen(row.original)) : undefined}
              >
                {row.getAllCells().map((cell, index) => {
                  const column = byId.get(cell.column.id) as LedgerColumn<Row>;
                  return (
                    <td
                      key={cell.id}
                      className={`h-10 border-b border-rule-faint py-1 pr-4 whitespace-nowrap ${column.figure ? 'text-right font-[600]' : ''} ${column.quiet ? 'text-ink-soft' : ''} ${isStruck && !column.keep ? 'line-through decoration-1' : ''} ${index === 0 ? `sticky left-0 z-1 ${open ? 'bg-rest-wash' : 'bg-ground group-hover:bg-well'}` : ''} ${column.wideOnly ? 'hidden lg:table-cell' : ''}`}
                    >
                      {index === 0 && onOpen ? (
                        <button
                          type="button"
                          className="min-h-8 min-w-8 text-left [text-decoration:inherit]"
                          onClick={() => onOpen(row.original)}
                        >
                          {column.cell(row.original)}
                        </button>
                      ) : (
                        <table.FlexRender cell={cell} />
                      )}
                    </td>
                  );
                })}
              </tr>
            );
          })}
        </tbody>
      </table>
      {loading ? <RowsSkeleton rows={10} rowClass="h-10" /> : null}
      {more?.has ? <More loading={more.loading} load={more.load} /> : null}
    </div>
  );
}

function Head<Row>({ column }: { column: LedgerColumn<Row> }) {
  return column.unit ? `${column.head}, ${column.unit}` : column.head;
}

function SortMark({ direction }: { direction: false | 'asc' | 'desc' }) {
  return (
    <svg
      aria-hidden="true"
      viewBox="0 0 8 6"
      className={`h-1.5 w-2 fill-current ${direction === false ? 'opacity-0' : ''} ${direction === 'asc' ? 'rotate-180' : ''}`}
    >
      <path d="M0 0h8L4 6z" />
    </svg>
  );
}

/** A link or button inside the row does its own work. */
function openUnlessLink(event: React.MouseEvent, open: () => void): void {
  if ((event.target as Element).closest('a, button, input, select')) return;
  if (window.getSelection()?.isCollapsed === false) return;
  open();
}

/** Loads when it comes into view; a button too, for those who do not scroll. */
function More({ loading, load }: { loading: boolean; load: () => void }) {
  const t = useMessages();
  const ref = useRef<HTMLDivElement>(null);
  const latest = useRef(load);
  latest.current = load;
  useEffect(() => {
    const element = ref.current;
    if (!element || typeof IntersectionObserver === 'undefined') return;
    const observer = new IntersectionObserver(([entry]) => entry?.isIntersecting && latest.current(), {
      rootMargin: '0px 0px 400px 0px',
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, []);
  return (
    <div ref={ref} className="sticky left-0 py-4">
      <Button busy={loading} onClick={load}>
        {t(loading ? 'ui.table.loadingMore' : 'ui.table.more')}
      </Button>
    </div>
  );
}
