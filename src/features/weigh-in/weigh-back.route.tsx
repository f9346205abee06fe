import { useQuery } from '@tanstack/react-query';
import { Link, type LoaderFunctionArgs, useLoaderData } from 'react-router-dom';
import { chargeSheetQueries } from '../../api/charge-sheets.ts';
import { entryQueries } from '../../api/entries.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession } from '../../api/session.ts';
import { unitQueries } from '../../api/units.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Notice } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { WeighBackForm } from './weigh-back-form.tsx';
import { useLoadedData, WeighInContext } from './weigh-in-data.ts';

export async function loader({ params, request }: LoaderFunctionArgs) {
  await requireSession(request);
  const [group] = await Promise.all([
    queryClient.fetchQuery(entryQueries.group(String(params.groupId))),
    loadMessages('weigh-in'),
  ]);
  if (!group.unitId || !group.openWeighIn) throw new Response(null, { status: 404 });
  const [unit, sheet] = await Promise.all([
    queryClient.ensureQueryData(unitQueries.one(group.unitId)),
    group.chargeSheetId ? queryClient.ensureQueryData(chargeSheetQueries.one(group.chargeSheetId)) : null,
  ]);
  return { group, unit, sheet };
}

/** The end of a weigh-in that was left open: one screen, one reading. */
export function Component() {
  const loaded = useLoaderData<typeof loader>();
  const unit = useQuery({ ...unitQueries.one(loaded.unit.id), initialData: loaded.unit }).data;
  const data = useLoadedData(unit, loaded.sheet);
  const { group } = loaded;
  return (
    <WeighInContext value={data}>
      {group.closedByGroupId || group.reversedByGroupId ? (
        <NotOpen unitId={unit.id} tag={unit.tag} reversed={group.reversedByGroupId !== null} />
      ) : (
        <WeighBackForm key={group.id} group={group} />
      )}
    </WeighInContext>
  );
}

function NotOpen({ unitId, tag, reversed }: { unitId: string; tag: string; reversed: boolean }) {
  const t = useMessages();
  return (
    <Page field title={t('weighIn.weighBack.title', { unit: tag })}>
      <div className="page-gutter flex max-w-2xl flex-col items-start gap-5 pt-6">
        <Notice title={t(reversed ? 'weighIn.weighBack.reversed' : 'weighIn.weighBack.closed')} />
        <Link to={`/units/${unitId}`} className="inline-flex min-h-12 items-center">
          {t('weighIn.done.toUnit', { unit: tag })}
        </Link>
      </div>
    </Page>
  );
}
