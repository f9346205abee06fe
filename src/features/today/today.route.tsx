import { useQuery } from '@tanstack/react-query';
import type { LoaderFunctionArgs } from 'react-router-dom';
import { requireSession, usePermission, useSession } from '../../api/session.ts';
import { todayQueries } from '../../api/today.ts';
import { useFormat } from '../../lib/format.ts';
import { deviceNow, toDayInput } from '../../lib/local-time.ts';
import { useMedia } from '../../lib/media.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { ButtonLink } from '../../ui/button.tsx';
import { Failed, RowsSkeleton } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { CameIn } from './came-in.tsx';
import { Contradictions } from './contradictions.tsx';
import { DueList } from './due-list.tsx';
import { FirstSteps } from './first-steps.tsx';
import { OnTheVan } from './on-the-van.tsx';
import { ToWeighBack } from './to-weigh-back.tsx';

export async function loader({ request }: LoaderFunctionArgs) {
  await requireSession(request);
  await loadMessages('today', 'log-screen', 'record-links', 'flags');
  return { day: toDayInput(deviceNow()) };
}

/** The day: for whoever drives a van what is on it and what waits for its scale; for the office what came in, contradicts and is due. */
export function Component() {
  const t = useMessages();
  const format = useFormat();
  const session = useSession();
  const today = useQuery(todayQueries.today());
  const isOffice = usePermission('registers:correct');
  const mayPost = usePermission('entries:post');
  const desk = useMedia('(width >= 48rem)');
  const { data } = today;
  const drives = !isOffice || (data !== undefined && data.onTheVan.length > 0);
  // The age of what waits is taken when the answer came: it is as fresh as the list.
  const at = today.dataUpdatedAt;
  return (
    <Page
      field={!isOffice}
      title={t('today.title')}
      status={<span>{at > 0 ? format.day(toDayInput(new Date(at))) : ''}</span>}
      {...(session ? { lead: t(isOffice ? 'today.leadOffice' : 'today.lead', { firm: session.firm.name }) } : {})}
      actions={mayPost && desk ? <ButtonLink to="/record">{t('recordLinks.record')}</ButtonLink> : undefined}
      next={
        mayPost && (!isOffice || !desk) ? (
          <div className="flex gap-3">
            {isOffice ? null : (
              <ButtonLink kind="act" wide to="/units?then=charge">
                {t('today.chargeUnit')}
              </ButtonLink>
            )}
            {desk ? null : (
              <ButtonLink wide to="/record">
                {t('recordLinks.record')}
              </ButtonLink>
            )}
          </div>
        ) : undefined
      }
    >
      <div className="page-gutter flex flex-col gap-8 pt-4">
        {today.isPending ? <RowsSkeleton rows={5} rowClass="h-24" /> : null}
        {today.isError && !data ? <Failed error={today.error} onRetry={() => void today.refetch()} /> : null}
        {data ? (
          <>
            {isOffice ? <FirstSteps today={data} /> : null}
            <div className={isOffice ? 'grid gap-x-12 gap-y-8 lg:grid-cols-[minmax(0,3fr)_minmax(0,2fr)]' : 'contents'}>
              {isOffice ? <Contradictions flags={data.contradicts} /> : null}
              {isOffice ? (
                <div className="flex flex-col gap-8">
                  {data.toWeighBack.length > 0 ? <ToWeighBack weighIns={data.toWeighBack} at={at} ofEverybody /> : null}
                  <DueList due={data.due} />
                </div>
              ) : mayPost ? (
                <ToWeighBack weighIns={data.toWeighBack} at={at} />
              ) : (
                <ButtonLink className="self-start" to="/units">
                  {t('today.readerUnits')}
                </ButtonLink>
              )}
            </div>
            {isOffice ? <CameIn rows={data.cameIn} /> : null}
            {drives && mayPost ? <OnTheVan cylinders={data.onTheVan} /> : null}
          </>
        ) : null}
      </div>
    </Page>
  );
}
