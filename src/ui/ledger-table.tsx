import { type ColumnDef, rowSortingFeature, type SortingState, tableFeatures, useTable } from '@tanstack/react-table';
import { type ReactNode, type RefObject, useEffect, useMemo, useRef } from 'react';
import type { To } from 'react-router-dom';
import { useMessages } from '../lib/messages.ts';
import { Button } from './button.tsx';
import { Opener, openRow, useRowKeys } from './ledger-rows.tsx';
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
  /** The head is for a screen reader alone: the column of an arrow, say. */
  headHidden?: boolean;
  /** The order that the first press asks for. */
  firstDown?: boolean;
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
  /** Where the row leads, instead of `onOpen`: its first cell is a link, which opens in another tab too. */
  to?: (row: Row) => To;
  openId?: string | null;
  /** Rows that belong to the open one: a bar at their left edge. */
  tied?: (row: Row) => boolean;
  /** Reversed entries and what reverses them. */
  struck?: (row: Row) => boolean;
  /** Keyset paging: more rows can be asked for. */
  more?: { has: boolean; loading: boolean; load: () => void; label?: string; end?: ReactNode };
  /** The first page is on its way: rows of the same height stand in. */
  loading?: boolean;
  /** Height of those rows, where they hold more than one line. */
  loadingRow?: string;
  /** `own`: fills its flex parent and scrolls in itself both ways, so that head and first column stay on a phone too. */
  scroll?: 'page' | 'own';
  /** The element around the table, for `focusRow`. */
  region?: RefObject<HTMLDivElement | null>;
}

const features = tableFeatures({ rowSortingFeature });

