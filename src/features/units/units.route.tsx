import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { useCallback, useMemo } from 'react';
import { Link, type LoaderFunctionArgs, useSearchParams } from 'react-router-dom';
import { UNIT_SORTS, type Unit } from '../../../shared/unit-register/unit.schema.ts';
import { useExportPath } from '../../api/exports.ts';
import { rowsOf } from '../../api/page.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { siteQueries } from '../../api/sites.ts';
import { type UnitFilters, unitQueries } from '../../api/units.ts';
import { useMedia } from '../../lib/media.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { useRefrigerantNames } from '../../lib/refrigerant-names.ts';
import { useTypedFilter } from '../../lib/typed-filter.ts';
import { ButtonLink } from '../../ui/button.tsx';
import { FilterBar, FilterSelect, SearchField } from '../../ui/filter-bar.tsx';
import { Empty, Failed } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { TakeOutLink } from '../../ui/take-out-link.tsx';
import { UnitLines } from './unit-lines.tsx';
import { UnitTable } from './unit-table.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('units-screen')]);
  void queryClient.prefetchInfiniteQuery(unitQueries.list(readFilters(new URL(request.url).searchParams)));
  return null;
}

function readFilters(search: URLSearchParams): UnitFilters {
  return {
    search: search.get('search')?.trim() || undefined,
    siteId: search.get('siteId') || undefined,
    refrigerant: search.get('refrigerant') || undefined,
    sort: UNIT_SORTS.find((sort) => sort === search.get('sort')) ?? 'tag',
  };
}

/** Every unit of the firm; with `then=charge` in the address the choice of the one to charge. */
export function Component() {
  const t = useMessages();
  const desk = useMedia('(width >= 48rem)');
  const [search, setSearch] = useSearchParams();
  const filters = useMemo(() => readFilters(search), [search]);
  const list = useInfiniteQuery({ ...unitQueries.list(filters), placeholderData: (before) => before });
  const rows = useMemo(() => rowsOf(list.data), [list.data]);
  const mayWrite = usePermission('units:write');
  const charging = search.get('then') === 'charge';
  const to = useCallback((unit: Unit) => `/units/${unit.id}${charging ? '/charge' : ''}`, [charging]);
  const set = (name: keyof UnitFilters) => (value: string) =>
    setSearch(
      (before) => {
        const next = new URLSearchParams(before);
        if (value === '') next.delete(name);
        else next.set(name, value);
        return next;
      },
      { replace: true },
    );
  const filtered = [filters.search, filters.refrigerant, filters.siteId].some(Boolean);
  const takeOut = useExportPath('units', filters);
  const register = (
    <ButtonLink kind="act" wide={!desk} to="/units/new">
      {t('units.register')}
    </ButtonLink>
  );
  const List = desk ? UnitTable : UnitLines;
  return (
    <Page
      title={t(charging ? 'units.titleCharge' : 'units.title')}
      {...(charging ? { lead: t('units.leadCharge') } : {})}
      actions={
        <>
          <Link to="/sites" className="inline-flex min-h-12 items-center">
            {t('units.toSites')}
          </Link>
          {charging ? null : <TakeOutLink to={takeOut} />}
          {mayWrite && desk ? register : null}
        </>
      }
      next={mayWrite && !desk && !charging ? register : undefined}
    >
      <div className="desk:pt-4">
        <Filters filters={filters} set={set} />
      </div>
      {list.isError && rows.length === 0 ? (
        <div className="page-gutter pt-5">
          <Failed error={list.error} onRetry={() => void list.refetch()} />
        </div>
      ) : list.isSuccess && rows.length === 0 ? (
        <div className="page-gutter pt-4">
          {filtered ? (
            <Empty title={t('units.noneFound.title')}>{t('units.noneFound.text')}</Empty>
          ) : (
            <Empty title={t('units.empty.title')} action={mayWrite ? register : null}>
              {t('units.empty.text')}
            </Empty>
          )}
        </div>
      ) : (
        <div className="page-gutter">
          <List
            units={rows}
            loading={list.isPending}
            sort={filters.sort ?? 'tag'}
            onSort={set('sort')}
            to={to}
            more={{
              has: list.hasNextPage,
              loading: list.isFetchingNextPage,
              load: () => void list.fetchNextPage(),
            }}
          />
        </div>
      )}
    </Page>
  );
}

function Filters({
  filters,
  set,
}: {
  filters: UnitFilters;
  set: (name: keyof UnitFilters) => (value: string) => void;
}) {
  const t = useMessages();
  const names = useRefrigerantNames();
  const sites = useQuery(siteQueries.choice());
  const [typed, type] = useTypedFilter(filters.search ?? '', set('search'));
  const siteChoices = sites.data?.map(({ id, name }) => ({ value: id, label: name })) ?? [];
  const active = [filters.refrigerant, siteChoices.find(({ value }) => value === filters.siteId)?.label].filter(
    (each): each is string => each !== undefined,
  );
  return (
    <FilterBar
      summary={active.length > 0 ? active.join(', ') : t('units.filter.none')}
      search={<SearchField label={t('units.filter.search')} value={typed} onChange={type} />}
    >
      <FilterSelect
        label={t('units.site')}
        any={t('units.filter.any')}
        value={filters.siteId ?? ''}
        choices={siteChoices}
        onChange={set('siteId')}
      />
      <FilterSelect
        label={t('units.refrigerant')}
        any={t('units.filter.all')}
        value={filters.refrigerant ?? ''}
        choices={names.map(({ designation }) => ({ value: designation, label: designation }))}
        onChange={set('refrigerant')}
      />
    </FilterBar>
  );
}
