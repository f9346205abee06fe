import { useInfiniteQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { Link, type LoaderFunctionArgs, useSearchParams } from 'react-router-dom';
import { SITE_SORTS, type Site } from '../../../shared/sites/sites.schema.ts';
import { useExportPath } from '../../api/exports.ts';
import { rowsOf } from '../../api/page.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { type SiteFilters, siteQueries } from '../../api/sites.ts';
import { useFormat } from '../../lib/format.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { useTypedFilter } from '../../lib/typed-filter.ts';
import { ButtonLink } from '../../ui/button.tsx';
import { SearchField } from '../../ui/filter-bar.tsx';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Empty, Failed } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { TakeOutLink } from '../../ui/take-out-link.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('units-screen')]);
  void queryClient.prefetchInfiniteQuery(siteQueries.list(readFilters(new URL(request.url).searchParams)));
  return null;
}

function readFilters(search: URLSearchParams): SiteFilters {
  return {
    search: search.get('search')?.trim() || undefined,
    sort: SITE_SORTS.find((sort) => sort === search.get('sort')) ?? 'name',
  };
}

/** Where the firm's units stand; each row leads to the units there. */
export function Component() {
  const t = useMessages();
  const format = useFormat();
  const [search, setSearch] = useSearchParams();
  const filters = useMemo(() => readFilters(search), [search]);
  const list = useInfiniteQuery({ ...siteQueries.list(filters), placeholderData: (before) => before });
  const rows = useMemo(() => rowsOf(list.data), [list.data]);
  const mayWrite = usePermission('sites:write');
  const mayProve = usePermission('exports:make');
  const takeOut = useExportPath('sites', filters);
  const set = (name: keyof SiteFilters) => (value: string) =>
    setSearch(
      (before) => {
        const next = new URLSearchParams(before);
        if (value === '') next.delete(name);
        else next.set(name, value);
        return next;
      },
      { replace: true },
    );
  const [typed, type] = useTypedFilter(filters.search ?? '', set('search'));
  const columns = useMemo(
    (): LedgerColumn<Site>[] => [
      { id: 'name', head: t('sites.name'), sort: 'name', cell: (site) => site.name },
      { id: 'customer', head: t('units.customer'), cell: (site) => site.customerName },
      { id: 'address', head: t('sites.address'), quiet: true, cell: (site) => site.addressLines.join(', ') },
      { id: 'jurisdiction', head: t('sites.jurisdiction'), cell: (site) => site.jurisdiction },
      { id: 'units', head: t('units.title'), figure: true, cell: (site) => format.number(site.unitCount) },
      ...(mayProve
        ? [
            {
              id: 'proof',
              head: t('sites.proof'),
              headHidden: true,
              cell: (site: Site) => (
                <Link to={`/log/proof?customerId=${site.customerId}`}>
                  {t('sites.proof')}
                  <span className="sr-only"> {site.customerName}</span>
                </Link>
              ),
            },
          ]
        : []),
      ...(mayWrite
        ? [
            {
              id: 'edit',
              head: t('units.edit'),
              headHidden: true,
              cell: (site: Site) => <Link to={`/sites/${site.id}/edit`}>{t('units.edit')}</Link>,
            },
          ]
        : []),
    ],
    [t, format, mayWrite, mayProve],
  );
  const add = mayWrite ? (
    <ButtonLink kind="act" to="/sites/new">
      {t('sites.register')}
    </ButtonLink>
  ) : null;
  return (
    <Page
      title={t('sites.title')}
      actions={
        <>
          <TakeOutLink to={takeOut} />
          {add}
        </>
      }
    >
      <div className="page-gutter flex flex-col gap-2 pt-3">
        <div className="max-w-md">
          <SearchField label={t('sites.search')} value={typed} onChange={type} />
        </div>
        {list.isError && rows.length === 0 ? <Failed error={list.error} onRetry={() => void list.refetch()} /> : null}
        {list.isSuccess && rows.length === 0 ? (
          filters.search ? (
            <Empty title={t('sites.noneFound.title')}>{t('units.noneFound.text')}</Empty>
          ) : (
            <Empty title={t('sites.empty.title')} action={add}>
              {t(mayWrite ? 'sites.empty.text' : 'units.form.askForSite')}
            </Empty>
          )
        ) : (
          <LedgerTable
            caption={t('sites.title')}
            columns={columns}
            rows={rows}
            rowId={(site) => site.id}
            to={(site) => `/units?siteId=${site.id}`}
            sort={filters.sort ?? 'name'}
            onSort={set('sort')}
            more={{
              has: list.hasNextPage,
              loading: list.isFetchingNextPage,
              load: () => void list.fetchNextPage(),
            }}
            loading={list.isPending}
          />
        )}
      </div>
    </Page>
  );
}
