import { useQuery } from '@tanstack/react-query';
import { useEffect, useRef, useState } from 'react';
import { type LoaderFunctionArgs, useOutletContext, useParams, useSearchParams } from 'react-router-dom';
import type { EntryRow, GroupView } from '../../../shared/entries/entry.schema.ts';
import { entryQueries } from '../../api/entries.ts';
import { Problem } from '../../api/http.ts';
import { queryClient } from '../../api/query-client.ts';
import { useFormat } from '../../lib/format.ts';
import { useMedia } from '../../lib/media.ts';
import { useMessages } from '../../lib/messages.ts';
import { Sheet } from '../../ui/dialog.tsx';
import { Done, Failed, RowsSkeleton } from '../../ui/notice.tsx';
import { AnswerForm } from './answer-form.tsx';
import { GroupActions } from './group-actions.tsx';
import { GroupDetails } from './group-details.tsx';
import type { LogOutlet } from './log.route.tsx';
import { ReverseForm } from './reverse-form.tsx';

export async function loader({ params }: LoaderFunctionArgs) {
  if (params.groupId) void queryClient.prefetchQuery(entryQueries.group(params.groupId));
  return null;
}

/** What the sheet shows: the group, or a form about it in its place. */
type View = 'details' | 'reverse' | 'answer';

/** The group behind an entry, beside the log on a desk and over it on a phone. */
export function Component() {
  const { groupId = '' } = useParams();
  return <EntrySheet key={groupId} groupId={groupId} />;
}

function EntrySheet({ groupId }: { groupId: string }) {
  const t = useMessages();
  const format = useFormat();
  const [search] = useSearchParams();
  const { close } = useOutletContext<LogOutlet>();
  const desk = useMedia('(width >= 64rem)');
  const group = useQuery(entryQueries.group(groupId));
  const [view, setView] = useState<View>('details');
  const [done, setDone] = useState<string | null>(null);
  const top = useFocusAtOpening(desk);
  const main = group.data ? mainEntry(group.data, search.get('entry')) : undefined;
  const number = main ? format.number(main.sequence) : (search.get('entry') ?? '');
  const finish = (message: string | null) => {
    setDone(message);
    setView('details');
    top.current?.focus();
  };
  return (
    <Sheet
      open
      desk={desk}
      onClose={close}
      title={group.data && !main ? t('log.group.none') : t('log.group.entry', { number })}
    >
      <div ref={top} tabIndex={-1} className="flex flex-col gap-5 outline-none" aria-live="off">
        {done ? <Done>{done}</Done> : null}
        {group.data && view === 'reverse' ? (
          <ReverseForm group={group.data} onDone={finish} onCancel={() => finish(null)} />
        ) : group.data && view === 'answer' ? (
          <AnswerForm group={group.data} onDone={finish} onCancel={() => finish(null)} />
        ) : group.data ? (
          <>
            <GroupDetails group={group.data} main={main} />
            <GroupActions group={group.data} onReverse={() => setView('reverse')} onAnswer={() => setView('answer')} />
          </>
        ) : group.error instanceof Problem && group.error.status === 404 ? (
          <p>{t('log.group.notFound')}</p>
        ) : group.isError ? (
          <Failed error={group.error} onRetry={() => void group.refetch()} />
        ) : (
          <Waiting />
        )}
      </div>
    </Sheet>
  );
}

/** The entry that was opened; else the first that a person made. */
function mainEntry(group: GroupView, number: string | null): EntryRow | undefined {
  return (
    group.entries.find((entry) => String(entry.sequence) === number) ??
    group.entries.find((entry) => !entry.addedByServer) ??
    group.entries[0]
  );
}

/** A sheet beside the list takes the focus when it opens; a modal one does so by itself. */
function useFocusAtOpening(desk: boolean) {
  const top = useRef<HTMLDivElement>(null);
  useEffect(() => {
    if (desk) top.current?.focus({ preventScroll: true });
  }, [desk]);
  return top;
}

function Waiting() {
  return (
    <div>
      <div className="h-4 w-40 bg-well" />
      <div className="mt-3 mb-6 h-11 w-48 bg-well" />
      <RowsSkeleton rows={6} rowClass="h-10" />
    </div>
  );
}
