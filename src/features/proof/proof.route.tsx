import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { type LoaderFunctionArgs, useNavigate, useSearchParams } from 'react-router-dom';
import { journalQueries } from '../../api/journal.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Failed, RowsSkeleton } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { ChainState } from './chain-state.tsx';
import { CheckLog } from './check-log.tsx';
import { CheckPackage } from './check-package.tsx';
import { KeyList } from './key-list.tsx';
import { KnownBefore, NOTHING_BEFORE } from './known-before.tsx';
import { MakePackage } from './make-package.tsx';
import { SealList } from './seal-list.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('proof')]);
  void queryClient.prefetchQuery(journalQueries.state());
  return null;
}

/** Null for what is no day: an old or a mistyped link still opens. */
const dayOf = (text: string | null) => (text !== null && /^\d{4}-\d{2}-\d{2}$/.test(text) ? text : null);

/** That nothing in the log was changed: what stands, the check of it, and what others are given to check by themselves. */
export function Component() {
  const t = useMessages();
  const navigate = useNavigate();
  const [search] = useSearchParams();
  const mayExport = usePermission('exports:make');
  const state = useQuery(journalQueries.state());
  const keys = useQuery(journalQueries.keys());
  const [before, setBefore] = useState(NOTHING_BEFORE);
  const failed = [state, keys].find(({ isError }) => isError);
  const asked = {
    unitId: search.get('unitId'),
    customerId: search.get('customerId'),
    from: dayOf(search.get('from')),
    to: dayOf(search.get('to')),
  };
  return (
    <Page
      title={t('proof.title')}
      lead={t('proof.lead')}
      back={{ label: t('proof.back'), onPress: () => void navigate('/log') }}
    >
      <div className="page-gutter grid gap-x-12 gap-y-10 pt-5 wide:grid-cols-2">
        <div className="flex min-w-0 flex-col gap-10">
          {failed ? (
            <Failed
              error={failed.error}
              onRetry={() => {
                void state.refetch();
                void keys.refetch();
              }}
            />
          ) : state.data ? (
            <ChainState state={state.data} />
          ) : (
            <RowsSkeleton rows={5} />
          )}
          {mayExport ? <CheckLog before={before} /> : null}
          <CheckPackage before={before} />
          <KnownBefore value={before} onChange={setBefore} />
        </div>
        <div className="flex min-w-0 flex-col gap-10">
          {mayExport ? <MakePackage key={search.toString()} asked={asked} held={keys.data?.held ?? true} /> : null}
          <SealList />
          {keys.data ? <KeyList keys={keys.data} /> : null}
        </div>
      </div>
    </Page>
  );
}
