import { useQuery } from '@tanstack/react-query';
import { Link, type LoaderFunctionArgs, useLoaderData } from 'react-router-dom';
import { useExportPath } from '../../api/exports.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession, usePermission } from '../../api/session.ts';
import { todayQueries } from '../../api/today.ts';
import { unitQueries } from '../../api/units.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { ButtonLink } from '../../ui/button.tsx';
import { Page } from '../../ui/page.tsx';
import { TakeOutLink } from '../../ui/take-out-link.tsx';
import { BookFigure } from './book-figure.tsx';
import { ChargeBasisPart } from './charge-basis-part.tsx';
import { ChargeSheetsPart } from './charge-sheets-part.tsx';
import { FullChargePart } from './full-charge-part.tsx';
import { LineSetPart } from './line-set-part.tsx';
import { OpenFlags } from './open-flags.tsx';
import { RecordLinks } from './record-links.tsx';
import { UnitFacts } from './unit-facts.tsx';
import { UnitLog } from './unit-log.tsx';

export async function loader({ params, request }: LoaderFunctionArgs) {
  await Promise.all([requireSession(request), loadMessages('units-screen', 'log-screen', 'record-links', 'flags')]);
  return queryClient.ensureQueryData(unitQueries.one(String(params.unitId)));
}

/** One unit: what its book holds against its full charge, where it stands, what the manual says, and all that happened to it. */
export function Component() {
  const t = useMessages();
  const loaded = useLoaderData<typeof loader>();
  const unit = useQuery({ ...unitQueries.one(loaded.id), initialData: loaded }).data;
  const mayPost = usePermission('entries:post');
  const mayWrite = usePermission('units:write');
  const mayProve = usePermission('exports:make');
  const unitLog = useExportPath('unitLog', { unitId: unit.id });
  const today = useQuery({ ...todayQueries.today(), enabled: mayPost });
  const open = today.data?.toWeighBack.find((weighIn) => weighIn.unitId === unit.id);
  const charge = (
    <ButtonLink kind="act" wide to={`/units/${unit.id}/charge`}>
      {t('units.charge')}
    </ButtonLink>
  );
  return (
    <Page
      title={t('units.unit.title', { tag: unit.tag })}
      lead={
        <>
          {unit.name}, <Link to={`/units?siteId=${unit.siteId}`}>{unit.siteName}</Link>, {unit.customerName}
        </>
      }
      status={<span className="desk:hidden">{unit.refrigerant}</span>}
      actions={
        <>
          <TakeOutLink to={unitLog} label={t('units.logAsPdf')} />
          {mayProve ? (
            <Link to={`/log/proof?unitId=${unit.id}`} className="inline-flex min-h-12 items-center">
              {t('units.proof')}
            </Link>
          ) : null}
          {mayWrite ? (
            <Link to={`/units/${unit.id}/edit`} className="inline-flex min-h-12 items-center">
              {t('units.edit')}
            </Link>
          ) : null}
        </>
      }
      next={mayPost ? <div className="desk:hidden">{charge}</div> : undefined}
    >
      <div className="page-gutter grid gap-x-14 gap-y-8 pt-4 lg:grid-cols-[minmax(0,3fr)_minmax(0,2fr)]">
        <div className="flex min-w-0 flex-col gap-8">
          <BookFigure unit={unit} />
          {mayPost ? (
            <div className="grid grid-cols-2 gap-3 desk:flex desk:flex-wrap">
              <div className="hidden w-56 desk:block">{charge}</div>
              {open ? (
                <ButtonLink className="min-h-14" to={`/weigh-back/${open.groupId}`}>
                  {t('units.weighBack', { tag: open.cylinderTag })}
                </ButtonLink>
              ) : null}
              <ButtonLink className="min-h-14" to={`/units/${unit.id}/weigh-in`}>
                {t('units.weighIn')}
              </ButtonLink>
              <RecordLinks unitId={unit.id} />
            </div>
          ) : null}
          <OpenFlags unitId={unit.id} />
          <ChargeSheetsPart unit={unit} mayPost={mayPost} />
          <UnitLog unitId={unit.id} />
        </div>
        <div className="flex min-w-0 flex-col gap-8">
          <UnitFacts unit={unit} />
          <FullChargePart unit={unit} mayWrite={mayWrite} />
          <ChargeBasisPart unit={unit} mayWrite={mayWrite} />
          <LineSetPart unit={unit} mayWrite={mayWrite} />
        </div>
      </div>
    </Page>
  );
}
