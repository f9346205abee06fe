import { useQuery } from '@tanstack/react-query';
import { useState } from 'react';
import { Link, type LoaderFunctionArgs, useParams } from 'react-router-dom';
import type { Checklist, CloseResponse, OpenItem } from '../../../shared/periods/periods.schema.ts';
import { periodQueries } from '../../api/periods.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { useFormat } from '../../lib/format.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Failed, Notice, RowsSkeleton } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { asTitle, longMonth } from './book-words.ts';
import { CarryDialog } from './close/carry-dialog.tsx';
import { MonthList } from './close/month-list.tsx';
import { OpenItems } from './close/open-items.tsx';
import { SettleDialog } from './close/settle-dialog.tsx';
import { SettledList } from './close/settled-list.tsx';
import { SignOff } from './close/sign-off.tsx';
import { SignedOff } from './close/signed-off.tsx';

export async function loader({ request, params }: LoaderFunctionArgs) {
  if (!/^\d{4}-(0[1-9]|1[0-2])$/.test(params.month ?? '')) throw new Response(null, { status: 404 });
  await Promise.all([requireSession(request), loadMessages('books', 'statement', 'log-screen', 'server')]);
  return null;
}

/** One month: what is open in it, settled or carried by somebody, and the owner's word under it. */
export function Component() {
  const { month = '' } = useParams();
  const t = useMessages();
  const { locale } = useFormat();
  const checklist = useQuery(periodQueries.checklist(month));
  const { data } = checklist;
  const name = longMonth(locale, month);
  return (
    <Page
      title={asTitle(t(data?.state === 'closed' ? 'books.close.titleClosed' : 'books.close.title', { month: name }))}
      {...(data ? { lead: <Lead checklist={data} /> } : {})}
      actions={
        <Link to={`/books?from=${month}&to=${month}`} className="inline-flex min-h-12 items-center">
          {t('books.close.toBooks')}
        </Link>
      }
    >
      <div className="page-gutter flex flex-col gap-9 pt-5">
        {checklist.isError ? (
          <Failed error={checklist.error} onRetry={() => void checklist.refetch()} />
        ) : data ? (
          <Month key={month} checklist={data} />
        ) : (
          <RowsSkeleton rows={10} rowClass="h-20" />
        )}
      </div>
    </Page>
  );
}

function Lead({ checklist: { state, items, undecided } }: { checklist: Checklist }) {
  const t = useMessages();
  if (state === 'closed') return t('books.close.lead.closed');
  if (state === 'running') return t('books.close.lead.running');
  const needed = items.filter(({ needsDecision }) => needsDecision).length;
  return undecided === 0 ? t('books.close.lead.ready') : t('books.close.lead.open', { undecided, count: needed });
}

function Month({ checklist }: { checklist: Checklist }) {
  const t = useMessages();
  const settles = usePermission('books:settle');
  const [settling, setSettling] = useState<Extract<OpenItem, { kind: 'difference' }> | null>(null);
  const [carrying, setCarrying] = useState<readonly OpenItem[]>([]);
  // Told by the answer to the sign-off; whoever opens the page later reads it in the record.
  const [closed, setClosed] = useState<CloseResponse | null>(null);
  const { month, state, items } = checklist;
  const decidable = settles && (state === 'next' || state === 'over');
  return (
    <>
      {checklist.signedOff ? <SignedOff checklist={checklist} closed={closed} /> : null}
      {state === 'over' || state === 'running' ? <NotNext state={state} /> : null}
      {state === 'closed' ? null : (
        <OpenItems
          items={items}
          notListed={checklist.notListed}
          timeZone={checklist.timeZone}
          {...(decidable ? { onSettle: setSettling, onCarry: setCarrying } : {})}
        />
      )}
      <SettledList rows={checklist.settled} timeZone={checklist.timeZone} />
      {state === 'next' ? <SignOff checklist={checklist} onClosed={setClosed} /> : null}
      <MonthList here={month} />
      {settling ? <SettleDialog month={month} item={settling} onClose={() => setSettling(null)} /> : null}
      {carrying.length > 0 ? <CarryDialog month={month} items={carrying} onClose={() => setCarrying([])} /> : null}
      <span className="sr-only" role="status">
        {t('books.close.undecided', { count: checklist.undecided })}
      </span>
    </>
  );
}

/** Months are closed in order: which one is to be closed before this one. */
function NotNext({ state }: { state: 'over' | 'running' }) {
  const t = useMessages();
  const { locale } = useFormat();
  const next = useQuery(periodQueries.list()).data?.next;
  return (
    <Notice title={t(`books.close.notNext.${state}`)}>
      {next ? (
        <Link to={`/books/close/${next}`} className="inline-flex min-h-6 items-center">
          {t('books.toClose', { month: longMonth(locale, next) })}
        </Link>
      ) : null}
    </Notice>
  );
}
