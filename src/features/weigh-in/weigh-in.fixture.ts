import type { EntryGroupRequest } from '../../../shared/ledger/entry-group.schema.ts';
import { microgramsOfTyped } from '../../../shared/units/mass.ts';
import { emptyReading, type Key, type KeyedReading, press, type ReadingUnit } from './scale-reading.ts';
import { type Action, weighInReducer } from './weigh-in-reducer.ts';
import { type Habits, startWeighIn, type WeighIn } from './weigh-in-state.ts';

/** Ids as the browser makes them (version 7), numbered so that a test can name them. */
export const idOf = (n: number): string => `0193a000-0000-7000-8000-${String(n).padStart(12, '0')}`;
export const UNIT = idOf(1);
export const C1 = idOf(11);
export const C2 = idOf(12);
export const R1 = idOf(13);
export const SCALE = idOf(21);
export const SHEET = idOf(31);

export const AT = {
  vacuum: '2026-11-30T14:00:00.000Z',
  start: '2026-11-30T15:00:00.000Z',
  end: '2026-11-30T15:20:00.000Z',
  later: '2026-11-30T15:40:00.000Z',
};

/** Keys pressed one after the other. */
export function keyed(text: string, unit: ReadingUnit): KeyedReading {
  return [...text].reduce(
    (reading, sign) => press(reading, sign === '.' ? 'point' : sign === 'l' ? 'pounds' : (sign as Key)),
    emptyReading(unit),
  );
}

const GROUP_IDS = { vacuum: idOf(41), fullCharge: idOf(42), part: idOf(43), open: idOf(44), main: idOf(45) };

export const legIds = (n: number) => ({
  before: idOf(100 * n + 1),
  after: idOf(100 * n + 2),
  mass: idOf(100 * n + 3),
  hose: idOf(100 * n + 4),
});

export const habits = (change: Partial<Habits> = {}): Habits => ({
  toolId: SCALE,
  mode: 'gross',
  unit: 'g',
  hose: { full: true, content: { value: '28', unit: 'g' } },
  hosePlan: 'lost',
  ...change,
});

/** A weigh-in of so many grams to a charge sheet, to which these things happened in order. */
export function toSheet(targetG: number | { value: string; unit: 'oz' }, ...actions: Action[]): WeighIn {
  const target = typeof targetG === 'number' ? { value: String(targetG), unit: 'g' as const } : targetG;
  const begun = startWeighIn({ ids: GROUP_IDS, sheet: { id: SHEET, purpose: 'extraCharge', target } });
  return thenDo(begun, ...actions);
}

export const withoutSheet = (...actions: Action[]): WeighIn =>
  thenDo(startWeighIn({ ids: GROUP_IDS, sheet: null }), ...actions);

export const thenDo = (weighIn: WeighIn, ...actions: Action[]): WeighIn => actions.reduce(weighInReducer, weighIn);

export const cylinder = (cylinderId: string, n: number, change: Partial<Habits> = {}): Action => ({
  type: 'cylinder',
  cylinderId,
  ids: legIds(n),
  habits: habits(change),
});

export const from = (text: string, unit: ReadingUnit = 'g'): Action[] => [
  { type: 'keyStart', reading: keyed(text, unit) },
  { type: 'start', at: AT.start },
];
export const to = (text: string, unit: ReadingUnit = 'g', change = false): Action[] => [
  { type: 'keyNow', reading: keyed(text, unit) },
  { type: 'end', at: AT.end, change },
];

/** `C1 -> unit 90`: what a group moves, in grams, for comparing with a worked case. */
export function moves({ entries }: EntryGroupRequest): string[] {
  const names = new Map([
    [UNIT, 'U'],
    [C1, 'C1'],
    [C2, 'C2'],
    [R1, 'R1'],
  ]);
  const name = ({ place, id, as }: NonNullable<EntryGroupRequest['entries']>[number]['from']) =>
    id ? names.get(id) : as ? `${place}, ${as}` : place;
  return (entries ?? []).map(
    (entry) => `${name(entry.from)} -> ${name(entry.to)} ${Number(microgramsOfTyped(entry.mass)) / 1e6}`,
  );
}
