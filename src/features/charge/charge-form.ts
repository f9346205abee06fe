import { createContext, useCallback, useContext, useReducer } from 'react';
import type { ChargeDraft } from './charge-draft.ts';
import type { Pointer } from './draft-to-request.ts';

type ListName = {
  [K in keyof ChargeDraft]: ChargeDraft[K] extends readonly { key: string }[] ? K : never;
}[keyof ChargeDraft];
type Row<K extends ListName> = ChargeDraft[K] extends readonly (infer R)[] ? R : never;

/** Changes of the draft. Each keeps all parts that it does not touch, so that their fields need not be drawn again. */
export interface DraftActions {
  set: <K extends keyof ChargeDraft>(name: K, value: ChargeDraft[K]) => void;
  setRow: <K extends ListName>(name: K, key: string, change: Partial<Row<K>>) => void;
  addRow: <K extends ListName>(name: K, row: Row<K>) => void;
  removeRow: (name: ListName, key: string) => void;
}

/** What every part of the form works with. */
export interface ChargeForm extends DraftActions {
  draft: ChargeDraft;
  errorAt: (pointer: Pointer) => string | undefined;
}

export const ChargeFormContext = createContext<ChargeForm | null>(null);

export function useChargeForm(): ChargeForm {
  const form = useContext(ChargeFormContext);
  if (!form) throw new Error('useChargeForm outside its form');
  return form;
}

/** The actions over a setter; they never change, so that a field drawn once need not be drawn for another's sake. */
export function useDraftActions(change: (next: (now: ChargeDraft) => ChargeDraft) => void): DraftActions {
  const set = useCallback<DraftActions['set']>((name, value) => change((now) => ({ ...now, [name]: value })), [change]);
  const setRow = useCallback<DraftActions['setRow']>(
    (name, key, part) =>
      change((now) => ({
        ...now,
        [name]: (now[name] as { key: string }[]).map((row) => (row.key === key ? { ...row, ...part } : row)),
      })),
    [change],
  );
  const addRow = useCallback<DraftActions['addRow']>(
    (name, row) => change((now) => ({ ...now, [name]: [...(now[name] as unknown[]), row] })),
    [change],
  );
  const removeRow = useCallback<DraftActions['removeRow']>(
    (name, key) =>
      change((now) => ({ ...now, [name]: (now[name] as { key: string }[]).filter((row) => row.key !== key) })),
    [change],
  );
  return { set, setRow, addRow, removeRow };
}

/** An open part of the form stays open when an error in it appears, and can be closed again. */
export function useOpen(hasError: boolean): [boolean, (open: boolean) => void] {
  const [open, setOpen] = useReducer((_: boolean, next: boolean) => next, false);
  return [open || hasError, setOpen];
}
