import { useQuery } from '@tanstack/react-query';
import { useMemo } from 'react';
import { Link, type LoaderFunctionArgs, useLoaderData, useParams, useSearchParams } from 'react-router-dom';
import { chargeSheetQueries } from '../../api/charge-sheets.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession } from '../../api/session.ts';
import { unitQueries } from '../../api/units.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { Button } from '../../ui/button.tsx';
import { Caution } from '../../ui/caution.tsx';
import { Notice } from '../../ui/notice.tsx';
import { Page } from '../../ui/page.tsx';
import { ChargingStep } from './steps/charging-step.tsx';
import { CylinderStep } from './steps/cylinder-step.tsx';
import { DoneStep } from './steps/done-step.tsx';
import { HoseEndStep } from './steps/hose-end-step.tsx';
import { HosePlanStep } from './steps/hose-plan-step.tsx';
import { HoseStep } from './steps/hose-step.tsx';
import { LeaveOpenStep } from './steps/leave-open-step.tsx';
import { PurposeStep } from './steps/purpose-step.tsx';
import { ReviewStep } from './steps/review-step.tsx';
import { StartStep } from './steps/start-step.tsx';
import { TargetStep } from './steps/target-step.tsx';
import { VacuumStep } from './steps/vacuum-step.tsx';
import { WeighingStep } from './steps/weighing-step.tsx';
import { useWeighIn } from './use-weigh-in.ts';
import { isOverRoom, purposeOfSheet, useLoadedData, useWeighInData, WeighInContext } from './weigh-in-data.ts';

export async function loader({ params, request }: LoaderFunctionArgs) {
  await requireSession(request);
  const sheetId = new URL(request.url).searchParams.get('sheet');
  const [unit, sheet] = await Promise.all([
    queryClient.ensureQueryData(unitQueries.one(String(params.unitId))),
    sheetId ? queryClient.ensureQueryData(chargeSheetQueries.one(sheetId)) : null,
    loadMessages('weigh-in'),
  ]);
  return { unit, sheet };
}

/** The weigh-in against the scale: one question a screen, from the cylinder to the posted entry. */
export function Component() {
  const loaded = useLoaderData<typeof loader>();
  const { unitId = '' } = useParams();
  const unit = useQuery({ ...unitQueries.one(unitId), initialData: loaded.unit }).data;
  const [search] = useSearchParams();
  const data = useLoadedData(unit, loaded.sheet, search.get('cylinder'));
  const asked = useMemo(() => (loaded.sheet ? purposeOfSheet(loaded.sheet) : null), [loaded.sheet]);
  const nothing = loaded.sheet !== null && asked === null;
  return (
    <WeighInContext value={data}>
      {isOverRoom(loaded.sheet) ? (
        <Stopped reason="overRoom" />
      ) : nothing ? (
        <Stopped reason="nothing" />
      ) : (
        <WeighInSteps key={`${unitId} ${loaded.sheet?.id ?? ''}`} sheet={asked} sheetId={loaded.sheet?.id ?? null} />
      )}
    </WeighInContext>
  );
}

/** Nothing may be, or has to be, weighed in. */
function Stopped({ reason }: { reason: 'overRoom' | 'nothing' }) {
  const t = useMessages();
  const { unit } = useWeighInData();
  return (
    <Page field title={t('weighIn.title', { unit: unit.tag })}>
      <div className="page-gutter flex max-w-2xl flex-col items-start gap-5 pt-6">
        {reason === 'overRoom' ? (
          <Caution signal="danger">{t('weighIn.overRoom')}</Caution>
        ) : (
          <Notice title={t('weighIn.nothing')}>{t('weighIn.nothing.text')}</Notice>
        )}
        <Link to={`/units/${unit.id}`} className="inline-flex min-h-12 items-center">
          {t('weighIn.done.toUnit', { unit: unit.tag })}
        </Link>
      </div>
    </Page>
  );
}

function WeighInSteps({ sheet, sheetId }: { sheet: ReturnType<typeof purposeOfSheet>; sheetId: string | null }) {
  const { unitId = '' } = useParams();
  const { weighIn, dispatch, forget, startOver } = useWeighIn(unitId, sheet, sheetId);
  const props = { weighIn, dispatch };
  switch (weighIn.step) {
    case 'purpose':
      return sheetId === null ? <PurposeStep {...props} /> : <CylinderStep {...props} />;
    case 'vacuum':
      return <VacuumStep {...props} />;
    case 'target':
      return <TargetStep {...props} />;
    case 'cylinder':
      return <CylinderStep {...props} />;
    case 'weighing':
      return <WeighingStep {...props} />;
    case 'hose':
      return <HoseStep {...props} />;
    case 'hosePlan':
      return <HosePlanStep {...props} />;
    case 'start':
      return <StartStep {...props} />;
    case 'charging':
      return <ChargingStep {...props} />;
    case 'hoseEnd':
      return <HoseEndStep {...props} />;
    case 'review':
      return <ReviewStep {...props} />;
    case 'leaveOpen':
      return <LeaveOpenStep {...props} />;
    case 'done':
    case 'leftOpen':
      return <DoneStep weighIn={weighIn} forget={forget} />;
    default:
      // A draft of an earlier version of this page: its steps are no longer these.
      return <StartOver onPress={startOver} />;
  }
}

function StartOver({ onPress }: { onPress: () => void }) {
  const t = useMessages();
  return <Button onClick={onPress}>{t('weighIn.startOver')}</Button>;
}