/**
 * A ledger: dense rows, a head and a first column that stay in view, figures right-aligned with their unit in the head.
 * Order, filter and pages are the server's; the table only shows and asks. One row is in the order of the Tab key: the
 * arrow keys, Home and End go on from there, Enter opens.
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
  const ownRegion = useRef<HTMLDivElement>(null);
  const region = props.region ?? ownRegion;
  const keys = useRowKeys(props);
  const own = props.scroll === 'own';
  const opens = onOpen !== undefined || props.to !== undefined;
  return (
    // Only a table may scroll sideways; its first column stays.
    <div
      ref={region}
      // Without a row to open, the keys need the region itself to scroll by (WCAG 2.1.1).
      {...(opens || rows.length === 0 ? {} : { role: 'region', tabIndex: 0, 'aria-label': caption })}
      className={
        own
          ? 'relative min-h-0 flex-1 scroll-pt-12 overflow-auto overscroll-contain'
          : 'relative -mx-[1.125rem] overflow-x-auto px-[1.125rem] desk:-mx-6 desk:px-6 lg:mx-0 lg:overflow-x-visible lg:px-0'
      }
    >
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
                    className={`type-label border-b border-ink bg-ground pr-4 text-[0.875rem] font-[550] whitespace-nowrap text-ink-soft ${own ? `sticky top-0 ${index === 0 ? 'pl-[1.125rem] desk:pl-6' : ''}` : 'lg:sticky lg:top-14'} ${index === 0 ? 'z-3' : own ? 'z-2' : 'lg:z-2'} ${column.figure ? 'text-right' : 'text-left'} ${index === 0 ? 'sticky left-0' : ''} ${column.wideOnly ? 'hidden lg:table-cell' : ''}`}
                  >
                    {column.sort && onSort ? (
                      <button
                        type="button"
                        className={`inline-flex min-h-12 min-w-12 items-center gap-1 hover:text-ink desk:min-h-10 ${column.figure ? 'justify-end' : ''} ${direction ? 'text-ink' : ''}`}
                        onClick={() => onSort(nextSort(column, direction))}
                      >
                        <Head column={column} />
                        <span className="sr-only">{t('ui.table.sortBy', { column: column.head })}</span>
                        <SortMark direction={direction} />
                      </button>
                    ) : (
                      <span className={column.headHidden ? 'sr-only' : 'inline-flex min-h-10 items-center'}>
                        <Head column={column} />
                      </span>
                    )}
                  </th>
                );
              })}
            </tr>
          ))}
        </thead>
        <tbody onKeyDown={opens ? keys.onKeyDown : undefined} onFocus={opens ? keys.onFocus : undefined}>
          {table.getRowModel().rows.map((row, position) => {
            const open = row.id === openId;
            const tied = props.tied?.(row.original) ?? false;
            const isStruck = struck?.(row.original) ?? false;
            return (
              <tr
                key={row.id}
                aria-current={open || undefined}
                className={`group ${opens ? 'cursor-pointer' : ''} ${open ? 'bg-rest-wash [&>td]:border-rest [&>td]:shadow-[inset_0_1px_0_var(--color-rest)]' : 'hover:bg-well'} ${isStruck ? 'text-ink-soft' : ''}`}
                onClick={opens ? openRow : undefined}
              >
                {row.getAllCells().map((cell, index) => {
                  const column = byId.get(cell.column.id) as LedgerColumn<Row>;
                  return (
                    <td
                      key={cell.id}
                      className={`h-12 border-b border-rule-faint desk:h-10 py-1 pr-4 whitespace-nowrap ${column.figure ? 'text-right font-[600]' : ''} ${column.quiet ? 'text-ink-soft' : ''} ${isStruck && !column.keep ? 'line-through decoration-1' : ''} ${index === 0 ? `sticky left-0 z-1 ${own ? 'pl-[1.125rem] desk:pl-6' : ''} ${open ? 'bg-rest-wash' : 'bg-ground group-hover:bg-well'} ${tied ? 'shadow-[inset_4px_0_0_var(--color-rest)]!' : ''}` : ''} ${column.wideOnly ? 'hidden lg:table-cell' : ''}`}
                    >
                      {index === 0 && opens ? (
                        <Opener
                          id={row.id}
                          tabbable={keys.tabbable(row.id, position)}
                          to={props.to?.(row.original)}
                          onOpen={() => onOpen?.(row.original)}
                        >
                          {column.cell(row.original)}
                        </Opener>
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
      {loading ? <RowsSkeleton rows={10} rowClass={props.loadingRow ?? 'h-12 desk:h-10'} /> : null}
      {more?.has ? <More {...more} root={own ? region : null} /> : null}
      {more && !more.has && more.end ? (
        <p className={`type-label sticky left-0 py-4 text-ink-soft ${own ? 'page-gutter' : ''}`}>{more.end}</p>
      ) : null}
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

function nextSort<Row>({ sort, firstDown }: LedgerColumn<Row>, direction: false | 'asc' | 'desc'): string {
  const down = direction === 'asc' || (direction === false && firstDown);
  return down ? `-${sort}` : (sort as string);
}

/** Loads when it comes into view; a button too, for those who do not scroll. */
function More({
  loading,
  load,
  label,
  root,
}: NonNullable<Props<object>['more']> & { root: RefObject<HTMLDivElement | null> | null }) {
  const t = useMessages();
  const ref = useRef<HTMLDivElement>(null);
  const latest = useRef(load);
  latest.current = load;
  // Watched anew after each page, so that a short page that leaves the end in view is followed by the next.
  useEffect(() => {
    const element = ref.current;
    if (!element || loading || typeof IntersectionObserver === 'undefined') return;
    const observer = new IntersectionObserver(([entry]) => entry?.isIntersecting && latest.current(), {
      root: root?.current ?? null,
      rootMargin: '0px 0px 400px 0px',
    });
    observer.observe(element);
    return () => observer.disconnect();
  }, [loading, root]);
  return (
    <div ref={ref} className={`sticky left-0 py-4 ${root ? 'page-gutter' : ''}`}>
      <Button busy={loading} onClick={load}>
        {loading ? t('ui.table.loadingMore') : (label ?? t('ui.table.more'))}
      </Button>
    </div>
  );
}
