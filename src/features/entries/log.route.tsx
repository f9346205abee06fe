import { useInfiniteQuery, useQueries } from '@tanstack/react-query';
import { useCallback, useMemo, useRef } from 'react';
import { type LoaderFunctionArgs, Outlet, useNavigate, useParams, useSearchParams } from 'react-router-dom';
import type { EntryRow } from '../../../shared/entries/entry.schema.ts';
import { entryQueries } from '../../api/entries.ts';
import { rowsOf } from '../../api/page.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession, useOnHand, usePermission, useSession } from '../../api/session.ts';
import { useFormat } from '../../lib/format.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { ButtonLink } from '../../ui/button.tsx';
import { focusRow } from '../../ui/ledger-rows.tsx';
import { LedgerTable } from '../../ui/ledger-table.tsx';
import { Empty, Failed } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { useLogColumns } from './log-columns.tsx';
import { LogFilters } from './log-filter-bar.tsx';
import { filterCount, readFilters, withFilter } from './log-filters.ts';
import { groupsTiedTo, groupsToAskFor, tiesOf } from './ties.ts';

const PAGE = 60;

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('log-screen', 'server')]);
  void queryClient.prefetchInfiniteQuery(entryQueries.list(readFilters(new URL(request.url).searchParams), PAGE));
  return null;
}

/** What an open sheet tells the list: which groups belong together, and how it is closed. */
export interface LogOutlet {
  close: () => void;
  rows: readonly EntryRow[];
}

/** The log: every entry as a line of a ledger, and the whole group behind one beside it. */
export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const { groupId } = useParams();
  const [search, setSearch] = useSearchParams();
  const filters = useMemo(() => readFilters(search), [search]);
  const list = useInfiniteQuery(entryQueries.list(filters, PAGE));
  const rows = useMemo(() => rowsOf(list.data), [list.data]);
  const ties = useTies(rows);
  const columns = useLogColumns({ rows, ties, zone: useSession()?.firm.timeZone ?? '', beside: groupId !== undefined });
  const region = useRef<HTMLDivElement>(null);
  const openRow = useOpenRow(rows, groupId, search.get('entry'));

  const close = useCallback(() => {
    const id = openRow?.id;
    const next = new URLSearchParams(search);
    next.delete('entry');
    void navigate({ pathname: '/log', search: next.toString() });
    // After the sheet is gone: a modal gives the focus back by itself, a sheet beside the list does not.
    if (id) requestAnimationFrame(() => focusRow(region.current, id));
  }, [navigate, openRow, search]);

  const to = useCallback(
    (row: EntryRow) => {
      const next = new URLSearchParams(search);
      next.set('entry', String(row.sequence));
      return { pathname: `/log/${row.groupId}`, search: next.toString() };
    },
    [search],
  );
  const outlet = useMemo<LogOutlet>(() => ({ close, rows }), [close, rows]);
  const tied = useMemo(() => (groupId ? groupsTiedTo(groupId, rows, ties) : null), [groupId, rows, ties]);
  return (
    // biome-ignore lint/a11y/noStaticElementInteractions: Escape closes the sheet from the list as well
    <div
      className="flex h-[calc(100dvh-4.5rem)] min-h-[28rem] desk:h-[calc(100dvh-3.5rem)]"
      onKeyDown={(event) => {
        if (event.key === 'Escape' && groupId && !event.defaultPrevented) close();
      }}
    >
      <Page fill title={t('log.title')} status={<OnHand />}>
        <div className="desk:pt-4">
          <LogFilters filters={filters} />
        </div>
        {list.isError && rows.length === 0 ? (
          <div className="page-gutter pt-5">
            <Failed error={list.error} onRetry={() => void list.refetch()} />
          </div>
        ) : list.isSuccess && rows.length === 0 ? (
          <NothingHere filtered={filterCount(filters) > 0} />
        ) : (
          <LedgerTable
            scroll="own"
            region={region}
            caption={t('log.table')}
            columns={columns}
            rows={rows}
            rowId={(row) => row.id}
            to={to}
            openId={openRow?.id ?? null}
            tied={tied && tied.size > 1 ? (row) => tied.has(row.groupId) : undefined}
            struck={(row) => row.reversedByGroupId !== null}
            sort={filters.sort}
            onSort={(sort) => setSearch((before) => withFilter(before, 'sort', sort), { replace: true })}
            loading={list.isPending}
            more={{
              has: list.hasNextPage,
              loading: list.isFetchingNextPage,
              load: () => void list.fetchNextPage(),
              label: t(filters.sort?.startsWith('-') ? 'log.older' : 'log.newer'),
              end: rows.length > 0 ? t(filters.sort?.startsWith('-') ? 'log.firstEntry' : 'log.lastEntry') : null,
            }}
          />
        )}
      </Page>
      <Outlet context={outlet} />
    </div>
  );
}

/** On a phone the band with the firm's mass on hand is not there: the log's head says it. */
function OnHand() {
  const onHand = useOnHand();
  const format = useFormat();
  const t = useMessages();
  if (!onHand) return null;
  return <span className="desk:hidden">{t('log.onHand', { mass: format.stock(onHand.massG) })}</span>;
}

function NothingHere({ filtered }: { filtered: boolean }) {
  const t = useMessages();
  const mayRegister = usePermission('cylinders:write');
  return (
    <div className="page-gutter pt-4">
      {filtered ? (
        <Empty title={t('log.noneFound.title')}>{t('log.noneFound.text')}</Empty>
      ) : (
        <Empty
          title={t('log.empty.title')}
          action={
            mayRegister ? (
              <ButtonLink kind="act" to="/cylinders/new">
                {t('log.empty.action')}
              </ButtonLink>
            ) : null
          }
        >
          {t('log.empty.text')}
        </Empty>
      )}
    </div>
  );
}

/** The row that the address names; without a number the group's first own entry. */
function useOpenRow(rows: readonly EntryRow[], groupId: string | undefined, number: string | null) {
  return useMemo(() => {
    if (!groupId) return undefined;
    const ofGroup = rows.filter((row) => row.groupId === groupId);
    return (
      ofGroup.find((row) => String(row.sequence) === number) ?? ofGroup.find((row) => !row.addedByServer) ?? ofGroup[0]
    );
  }, [rows, groupId, number]);
}

/** Reversals may stand far from their originals; those that have not arrived are asked for by themselves. */
function useTies(rows: readonly EntryRow[]) {
  const ids = useMemo(() => groupsToAskFor(rows), [rows]);
  const asked = useQueries({
    queries: ids.map((id) => entryQueries.group(id)),
    combine: (results) => results.flatMap(({ data }) => (data ? [data] : [])),
  });
  return useMemo(() => tiesOf(rows, asked), [rows, asked]);
}
