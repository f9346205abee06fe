import type { ReactNode } from 'react';
import { useState } from 'react';
import { useMessages } from '../../lib/messages.ts';
import { useTypedFilter } from '../../lib/typed-filter.ts';
import { Button } from '../../ui/button.tsx';
import { Dialog } from '../../ui/dialog.tsx';
import { FilterBar, SearchField } from '../../ui/filter-bar.tsx';
import { type LedgerColumn, LedgerTable } from '../../ui/ledger-table.tsx';
import { Done, Empty, Failed } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { TakeOutLink } from '../../ui/take-out-link.tsx';

interface List {
  isPending: boolean;
  isError: boolean;
  isSuccess: boolean;
  error: unknown;
  hasNextPage: boolean;
  isFetchingNextPage: boolean;
  refetch: () => unknown;
  fetchNextPage: () => unknown;
}

interface Props<Row extends { id: string }> {
  /** Prefix of the messages: title, lead, new, empty, emptyText. */
  words: string;
  list: List;
  rows: readonly Row[];
  columns: readonly LedgerColumn<Row>[];
  mayWrite: boolean;
  search: string;
  onSearch: (value: string) => void;
  sort: string;
  onSort: (sort: string) => void;
  filters: ReactNode;
  filtered: boolean;
  filterSummary: string;
  open: Row | 'new' | null;
  onOpen: (open: Row | 'new' | null) => void;
  openTitle: string;
  /** Where this list is taken out as filtered; null for who may not. */
  takeOut: string | null;
  form: (onDone: (message: string) => void) => ReactNode;
}

/** A small register: a ledger that is searched and filtered, and a form over it for one row. */
export function RegisterPage<Row extends { id: string }>(props: Props<Row>) {
  const { words, list, rows, mayWrite, open, onOpen } = props;
  const t = useMessages();
  const [done, setDone] = useState<string | null>(null);
  const [typed, type] = useTypedFilter(props.search, props.onSearch);
  const add = () => {
    setDone(null);
    onOpen('new');
  };
  return (
    <Page
      title={t(`${words}.title`)}
      lead={t(`${words}.lead`)}
      actions={
        <>
          <TakeOutLink to={props.takeOut} />
          {mayWrite ? (
            <Button kind="act" onClick={add}>
              {t(`${words}.new`)}
            </Button>
          ) : null}
        </>
      }
    >
      <div className="pt-4">
        <FilterBar
          summary={props.filterSummary}
          search={<SearchField label={t('registers.search')} value={typed} onChange={type} />}
        >
          {props.filters}
        </FilterBar>
      </div>
      <div className="page-gutter flex flex-col gap-3 pt-2">
        {done ? <Done>{done}</Done> : null}
        {list.isError && rows.length === 0 ? (
          <Failed error={list.error} onRetry={() => void list.refetch()} />
        ) : list.isSuccess && rows.length === 0 ? (
          props.filtered || props.search !== '' ? (
            <Empty title={t('registers.noneFound')}>{t('registers.noneFoundText')}</Empty>
          ) : (
            <Empty
              title={t(`${words}.empty`)}
              action={
                mayWrite ? (
                  <Button kind="act" onClick={add}>
                    {t(`${words}.new`)}
                  </Button>
                ) : null
              }
            >
              {t(`${words}.emptyText`)}
            </Empty>
          )
        ) : (
          <LedgerTable
            caption={t(`${words}.title`)}
            columns={props.columns}
            rows={rows}
            rowId={({ id }) => id}
            sort={props.sort}
            onSort={props.onSort}
            loading={list.isPending}
            onOpen={
              mayWrite
                ? (row) => {
                    setDone(null);
                    onOpen(row);
                  }
                : undefined
            }
            more={{
              has: list.hasNextPage,
              loading: list.isFetchingNextPage,
              load: () => void list.fetchNextPage(),
            }}
          />
        )}
      </div>
      <Dialog open={open !== null} onClose={() => onOpen(null)} title={props.openTitle}>
        {props.form((message) => {
          onOpen(null);
          setDone(message);
        })}
      </Dialog>
    </Page>
  );
}
