import { useCallback, useMemo } from 'react';
import { forgetDraft, useDraft } from '../../lib/draft.ts';
import { newId } from '../../lib/new-id.ts';
import { type Action, weighInReducer } from './weigh-in-reducer.ts';
import { type LegIds, startWeighIn, type WeighIn, type WeighInStart } from './weigh-in-state.ts';

export const newLegIds = (): LegIds => ({ before: newId(), after: newId(), mass: newId(), hose: newId() });

const newGroupIds = () => ({ vacuum: newId(), fullCharge: newId(), part: newId(), open: newId(), main: newId() });

export const draftKey = (unitId: string, sheetId: string | null) => `weigh-in.${unitId}.${sheetId ?? 'free'}`;

/** A weigh-in that survives a reload: its state lies in this tab under its unit and sheet, ids included. */
export function useWeighIn(unitId: string, sheet: WeighInStart['sheet'], sheetId: string | null) {
  const key = draftKey(unitId, sheetId);
  const initial = useCallback(() => startWeighIn({ ids: newGroupIds(), sheet }), [sheet]);
  const [weighIn, change, startOver] = useDraft<WeighIn>(key, initial);
  const dispatch = useCallback((action: Action) => change((now) => weighInReducer(now, action)), [change]);
  const forget = useCallback(() => forgetDraft(key), [key]);
  return useMemo(() => ({ weighIn, dispatch, startOver, forget }), [weighIn, dispatch, startOver, forget]);
}

/** What is typed in a step before it is handed on: it lies beside the weigh-in, and a reload finds it again. */
export function useStepDraft<T>(weighIn: WeighIn, name: string, initial: () => T) {
  const [value, change] = useDraft<T>(`weigh-in.${weighIn.ids.main}.${name}.${weighIn.legs.length}`, initial);
  return [value, change] as const;
}

export interface StepProps {
  weighIn: WeighIn;
  dispatch: (action: Action) => void;
}
