import type { GroupKind, UnitCondition } from '../entry-group.schema.ts';
import type { FlagCode } from '../flag.ts';
import { kindNeedsId, type PlaceFields, type PlaceKind } from '../place.ts';
import type {
  EmptyBy,
  ExpectedBook,
  ExpectedEmission,
  HowKnown,
  OpenFlag,
  PostedLine,
  ScenarioAct,
  StartCylinder,
  StartUnit,
  SymbolicEntry,
  SymbolicGroup,
  SymbolicReading,
} from './scenario.ts';

export const R410A = 'R-410A';
export const R22 = 'R-22';
export const R407C = 'R-407C';
const TARE_G = 7_700;

/** An instant of the cases: day 1 is 1 March 2026, UTC. */
export function at(day: number, time = '10:00'): string {
  return `${new Date(Date.UTC(2026, 2, day)).toISOString().slice(0, 10)}T${time}:00Z`;
}
/** Before everything: opening entries and registers. */
export const START_AT = '2026-01-05T08:00:00Z';

export const cylinder = (contentG: string | null, over: Partial<StartCylinder> = {}): StartCylinder => ({
  refrigerant: R410A,
  tareG: String(TARE_G),
  nonRefillable: false,
  contentG,
  ...over,
});
export const newUnit = (massG: string, fullChargeG: string): StartUnit => ({
  refrigerant: R410A,
  initial: { state: 'factory', massG },
  fullChargeG,
});
export const knownUnit = (massG: string, fullChargeG: string | null, refrigerant = R410A): StartUnit => ({
  refrigerant,
  initial: { state: 'opening', massG },
  fullChargeG,
});
export const unknownUnit = (fullChargeG: string | null): StartUnit => ({
  refrigerant: R410A,
  initial: { state: 'notKnown' },
  fullChargeG,
});

/** `C1`, `R1`, `N1` are cylinders, `U`, `U2` units; `atmosphere:hose`; a party's symbol is its kind. */
export function placeOf(symbol: string): PlaceFields {
  if (/^[CRN]\d$/.test(symbol)) return { place: 'cylinder', id: symbol };
  if (/^U\d?$/.test(symbol)) return { place: 'unit', id: symbol };
  const [place, as] = symbol.split(':') as [PlaceKind, PlaceFields['as']];
  return kindNeedsId(place) ? { place, id: place } : { place, ...(as ? { as } : {}) };
}

/** `arrow` is `C1 -> U`. */
function ends(arrow: string): { from: string; to: string } {
  const [from = '', to = ''] = arrow.split(' -> ');
  return { from, to };
}

export function mass(
  arrow: string,
  value: string,
  over: { unit?: 'g' | 'oz'; refrigerant?: string | null; howKnown?: HowKnown } = {},
): SymbolicEntry {
  const { from, to } = ends(arrow);
  const { unit = 'g', refrigerant = R410A, howKnown = 'weighed' } = over;
  return { refrigerant, mass: { value, unit }, from: placeOf(from), to: placeOf(to), howKnown };
}
export const hoseLost = (from: string, value = '28'): SymbolicEntry =>
  mass(`${from} -> atmosphere:hose`, value, { howKnown: 'estimated' });

/** A gross reading that shows `netG` above the stamped tare. With `hoseG` the hose was full when it was taken. */
export function reading(
  cylinderId: string,
  moment: 'before' | 'after' | 'only',
  netG: string,
  over: { hoseG?: string } = {},
): SymbolicReading {
  const hose = over.hoseG ? { hoseFull: true, hose: { value: over.hoseG, unit: 'g' as const } } : {};
  const value = String(Number(netG) + TARE_G);
  return { cylinderId, toolId: 'scale', moment, mode: 'gross', value, unit: 'g', ...hose };
}
export const readingGross = (
  cylinderId: string,
  moment: 'only' | 'before' | 'after',
  value: string,
): SymbolicReading => ({
  cylinderId,
  toolId: 'scale',
  moment,
  mode: 'gross',
  value,
  unit: 'g',
});
export const readingZeroed = (
  cylinderId: string,
  moment: 'before' | 'after',
  value: string,
  unit: 'g' | 'oz',
): SymbolicReading => ({ cylinderId, toolId: 'scale', moment, mode: 'zeroed', value, unit });
/** Before and after. */
export const readings = (cylinderId: string, beforeNetG: string, afterNetG: string): SymbolicReading[] => [
  reading(cylinderId, 'before', beforeNetG),
  reading(cylinderId, 'after', afterNetG),
];

export const says = (id: string, is: UnitCondition, by?: EmptyBy) => ({
  about: 'unit' as const,
  id,
  is,
  ...(by ? { by } : {}),
});

export function group(
  groupId: string,
  kind: GroupKind,
  occurredAt: string,
  parts: Partial<Omit<SymbolicGroup, 'groupId' | 'kind' | 'occurredAt'>>,
): SymbolicGroup {
  return { groupId, kind, occurredAt, readings: [], entries: [], ...parts };
}
export const post = (
  groupId: string,
  kind: GroupKind,
  occurredAt: string,
  parts: Partial<Omit<SymbolicGroup, 'groupId' | 'kind' | 'occurredAt'>>,
): ScenarioAct => ({ act: 'post', group: group(groupId, kind, occurredAt, parts) });
export const NOTHING: ScenarioAct = { act: 'nothing' };

/** A posted entry as entered. */
export function line(arrow: string, massG: string, over: Partial<PostedLine> = {}): PostedLine {
  const { from, to } = ends(arrow);
  const plain = { refrigerant: R410A, addedByServer: false, corrects: null, atLeast: false, takenBack: false };
  return { from, to, massG, ...plain, ...over };
}
/** Added by the server for the step's own statements. */
export const added = (arrow: string, massG: string, over: Partial<PostedLine> = {}): PostedLine =>
  line(arrow, massG, { addedByServer: true, ...over });
/** The server's correction of what stood at `corrects`. */
export const again = (corrects: string, arrow: string, massG: string, over: Partial<PostedLine> = {}): PostedLine =>
  line(arrow, massG, { addedByServer: true, corrects, ...over });
export const reversal = (corrects: string, arrow: string, massG: string): PostedLine =>
  line(arrow, massG, { corrects });

export const book = (massG: string, refrigerant = R410A): ExpectedBook => ({
  known: true,
  byRefrigerant: massG === '0' ? {} : { [refrigerant]: massG },
});
export const mixedBook = (byRefrigerant: Record<string, string>): ExpectedBook => ({ known: true, byRefrigerant });
export const sumOnly = (massG: string): ExpectedBook => ({ known: false, byRefrigerant: { [R410A]: massG } });
/** Books of R-410A by symbol. */
export const books = (byPlace: Record<string, string>): Record<string, ExpectedBook> =>
  Object.fromEntries(Object.entries(byPlace).map(([symbol, massG]) => [symbol, book(massG)]));

export const flag = (code: FlagCode, about: string, massG: string | null = null): OpenFlag => ({ code, about, massG });

export const emitted = (
  as: ExpectedEmission['as'],
  massG: string,
  over: { refrigerant?: string; atLeastG?: string } = {},
): ExpectedEmission => ({ as, massG, refrigerant: over.refrigerant ?? R410A, atLeastG: over.atLeastG ?? '0' });
