import { useInfiniteQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { type LoaderFunctionArgs, useSearchParams } from 'react-router-dom';
import { exportAskedFor, exportQueries } from '../../api/exports.ts';
import { rowsOf } from '../../api/page.ts';
import { requireSession } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Empty, Failed } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { ExportTable } from './export-table.tsx';
import { NewExport } from './new-export.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([
    requireSession(request),
    loadMessages('exports-screen', 'exports', 'log-screen', 'cylinders-screen', 'people-screen'),
  ]);
  return null;
}

/** What is taken out of the program: asked for here, made in the background, downloaded within a day. */
export function Component() {
  const t = useMessages();
  const [search, setSearch] = useSearchParams();
  const asked = useMemo(() => exportAskedFor(search), [search]);
  const list = useInfiniteQuery(exportQueries.list());
  const rows = useMemo(() => rowsOf(list.data), [list.data]);
  return (
    <Page title={t('exports.title')} lead={t('exports.lead')}>
      <div className="page-gutter flex flex-col gap-8 pt-4">
        <NewExport key={search.toString()} asked={asked} onStarted={() => setSearch({}, { replace: true })} />
        {list.isError && rows.length === 0 ? (
          <Failed error={list.error} onRetry={() => void list.refetch()} />
        ) : list.isSuccess && rows.length === 0 ? (
          <Empty title={t('exports.none')}>{t('exports.noneText')}</Empty>
        ) : (
          <ExportTable
            rows={rows}
            loading={list.isPending}
            more={{
              has: list.hasNextPage,
              loading: list.isFetchingNextPage,
              load: () => void list.fetchNextPage(),
            }}
          />
        )}
      </div>
    </Page>
  );
}
