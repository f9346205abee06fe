import { useCallback, useMemo, useRef, useState } from 'react';
import { Link, type LoaderFunctionArgs, useLoaderData, useNavigate } from 'react-router-dom';
import type { ChargeRequest } from '../../../shared/charge/charge.schema.ts';
import { chargeSheetQueries, useMakeChargeSheet } from '../../api/charge-sheets.ts';
import { queryClient } from '../../api/query-client.ts';
import { requireSession } from '../../api/session.ts';
import { unitQueries } from '../../api/units.ts';
import { useDraft } from '../../lib/draft.ts';
import { loadMessages, useMessages } from '../../lib/messages.ts';
import { newId } from '../../lib/new-id.ts';
import { usePreferences } from '../../lib/preferences.ts';
import { Button } from '../../ui/button.tsx';
import { Done, Failed, Notice } from '../../ui/notice.tsx';
import { baseOf } from '../../ui/quantity-draft.ts';
import { type ChargeDraft, fieldUnits } from './charge-draft.ts';
import { ChargePage, type ChargeState } from './charge-page.tsx';
import { CylinderChoice } from './cylinder-choice.tsx';
import { draftOfUnit } from './unit-draft.ts';
import { roomTableOf } from './use-room.ts';

export async function loader({ request, params }: LoaderFunctionArgs) {
  const unitId = params.unitId ?? '';
  const [session] = await Promise.all([requireSession(request), loadMessages('charge-screen', 'charge')]);
  const [unit, bases, lineSets] = await Promise.all([
    queryClient.ensureQueryData(unitQueries.one(unitId)),
    queryClient.ensureQueryData(chargeSheetQueries.bases(unitId)),
    queryClient.ensureQueryData(unitQueries.lineSets(unitId)),
  ]);
  return { session, unit, basis: bases.items[0] ?? null, lineSet: lineSets.items[0] ?? null };
}

/** The charge of a unit on record: filled in, kept as an immutable sheet, and on to the scale. */
export function Component() {
  const t = useMessages();
  const { session, unit, basis, lineSet } = useLoaderData<typeof loader>();
  const preferences = usePreferences();
  const navigate = useNavigate();
  const units = useMemo(() => fieldUnits(preferences), [preferences]);
  const initial = useCallback(
    () =>
      draftOfUnit({ refrigerant: unit.refrigerant, basis, lineSet }, units, session.firm.gwpSet, preferences.locale),
    [unit, basis, lineSet, units, session, preferences.locale],
  );
  // A newer basis or line set begins a new draft: what was typed over the old one must not hide it.
  const key = `charge.${unit.id}.${basis?.id ?? ''}.${lineSet?.id ?? ''}`;
  const [draft, setDraft, clear] = useDraft<ChargeDraft>(key, initial);
  const { keep, isKeptNow, save } = useKeptSheet(unit.id, draft);

  const begin = async (request: ChargeRequest) => {
    const sheetId = await keep(request);
    if (sheetId === null) return;
    const cylinder = draft.cylinderId === '' ? '' : `&cylinder=${draft.cylinderId}`;
    await navigate(`/units/${unit.id}/weigh-in?sheet=${sheetId}${cylinder}`);
  };
  const mayKeep = session.permissions.includes('charge-sheets:make');

  const next = ({ answer, overRoom }: ChargeState) => {
    if (!mayKeep || answer.is !== 'done') return null;
    const { request, result } = answer;
    const isKept = isKeptNow(request);
    return (
      <div className="flex flex-col gap-2">
        {save.isError ? <Failed title={t('chargeScreen.unit.notSaved')} error={save.error} /> : null}
        {overRoom ? <Notice role="alert" title={t('chargeScreen.unit.overRoom')} /> : null}
        {isKept ? <Done>{t('chargeScreen.unit.saved')}</Done> : null}
        {result.weighInG > 0 ? (
          <Button kind="act" wide disabled={overRoom} busy={save.isPending} onClick={() => void begin(request)}>
            {t('chargeScreen.unit.start')}
          </Button>
        ) : (
          <Button kind="act" wide disabled={isKept} busy={save.isPending} onClick={() => void keep(request)}>
            {t('chargeScreen.unit.save')}
          </Button>
        )}
      </div>
    );
  };

  return (
    <ChargePage
      title={t('chargeScreen.unit.title', { unit: unit.tag })}
      lead={
        <>
          <Link to={`/units/${unit.id}`}>{unit.name}</Link>, {unit.siteName}
        </>
      }
      draft={draft}
      change={setDraft}
      next={next}
      cylinders={
        <CylinderChoice
          refrigerant={draft.refrigerant}
          personId={session.person.id}
          cylinderId={draft.cylinderId}
          onChoose={(cylinderId, cylinderGross) =>
            setDraft((now) => ({ ...now, cylinderId, ...(cylinderGross ? { cylinderGross } : {}) }))
          }
        />
      }
      foot={
        <div className="flex flex-col items-start gap-3">
          {basis ? null : <Notice>{t('chargeScreen.unit.noBasis')}</Notice>}
          {lineSet ? null : <Notice>{t('chargeScreen.unit.noLineSet')}</Notice>}
          <Button onClick={clear}>{t('chargeScreen.unit.asOnRecord')}</Button>
        </div>
      }
    />
  );
}

/** One sheet for one content: pressing twice, or going back and on again, keeps no second one. */
function useKeptSheet(unitId: string, draft: ChargeDraft) {
  const { locale } = usePreferences();
  const save = useMakeChargeSheet(unitId);
  const ids = useRef(new Map<string, string>());
  const [kept, setKept] = useState<{ id: string; text: string } | null>(null);

  const contentOf = (request: ChargeRequest) => {
    const areaM2 = baseOf('area', draft.roomArea, { locale });
    const document = draft.document.trim();
    const page = draft.page.trim();
    const { mounting, roomStandard: standard } = draft;
    return {
      request,
      manual: document === '' ? null : { document, page: page === '' ? null : page },
      room: areaM2 === null ? null : { areaM2, mounting, standard, manualTable: roomTableOf(draft, locale) },
    };
  };

  const keep = async (request: ChargeRequest): Promise<string | null> => {
    const content = contentOf(request);
    const text = JSON.stringify(content);
    if (kept?.text === text) return kept.id;
    const id = ids.current.get(text) ?? newId();
    ids.current.set(text, id);
    try {
      await save.mutateAsync({ id, ...content });
    } catch {
      return null; // shown from `save.error`; everything typed stays
    }
    setKept({ id, text });
    return id;
  };
  const isKeptNow = (request: ChargeRequest) => kept?.text === JSON.stringify(contentOf(request));
  return { keep, isKeptNow, save };
}
