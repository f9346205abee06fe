import { useInfiniteQuery, useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { Link, type LoaderFunctionArgs, useNavigate, useSearchParams } from 'react-router-dom';
import { CYLINDER_KINDS, CYLINDER_SORTS, type Cylinder } from '../../../shared/cylinders/cylinder.schema.ts';
import { type CylinderFilters, cylinderQueries } from '../../api/cylinders.ts';
import { useExportPath } from '../../api/exports.ts';
import { rowsOf } from '../../api/page.ts';
import { peopleQueries } from '../../api/people.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession, useOnHand, usePermission } from '../../api/session.ts';
import { useMedia } from '../../lib/media.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { useRefrigerantNames } from '../../lib/refrigerant-names.ts';
import { useTypedFilter } from '../../lib/typed-filter.ts';
import { ButtonLink } from '../../ui/button.tsx';
import { FilterBar, FilterSelect, SearchField } from '../../ui/filter-bar.tsx';
import { Empty, Failed } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { TakeOutLink } from '../../ui/take-out-link.tsx';
import { CylinderLines } from './cylinder-lines.tsx';
import { CylinderTable } from './cylinder-table.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('cylinders-screen', 'stock-take')]);
  void queryClient.prefetchInfiniteQuery(cylinderQueries.list(readFilters(new URL(request.url).searchParams)));
  return null;
}

function readFilters(search: URLSearchParams): CylinderFilters {
  return {
    search: search.get('search')?.trim() || undefined,
    refrigerant: search.get('refrigerant') || undefined,
    heldBy: search.get('heldBy') || undefined,
    kind: CYLINDER_KINDS.find((kind) => kind === search.get('kind')),
    sort: CYLINDER_SORTS.find((sort) => sort === search.get('sort')) ?? 'tag',
  };
}

/** Every cylinder of the firm on its beam, with who has it. */
export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const desk = useMedia('(width >= 48rem)');
  const [search, setSearch] = useSearchParams();
  const filters = useMemo(() => readFilters(search), [search]);
  const list = useInfiniteQuery({ ...cylinderQueries.list(filters), placeholderData: (before) => before });
  const rows = useMemo(() => rowsOf(list.data), [list.data]);
  const mayWrite = usePermission('cylinders:write');
  const set = (name: keyof CylinderFilters) => (value: string) =>
    setSearch(
      (before) => {
        const next = new URLSearchParams(before);
        if (value === '') next.delete(name);
        else next.set(name, value);
        return next;
      },
      { replace: true },
    );
  const filtered = [filters.search, filters.refrigerant, filters.heldBy, filters.kind].some(Boolean);
  const takeOut = useExportPath('cylinders', filters);
  const List = desk ? CylinderTable : CylinderLines;
  return (
    <Page
      title={t('cylinders.title')}
      actions={
        <>
          <Link to="/cylinders/stock-take" className="inline-flex min-h-12 items-center">
            {t('stockTake.links')}
          </Link>
          {/* On a phone these are in "more", and the tag is scanned by the wide button. */}
          {desk ? (
            <>
              <Link to="/cylinders/scan" className="inline-flex min-h-12 items-center">
                {t('stockTake.scanLink')}
              </Link>
              <Link to="/tools" className="inline-flex min-h-12 items-center">
                {t('cylinders.toTools')}
              </Link>
              <Link to="/parties" className="inline-flex min-h-12 items-center">
                {t('cylinders.toParties')}
              </Link>
              <TakeOutLink to={takeOut} />
            </>
          ) : null}
          {mayWrite && desk ? (
            <ButtonLink kind="act" to="/cylinders/new">
              {t('cylinders.register')}
            </ButtonLink>
          ) : null}
        </>
      }
      next={
        desk ? undefined : (
          <div className="flex gap-3">
            <ButtonLink kind="act" wide to="/cylinders/scan">
              {t('stockTake.scanLink')}
            </ButtonLink>
            {mayWrite ? (
              <ButtonLink wide to="/cylinders/new">
                {t('cylinders.register')}
              </ButtonLink>
            ) : null}
          </div>
        )
      }
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
            <Empty title={t('cylinders.noneFound.title')}>{t('cylinders.noneFound.text')}</Empty>
          ) : (
            <Empty
              title={t('cylinders.empty.title')}
              action={
                mayWrite ? (
                  <ButtonLink kind="act" to="/cylinders/new">
                    {t('cylinders.register')}
                  </ButtonLink>
                ) : null
              }
            >
              {t('cylinders.empty.text')}
            </Empty>
          )}
        </div>
      ) : (
        <div className="page-gutter">
          <List
            cylinders={rows}
            loading={list.isPending}
            sort={filters.sort ?? 'tag'}
            onSort={set('sort')}
            onOpen={({ id }: Cylinder) => void navigate(`/cylinders/${id}`)}
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
  filters: CylinderFilters;
  set: (name: keyof CylinderFilters) => (value: string) => void;
}) {
  const t = useMessages();
  const seesPeople = usePermission('people:read');
  const people = useQuery({ ...peopleQueries.everybody(), enabled: seesPeople });
  const names = useRefrigerantNames();
  const onHand = useOnHand();
  const [typed, type] = useTypedFilter(filters.search ?? '', set('search'));
  const refrigerants = [
    ...new Set([
      ...(onHand?.byRefrigerant.map(({ refrigerant }) => refrigerant) ?? []),
      ...names.map(({ designation }) => designation),
    ]),
  ].map((value) => ({ value, label: value }));
  const who = people.data?.filter(({ active }) => active).map(({ id, name }) => ({ value: id, label: name })) ?? [];
  const kinds = CYLINDER_KINDS.map((kind) => ({ value: kind, label: t(`cylinders.kind.${kind}`) }));
  const active = [
    filters.refrigerant,
    who.find(({ value }) => value === filters.heldBy)?.label,
    kinds.find(({ value }) => value === filters.kind)?.label,
  ].filter((each): each is string => each !== undefined);
  return (
    <FilterBar
      summary={active.length > 0 ? active.join(', ') : t('cylinders.filter.none')}
      search={<SearchField label={t('cylinders.filter.search')} value={typed} onChange={type} />}
    >
      <FilterSelect
        label={t('cylinders.refrigerant')}
        any={t('cylinders.filter.all')}
        value={filters.refrigerant ?? ''}
        choices={refrigerants}
        onChange={set('refrigerant')}
      />
      {seesPeople ? (
        <FilterSelect
          label={t('cylinders.holder')}
          any={t('cylinders.filter.any')}
          value={filters.heldBy ?? ''}
          choices={who}
          onChange={set('heldBy')}
        />
      ) : null}
      <FilterSelect
        label={t('cylinders.kind')}
        any={t('cylinders.filter.all')}
        value={filters.kind ?? ''}
        choices={kinds}
        onChange={set('kind')}
      />
    </FilterBar>
  );
}
